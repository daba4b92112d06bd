import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { xrayGeometrySchema, type XrayGeometry } from '../../../shared/domain/geometry/x-ray';
import { phantomDefinitionSchema, type DefinitionOf } from '../../../shared/domain/phantom-definition';
import { norm2 } from '../../../solvers/core/vector';
import { prepareRun, runLevel } from '../../../solvers/campaign/run';
import { filteredProjection, redundancyWeights } from '../../../solvers/methods/projection/filtered-projection';
import { rampKernel, windowKeys, type WindowKey } from '../../../solvers/methods/projection/ramp-kernels';
import { getMethod } from '../../../solvers/methods/registry';
import { spreadOrder } from '../../../solvers/methods/sart';
import { createProblem, describeProblem, simulate } from '../../../solvers/problems/registry';

interface Reference {
  readonly cells: number;
  readonly views: number;
  readonly size: number;
  readonly stride: number;
  readonly sinogram: readonly (readonly number[])[];
  readonly values: Readonly<Record<WindowKey, readonly (readonly number[])[]>>;
  readonly tolerance: Readonly<Record<WindowKey, number>>;
}
const reference = JSON.parse(readFileSync(new URL('../../reference/filtered-back-projection.json', import.meta.url), 'utf8')) as Reference;

const parallel = (changes: Partial<XrayGeometry> = {}): XrayGeometry =>
  xrayGeometrySchema.parse({ body: { kind: 'disc', radius: 1 }, beam: 'parallel', views: 60, arcDeg: 180, detectors: 65, detectorSpacing: 2 / 64, cells: 40, ...changes });
const fan = (changes: Partial<XrayGeometry> = {}): XrayGeometry =>
  parallel({ beam: 'fan', views: 120, arcDeg: 360, sourceDistance: 2.5, detectorDistance: 1.5, detectorSpacing: 0.058, ...changes });

describe('Ramp filters', () => {
  it('have the published samples at the full band (Kak and Slaney 1988, equation 3.61; Shepp and Logan 1974)', () => {
    const step = 0.25;
    const lak = rampKernel('ram-lak', step, 8, 1);
    const logan = rampKernel('shepp-logan', step, 8, 1);
    for (let n = 0; n < 8; n++) {
      expect(lak[n]).toBeCloseTo(n === 0 ? 1 / (4 * step ** 2) : n % 2 === 0 ? 0 : -1 / (n * Math.PI * step) ** 2, 12);
      expect(logan[n]).toBeCloseTo(-2 / ((Math.PI * step) ** 2 * (4 * n * n - 1)), 12);
    }
  });

  it('are the inverse Fourier transforms of the windowed ramp at any cut-off (midpoint quadrature)', () => {
    const windows: Record<WindowKey, (share: number) => number> = {
      'ram-lak': () => 1,
      'shepp-logan': (share) => Math.sin((Math.PI * share) / 2) / ((Math.PI * share) / 2),
      hann: (share) => (1 + Math.cos(Math.PI * share)) / 2,
    };
    for (const window of windowKeys)
      for (const cutoff of [0.3, 0.5, 1]) {
        const kernel = rampKernel(window, 0.1, 6, cutoff);
        const limit = cutoff / 0.2;
        for (let n = 0; n < 6; n++) {
          let sum = 0;
          const count = 20000;
          for (let k = 0; k < count; k++) {
            const w = ((k + 0.5) / count) * limit;
            sum += 2 * w * windows[window](w / limit) * Math.cos(2 * Math.PI * w * n * 0.1) * (limit / count);
          }
          expect(kernel[n]).toBeCloseTo(sum, 5);
        }
      }
  });
});

describe('Filtered back-projection of parallel beams', () => {
  it.each(windowKeys)('equals that of scikit-image, window %s', (window) => {
    const { cells, views, size, stride, sinogram, values, tolerance } = reference;
    const geometry = parallel({ body: { kind: 'disc', radius: 10 }, views, detectors: cells, detectorSpacing: 1 });
    const points: number[] = [];
    // Its rows run from the top, its middle is at size // 2.
    for (let i = 0; i < size; i += stride) for (let j = 0; j < size; j += stride) points.push(j - Math.floor(size / 2), Math.floor(size / 2) - i);
    const image = filteredProjection(geometry, window, 1).at(Float64Array.from(sinogram.flat()), Float64Array.from(points));
    const expected = values[window].flat();
    const largest = Math.max(...expected.map(Math.abs));
    image.forEach((value, k) => expect(Math.abs(value - expected[k])).toBeLessThan(tolerance[window] * largest));
  });
});

const disc = { kind: 'ellipse' as const, label: 'disc', x: 0.2, y: 0.1, semiAxisA: 0.4, semiAxisB: 0.4, value: 1 };
const definitionOf = (geometry: XrayGeometry) => phantomDefinitionSchema.parse({ family: 'x-ray', geometry, truth: { kind: 'shapes', background: 0, combine: 'add', shapes: [disc] } }) as DefinitionOf<'x-ray'>;

describe('Filtered back-projection of every beam', () => {
  const full = [['parallel, half a turn', parallel()], ['parallel, a full turn', parallel({ arcDeg: 360, views: 120 })], ['parallel, 220 degrees', parallel({ arcDeg: 220, views: 74 })],
    ['fan, a full turn', fan()], ['fan, short scan', fan({ arcDeg: 240, views: 80 })]] as const;
  it.each(full)('gives the value of a disc at its middle and 0 outside it: %s', (_, geometry) => {
    const { clean } = simulate(definitionOf(geometry));
    const image = filteredProjection(geometry, 'shepp-logan', 1).at(clean, Float64Array.of(0.2, 0.1, 0.3, 0.05, -0.5, 0.1, 0.2, -0.6));
    // Sampling of views and cells leaves about a percent.
    [1, 1, 0, 0].forEach((value, k) => expect(Math.abs(image[k] - value)).toBeLessThan(0.03));
  });

  it('shares every line that is seen twice: the weights of the two sum to 1 (Parker 1982)', () => {
    for (const geometry of [fan({ arcDeg: 240, views: 720, detectors: 33 }), fan({ arcDeg: 300, views: 720, detectors: 33 }), parallel({ arcDeg: 250, views: 720 })]) {
      const { views, detectors, arcDeg } = geometry;
      const weights = redundancyWeights(geometry);
      for (const cell of [0, 7, 20])
        for (let view = 3; view < views; view += 31) {
          const fanDeg = geometry.beam === 'fan' ? (Math.atan(((cell - (detectors - 1) / 2) * geometry.detectorSpacing) / 4) * 180) / Math.PI : 0;
          const opposite = ((((view + 0.5) * arcDeg) / views + 180 - 2 * fanDeg) % 360) / (arcDeg / views) - 0.5;
          const mirrored = detectors - 1 - cell;
          if (opposite > views - 1) {
            expect(weights[view * detectors + cell]).toBeGreaterThan(0.98);
            continue;
          }
          const other = weights[Math.round(opposite) * detectors + mirrored];
          expect(Math.abs(weights[view * detectors + cell] + other - 1)).toBeLessThan(0.02);
        }
    }
    expect(redundancyWeights(parallel()).every((weight) => weight === 1)).toBe(true);
    expect(redundancyWeights(fan()).every((weight) => weight === 0.5)).toBe(true);
  });

  it('follows the formula of Parker 1982 at the short scan', () => {
    const half = Math.atan((32 * 0.058) / 4);
    const arcDeg = 180 + (2 * half * 180) / Math.PI;
    const geometry = fan({ arcDeg, views: 500 });
    const weights = redundancyWeights(geometry);
    for (const cell of [10, 32, 50])
      for (const view of [0, 10, 40, 60]) {
        // His fan angle runs the other way: gamma = -(u / D).
        const gamma = Math.atan(((cell - 32) * 0.058) / 4);
        const beta = (((view + 0.5) * arcDeg) / 500 / 180) * Math.PI;
        const expected = beta < 2 * half + 2 * gamma ? Math.sin((Math.PI / 4) * (beta / (half + gamma))) ** 2 : 1;
        expect(weights[view * 65 + cell]).toBeCloseTo(expected, 6);
      }
  });
});

describe('Methods that only X-ray data have', () => {
  it('run on a phantom, and beat plain back-projection', () => {
    for (const geometry of [parallel({ views: 24, detectors: 40, detectorSpacing: 0.05, cells: 24 }), fan({ views: 30, detectors: 40, detectorSpacing: 0.1, cells: 24 })]) {
      const definition = definitionOf(geometry);
      const problem = createProblem(describeProblem(definition));
      const simulated = simulate(definition, undefined, problem);
      const errorOf = (method: string, rule: Parameters<typeof prepareRun>[0]['rule']): number => {
        const trials = runLevel(prepareRun({ problem, method, parameters: {}, rule }), simulated, { benchSeed: 1, phantomHash: 'x', levelIndex: 3, level: 0.03, draws: [0, 1] });
        return Math.max(...trials.map((trial) => trial.metrics['relative-l2-error'].value ?? NaN));
      };
      const plain = errorOf('back-projection', null);
      expect(plain).toBeLessThan(1);
      for (const method of ['filtered-back-projection', 'sart']) expect(errorOf(method, { key: 'discrepancy', safetyFactor: 1.05 })).toBeLessThan(0.6 * plain);
      expect(errorOf('filtered-back-projection', { key: 'fixed', value: 0.7 })).toBeLessThan(0.6 * plain);
    }
  });

  it('SART with one view is one step of SIRT', () => {
    const geometry = parallel({ views: 1, arcDeg: 1, detectors: 20, detectorSpacing: 0.1, cells: 10 });
    const problem = createProblem({ family: 'x-ray', geometry, dataKind: 'absolute', background: 0.2 });
    const data = problem.evaluate(problem.background().map((v, j) => v + (j % 3)));
    const noise = { norm: 0, level: 0 };
    const sart = getMethod('sart').prepare(problem, { relaxation: 1 }, { key: 'fixed', value: 3 }).reconstruct(data, noise);
    const sirt = getMethod('sirt').prepare(problem, { relaxation: 1 }, { key: 'fixed', value: 3 }).reconstruct(data, noise);
    expect(norm2(sart.x.map((value, j) => value - sirt.x[j]))).toBeLessThan(1e-12);
  });

  it('takes every view once a sweep', () => {
    for (const views of [1, 2, 3, 8, 30, 45, 60, 180]) expect([...spreadOrder(views)].sort((a, b) => a - b)).toEqual(Array.from({ length: views }, (_, k) => k));
  });

  it('is refused by name on data of another family', () => {
    const problem = createProblem({ family: 'x-ray', geometry: parallel({ views: 2, detectors: 4, detectorSpacing: 0.5, cells: 8 }), dataKind: 'absolute', background: 0 });
    const other = { ...problem, family: 'deblurring' as const };
    expect(() => prepareRun({ problem: other, method: 'filtered-back-projection', parameters: {}, rule: null })).toThrow(/does not serve the family 'deblurring'/);
  });
});
