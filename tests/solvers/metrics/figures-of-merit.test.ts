import { describe, expect, it } from 'vitest';
import reference from '../../reference/figures-of-merit.json';
import type { MetricInput, Target } from '../../../solvers/core/types';
import { assign } from '../../../solvers/metrics/assignment';
import { gridGeometry } from '../../../solvers/metrics/grid-geometry';
import { evaluateMetrics, metrics } from '../../../solvers/metrics/registry';
import { discGrid } from '../../support/synthetic-problem';

const grid = discGrid(64);
const { x: px, y: py } = gridGeometry(grid);
const count = grid.inside.length;

function image(value: (x: number, y: number) => number): Float64Array {
  return Float64Array.from({ length: count }, (_, k) => value(px[k], py[k]));
}
function input(estimate: Float64Array, targets: readonly Target[], background = 0, truth = estimate): MetricInput {
  return { truth, background: new Float64Array(count).fill(background), estimate, grid, targets, residualNorm: null, noiseNorm: 0 };
}
const pictures: Record<string, (x: number, y: number) => number> = {
  gauss: (x, y) => Math.exp(-((x - 0.4) ** 2 + (y - 0.2) ** 2) / (2 * 0.12 ** 2)),
  disc: (x, y) => ((x - 0.4) ** 2 + (y - 0.2) ** 2 <= 0.25 ** 2 ? 1 : 0),
  ringing: (x, y) => {
    const r2 = (x - 0.4) ** 2 + (y - 0.2) ** 2;
    return Math.exp(-r2 / (2 * 0.12 ** 2)) * (1 - (0.5 * r2) / 0.12 ** 2);
  },
  ellipse: (x, y) => (((x - 0.4) / 0.3) ** 2 + ((y - 0.2) / 0.15) ** 2 <= 1 ? 1 : 0),
};

// Figures of merit of Adler et al. 2009 on a 64 x 64 disc, computed with numpy 1.24.2. Counts are exact; sums differ by rounding (1e-12).
describe.each(reference.cases.map((item) => [item.id, item] as const))('%s', (id, { inputs, values }) => {
  const [x, y, radius] = inputs.target;
  const target: Target = { label: 't', x, y, area: Math.PI * radius * radius, contrast: inputs.contrast };
  const upright = evaluateMetrics(input(image(pictures[id]), [target]));

  it('has the published figures', () => {
    expect(count).toBe(values.A0);
    expect(upright['amplitude-response'].value).toBeCloseTo(values.AR, 11);
    expect(upright['position-error'].value).toBeCloseTo(values.PE_vector_distance, 11);
    expect(upright['radial-position-difference'].value).toBeCloseTo(values.PE, 11);
    expect(upright.resolution.value).toBeCloseTo(values.RES, 12);
    expect(upright['shape-deformation'].value).toBeCloseTo(values.SD, 12);
    expect(upright.ringing.value).toBeCloseTo(values.RNG, 11);
  });
  it('are the same for a resistive target of the same shape over a background', () => {
    const picture = pictures[id];
    const turned = evaluateMetrics(input(image((a, b) => 5 - picture(a, b)), [{ ...target, contrast: -target.contrast }], 5));
    for (const key of ['amplitude-response', 'position-error', 'radial-position-difference', 'resolution', 'shape-deformation', 'ringing']) expect(turned[key].value).toBeCloseTo(upright[key].value!, 11);
  });
});

describe('several targets', () => {
  const blob = (cx: number, cy: number) => (x: number, y: number) => Math.exp(-((x - cx) ** 2 + (y - cy) ** 2) / (2 * 0.08 ** 2));
  const left: Target = { label: 'left', x: -0.5, y: 0, area: 0.05, contrast: 1 };
  const right: Target = { label: 'right', x: 0.5, y: 0.1, area: 0.05, contrast: 1 };
  it('are matched one to one, in whatever order they are declared', () => {
    const estimate = image((x, y) => blob(-0.45, 0)(x, y) + blob(0.5, 0.2)(x, y));
    // The Gaussians' centroids to a tenth of a pixel (1/32 m): discretisation of the quarter-amplitude set.
    const expected = (0.05 + 0.1) / 2;
    for (const targets of [[left, right], [right, left]]) {
      const { value, reason } = evaluateMetrics(input(estimate, targets))['position-error'];
      expect(Math.abs(value! - expected)).toBeLessThan(0.1 / 32);
      expect(reason).toBeUndefined();
    }
  });
  it('opposite contrasts are looked for in the rise and in the fall', () => {
    const estimate = image((x, y) => 1 + blob(-0.5, 0)(x, y) - 0.5 * blob(0.5, 0.1)(x, y));
    const values = evaluateMetrics(input(estimate, [left, { ...right, contrast: -0.5 }], 1));
    expect(values['position-error'].value).toBeLessThan(0.1 / 32);
    expect(evaluateMetrics(input(estimate, [left, { ...right, contrast: -1 }], 1))['amplitude-response']).toEqual({ value: null, reason: 'The contrasts of the targets cancel.' });
  });
  it('a target without a spot of its own takes the nearest and is named', () => {
    const { value, reason } = evaluateMetrics(input(image(blob(-0.5, 0)), [left, right]))['position-error'];
    expect(reason).toBe('1 of 2 targets had no spot of their own.');
    expect(Math.abs(value! - Math.hypot(1, 0.1) / 2)).toBeLessThan(0.1 / 32);
  });
  it('are assigned at the least total distance (checked against all permutations)', () => {
    let seed = 1;
    const next = (): number => (seed = (seed * 16807) % 2147483647) / 2147483647;
    for (let round = 0; round < 50; round++) {
      const [rows, cols] = [3, 4 + (round % 2)];
      const cost = Float64Array.from({ length: rows * cols }, next);
      let best = Infinity;
      for (let a = 0; a < cols; a++) for (let b = 0; b < cols; b++) for (let c = 0; c < cols; c++) if (a !== b && b !== c && a !== c) best = Math.min(best, cost[a] + cost[cols + b] + cost[2 * cols + c]);
      const found = assign(cost, rows, cols);
      expect(new Set(found).size).toBe(rows);
      // Three additions of numbers below 1.
      expect(Math.abs(found.reduce((sum, column, row) => sum + cost[row * cols + column], 0) - best)).toBeLessThan(1e-14);
    }
  });
});

describe('error norms', () => {
  const truth = image((x, y) => (x * x + (y - 0.3) ** 2 <= 0.04 ? 3 : 1));
  const background = new Float64Array(count).fill(1);
  const base: MetricInput = { truth, background, estimate: background, grid, targets: [], residualNorm: 0.3, noiseNorm: 0.2 };
  it('the trivial reconstruction has exactly 1 in every relative error', () => {
    const values = evaluateMetrics(base);
    for (const key of ['relative-l2-error', 'relative-l1-error', 'relative-sup-error', 'relative-h1-error']) expect(values[key].value).toBe(1);
    expect(values['sup-error'].value).toBe(2);
    expect(values['data-residual-ratio'].value).toBe(0.3 / 0.2);
  });
  it('by hand: one pixel wrong by 0.5', () => {
    const estimate = Float64Array.from(truth);
    estimate[100] += 0.5;
    const discPixels = truth.reduce((sum, value) => sum + (value > 1 ? 1 : 0), 0);
    const values = evaluateMetrics({ ...base, estimate });
    expect(values['relative-l2-error'].value).toBeCloseTo(0.5 / Math.sqrt(4 * discPixels), 14);
    expect(values['relative-l1-error'].value).toBeCloseTo(0.5 / (2 * discPixels), 14);
    expect(values['sup-error']).toEqual({ value: 0.5, at: [px[100], py[100]] });
    expect(values['relative-sup-error'].value).toBe(0.25);
  });
  it('scales with the images by powers of two to the bit', () => {
    const estimate = image((x, y) => 1 + Math.exp(-x * x - y * y));
    const once = evaluateMetrics({ ...base, estimate });
    const scaled = evaluateMetrics({ ...base, estimate: estimate.map((v) => 8 * v), truth: truth.map((v) => 8 * v), background: background.map((v) => 8 * v) });
    for (const key of ['relative-l2-error', 'relative-l1-error', 'relative-sup-error']) expect(scaled[key].value).toBe(once[key].value);
    expect(scaled['sup-error'].value).toBe(8 * once['sup-error'].value!);
  });
  it('is null with a reason where it is not defined', () => {
    const values = evaluateMetrics({ ...base, truth: background, residualNorm: null, noiseNorm: 0 });
    for (const key of ['relative-l2-error', 'relative-l1-error', 'relative-sup-error', 'position-error', 'resolution', 'data-residual-ratio'])
      expect(values[key]).toEqual({ value: null, reason: expect.stringMatching(/\.$/) });
    const inverted = evaluateMetrics({ ...base, targets: [{ label: 'a', x: 0, y: 0, area: 1, contrast: 1 }], estimate: background.map((v) => v - 1) });
    expect(inverted['position-error']).toEqual({ value: null, reason: 'The image has no rise above the background, as the target has.' });
    // Rounding in the projection of a background is no response either.
    const rounded = evaluateMetrics({ ...base, targets: [{ label: 'a', x: 0, y: 0, area: 1, contrast: 1 }], estimate: background.map((v, i) => v + (i % 7) * 2.2e-16) });
    expect(rounded['position-error'].value).toBeNull();
  });
  it('refuses images of another size and values that are not finite', () => {
    expect(() => evaluateMetrics({ ...base, truth: truth.subarray(1) })).toThrow(`The truth has ${count - 1} pixels, the body ${count}.`);
    expect(() => evaluateMetrics({ ...base, estimate: background.map(() => NaN) })).toThrow(RangeError);
  });
  it.each(metrics.map((metric) => [metric.key, metric] as const))('%s alone equals its value among all', (key, metric) => {
    const full = { ...base, estimate: image((x, y) => 1 + Math.exp(-x * x - 9 * y * y)), targets: [{ label: 'a', x: 0, y: 0.3, area: 0.12, contrast: 2 }] };
    const before = Float64Array.from(full.estimate);
    expect(metric.evaluate(full)).toEqual(evaluateMetrics(full)[key]);
    expect(full.estimate).toEqual(before);
    expect(metric.traps.length).toBeGreaterThan(0);
    expect(metric.sources.length).toBeGreaterThan(0);
  });
});
