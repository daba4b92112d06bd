import { describe, expect, it } from 'vitest';
import { prepareRun, runLevel, trivialMetrics } from '../../../../solvers/campaign/run';
import { electrodeData } from '../../../../solvers/methods/direct/electrode-data';
import { drivenChannels } from '../../../../solvers/methods/direct/driven-channels';
import { getMethod } from '../../../../solvers/methods/registry';
import { denseMatrix } from '../../../../solvers/core/matrix-operator';
import { createEitInversion, type EitInversion } from '../../../../solvers/problems/electrical-impedance/inversion-problem';
import { channels } from '../../../../solvers/problems/electrical-impedance/patterns';
import { simulateElectricalImpedance } from '../../../../solvers/problems/electrical-impedance/simulation';
import { truthOnGrid } from '../../../../solvers/truth/truth-on-grid';
import { ellipse, shapesTruth, unitGeometry } from '../../../support/impedance-case';

const keys = ['calderon', 'd-bar', 'monotonicity', 'factorisation'];
/** As the stock phantoms: a tank of 10 cm, electrode 1 on top, clockwise, 10 mA/m. */
const tank = {
  body: { kind: 'disc' as const, radius: 0.1 }, contactImpedance: 0.0005, current: 0.01, firstElectrodeDeg: 90, numbering: 'clockwise' as const,
  pattern: 'trigonometric' as const, measurement: 'electrode-voltages' as const,
};
const disc = { x: 0.045, y: -0.02, r: 0.025 };
const truth = (value: number) => shapesTruth([ellipse(disc.x, disc.y, disc.r, disc.r, value)]);

function phantom(problem: EitInversion, value: number) {
  const simulation = simulateElectricalImpedance(truth(value), problem.geometry);
  const clean = problem.dataKind === 'absolute' ? simulation.data : simulation.data.map((v, i) => v - simulation.reference[i]);
  const difference = simulation.data.map((v, i) => v - simulation.reference[i]);
  const noiseScale = Math.sqrt(difference.reduce((sum, v) => sum + v * v, 0));
  const truthImage = truthOnGrid(truth(value), problem.grid);
  return { clean, noiseScale, truthImage, backgroundImage: new Float64Array(truthImage.length).fill(1), targets: truth(value).targets };
}
/** Centre of the pixel that differs most from the background. */
function peak(problem: EitInversion, image: Float64Array): [number, number] {
  let at = 0;
  image.forEach((value, i) => { if (Math.abs(value - 1) > Math.abs(image[at] - 1)) at = i; });
  const { inside, nx, xMin, xMax, yMin, yMax, ny } = problem.grid;
  return [xMin + ((inside[at] % nx) + 0.5) * ((xMax - xMin) / nx), yMin + (Math.floor(inside[at] / nx) + 0.5) * ((yMax - yMin) / ny)];
}
const seed = { benchSeed: 3, phantomHash: 'direct', levelIndex: 0 };

describe('direct methods on 16 electrodes, trigonometric currents', () => {
  const problem = createEitInversion(unitGeometry(tank), 1, 'difference');
  const phantoms = { more: phantom(problem, 2), less: phantom(problem, 0.4) };
  describe.each(keys)('%s', (method) => {
    const prepared = prepareRun({ problem, method, parameters: {}, rule: getMethod(method).defaultRule });
    it.each(['more', 'less'] as const)('finds a disc of %s conductivity where it is, better than the background at 0.1 and 3 percent of noise', (side) => {
      const simulated = phantoms[side];
      const trivial = trivialMetrics(problem, simulated)['relative-l2-error'].value!;
      const errors = [0.001, 0.03].map((level) => {
        const [trial] = runLevel(prepared, simulated, { ...seed, level, draws: [0] });
        const [x, y] = peak(problem, trial.image);
        // Inside the disc or within 0.06 R of it: the peak of a plateau or of a smooth image.
        expect(Math.hypot(x - disc.x, y - disc.y)).toBeLessThan(disc.r + 0.006);
        expect(Math.sign(simulated.truthImage[simulated.truthImage.findIndex((v) => v !== 1)] - 1)).toBe(Math.sign(trial.image.reduce((a, v) => (Math.abs(v - 1) > Math.abs(a - 1) ? v : a), 1) - 1));
        return trial.metrics['relative-l2-error'].value!;
      });
      expect(errors[0]).toBeLessThan(0.85 * trivial);
      expect(errors[1]).toBeLessThan(0.95 * trivial);
    });
    it('returns the background for a frame that is the background\'s, whatever the noise is said to be', () => {
      const { x, residualNorm } = prepared.reconstructor.reconstruct(new Float64Array(problem.dataSize), { norm: 1e-3, level: 0.01 });
      expect(x).toEqual(problem.background());
      expect(residualNorm).toBe(0);
    });
    it('stays finite and positive under noise ten times the signal', () => {
      const [trial] = runLevel(prepared, phantoms.more, { ...seed, level: 10, draws: [0] });
      expect(trial.stop).not.toBe('diverged');
      expect(Math.min(...trial.image)).toBeGreaterThan(0);
    });
  });

  it('cuts the transform earlier where there is more noise', () => {
    const prepared = prepareRun({ problem, method: 'd-bar', parameters: {}, rule: { key: 'discrepancy', safetyFactor: 1.05 } });
    const radii = [0.001, 0.03, 0.3, 3].map((level) => runLevel(prepared, phantoms.more, { ...seed, level, draws: [0] })[0].parameter!);
    expect(radii[0]).toBeLessThanOrEqual(4);
    for (let i = 1; i < radii.length; i++) expect(radii[i]).toBeLessThan(radii[i - 1]);
  });

  it('cuts at the first step where noise relative to the voltages buries the signal', () => {
    const voltages = { ...phantoms.more, noiseScale: 200 * phantoms.more.noiseScale };
    for (const method of ['calderon', 'd-bar']) {
      const [trial] = runLevel(prepareRun({ problem, method, parameters: {}, rule: { key: 'discrepancy', safetyFactor: 1.05 } }), voltages, { ...seed, level: 0.2, draws: [0] });
      expect(trial.parameter).toBeLessThan(method === 'd-bar' ? 1 : 2);
      expect(Math.max(...trial.image)).toBeLessThan(2);
    }
  });

  it('takes a fixed cutoff as it is', () => {
    for (const [method, value] of [['calderon', 5], ['d-bar', 2.5]] as const) {
      const [trial] = runLevel(prepareRun({ problem, method, parameters: {}, rule: { key: 'fixed', value } }), phantoms.more, { ...seed, level: 0.01, draws: [0] });
      expect(trial.parameter).toBe(value);
    }
  });

  it('marks only what the tested contrast lets pass', () => {
    const marked = (testedContrast: number): number => {
      const { reconstructor } = prepareRun({ problem, method: 'monotonicity', parameters: { image: 'marked', testRadius: 0.18, testedContrast }, rule: null });
      return reconstructor.reconstruct(phantoms.more.clean, { norm: 0, level: 0 }).x.reduce((sum, v, j) => sum + (v !== 1 ? problem.unknownWeights[j] : 0), 0);
    };
    const areas = [0.5, 1.5, 20].map(marked);
    expect(areas[0]).toBeGreaterThan(areas[1]);
    expect(areas[1]).toBeGreaterThan(areas[2]);
  });
});

describe('where the driven electrodes are not measured', () => {
  const geometry = unitGeometry({ ...tank, pattern: 'adjacent', measurement: 'adjacent-undriven' });
  const full = unitGeometry({ ...tank, pattern: 'adjacent', measurement: 'adjacent-all' });
  const problem = createEitInversion(geometry, 1, 'difference');
  const simulated = phantom(problem, 2);

  it('predicts the missing channels to a tenth of their norm, and keeps the measured ones', () => {
    const all = simulateElectricalImpedance(truth(2), full);
    const model = createEitInversion(full, 1, 'difference');
    const { complete } = drivenChannels(problem, full, denseMatrix(model.linearise(model.background())));
    const frame = complete(simulated.clean, { norm: 0.001 * simulated.noiseScale, level: 0.001 });
    const known = new Map(channels(geometry).map((channel, i) => [`${channel.pattern} ${channel.plus}`, i]));
    let error = 0;
    let size = 0;
    channels(full).forEach((channel, i) => {
      const exact = all.data[i] - all.reference[i];
      const from = known.get(`${channel.pattern} ${channel.plus}`);
      if (from !== undefined) expect(frame[i]).toBe(simulated.clean[from]);
      else {
        error += (frame[i] - exact) ** 2;
        size += exact ** 2;
      }
    });
    expect(Math.sqrt(error / size)).toBeLessThan(0.1);
  });

  it.each(keys)('%s finds the disc', (method) => {
    const prepared = prepareRun({ problem, method, parameters: {}, rule: getMethod(method).defaultRule });
    const [trial] = runLevel(prepared, simulated, { ...seed, level: 0.01, draws: [0] });
    const [x, y] = peak(problem, trial.image);
    expect(Math.hypot(x - disc.x, y - disc.y)).toBeLessThan(disc.r + 0.006);
    expect(trial.metrics['relative-l2-error'].value).toBeLessThan(0.85);
  });

  it('reads a frame of zeros as a map of zeros', () => {
    const data = electrodeData(problem);
    expect(data.relativeMap(new Float64Array(problem.dataSize), { norm: 1, level: 1 })).toEqual(new Float64Array(15 * 15));
  });
});

describe('on a star-shaped body', () => {
  const geometry = unitGeometry({ ...tank, electrodes: 8, body: { kind: 'star', radius: 0.1, cosine: [0, 0.15], sine: [0, 0, 0.05] } });
  const problem = createEitInversion(geometry, 1, 'absolute', { cellMin: 0.1, cellMax: 0.13, grading: 1.2, elementMin: 0.02 });
  it.each(['monotonicity', 'factorisation'])('%s serves it, from absolute data', (method) => {
    const x = problem.project(truth(3));
    const { reconstructor } = prepareRun({ problem, method, parameters: {}, rule: null });
    const image = new Float64Array(problem.grid.inside.length);
    problem.toImage(reconstructor.reconstruct(problem.evaluate(x), { norm: 0, level: 0 }).x, image);
    const [px, py] = peak(problem, image);
    expect(Math.hypot(px - disc.x, py - disc.y)).toBeLessThan(disc.r + 0.01);
  });
  it.each(['calderon', 'd-bar'])('%s refuses it with the reason', (method) => {
    expect(() => prepareRun({ problem, method, parameters: {}, rule: getMethod(method).defaultRule })).toThrow(/that of a disc/);
  });
});
