import { describe, expect, it } from 'vitest';
import { prepareRun, recomputeDraw, runLevel, scoreImage, trivialMetrics } from '../../../solvers/campaign/run';
import { errorAgainstParameter, parameterGrid, picardData } from '../../../solvers/campaign/sensitivity';
import { secondsPerReconstruction, timeBaseline } from '../../../solvers/campaign/timing';
import { runHash } from '../../../solvers/campaign/trial';
import { sha256Hex } from '../../../solvers/core/hash';
import { getMethod } from '../../../solvers/methods/registry';
import { syntheticProblem, syntheticTruth } from '../../support/synthetic-problem';

const problem = syntheticProblem({ side: 10, data: 30 });
const { simulated, x: truth } = syntheticTruth(problem);
const tikhonov = { method: 'tikhonov', parameters: {}, rule: { key: 'discrepancy', safetyFactor: 1.05 } } as const;
const prepared = prepareRun({ problem, ...tikhonov });
const seed = { benchSeed: 3, phantomHash: 'phantom', levelIndex: 1, level: 0.02 };

describe('a level', () => {
  const trials = runLevel(prepared, simulated, { ...seed, draws: [0, 1, 2, 3] });
  it('has trials in the order asked for, each hashed over its image', () => {
    expect(trials.map((trial) => trial.drawIndex)).toEqual([0, 1, 2, 3]);
    for (const trial of trials) expect(trial.imageHash).toBe(sha256Hex(trial.image));
    expect(new Set(trials.map((trial) => trial.imageHash)).size).toBe(4);
    expect(runHash(trials.map((trial) => trial.imageHash))).toBe(sha256Hex(trials.map((trial) => trial.imageHash).join('\n')));
  });
  it('gives the same noise to every method', () => {
    const other = runLevel(prepareRun({ problem, method: 'cgls', parameters: {}, rule: null }), simulated, { ...seed, draws: [0] })[0];
    expect(other.noiseNorm).toBe(trials[0].noiseNorm);
    // Same data, so the trivial reconstruction's residual is the same whoever asks.
    const trivial = prepareRun({ problem, method: 'trivial', parameters: {}, rule: null });
    expect(recomputeDraw(trivial, simulated, { ...seed, drawIndex: 0 }).metrics['data-residual-ratio'].value).toBe(runLevel(trivial, simulated, { ...seed, draws: [5, 0] })[1].metrics['data-residual-ratio'].value);
  });
  it('a draw alone has the bits of the batch, metrics included', () => {
    const alone = recomputeDraw(prepared, simulated, { ...seed, drawIndex: 2 });
    expect(alone).toEqual(trials[2]);
  });
  it('is timed by the clock handed in, which changes no hash', () => {
    let time = 0;
    const timed = runLevel(prepared, simulated, { ...seed, draws: [0, 1], now: () => (time += 1) });
    expect(timed.map((trial) => trial.seconds)).toEqual([0.5, 0.5]);
    expect(timed[0].imageHash).toBe(trials[0].imageHash);
    expect(secondsPerReconstruction(timed)).toBe(0.5);
    expect(secondsPerReconstruction(trials)).toBeNull();
    expect(timeBaseline(problem, simulated, { ...seed, draws: [0, 1], now: () => (time += 1) })).toBe(0.5);
  });
  it('ends early when asked to, with what is finished', () => {
    let asked = 0;
    expect(runLevel(prepared, simulated, { ...seed, draws: [0, 1, 2, 3], aborted: () => ++asked > 2 })).toHaveLength(2);
  });
  it('keeps a reconstruction that is not finite as a value: diverged, metrics null, the background stored', () => {
    const broken = { ...prepared, reconstructor: { ...prepared.reconstructor, reconstructMany: (...args: Parameters<typeof prepared.reconstructor.reconstructMany>) => prepared.reconstructor.reconstructMany(...args).map((r) => ({ ...r, x: r.x.map(() => NaN) })) } };
    const trial = recomputeDraw(broken, simulated, { ...seed, drawIndex: 0 });
    expect(trial.stop).toBe('diverged');
    expect(trial.image).toEqual(simulated.backgroundImage);
    expect(Object.values(trial.metrics).every((value) => value.value === null && value.reason)).toBe(true);
  });
  it('refuses what does not fit', () => {
    expect(() => runLevel(prepared, { ...simulated, clean: new Float64Array(3) }, { ...seed, draws: [0] })).toThrow(/3 values, the problem 30/);
    expect(() => runLevel(prepared, { ...simulated, noiseScale: 0 }, { ...seed, draws: [0] })).toThrow(/no signal/);
    expect(() => prepareRun({ problem, ...tikhonov, method: 'nonsense' })).toThrow(/Known: trivial/);
  });
  it('the trivial reconstruction scores exactly 1, the truth 0', () => {
    expect(trivialMetrics(problem, simulated)['relative-l2-error'].value).toBe(1);
    const image = new Float64Array(simulated.truthImage.length);
    problem.toImage(truth, image);
    expect(scoreImage(problem, simulated, image, null, 1)['sup-error'].value).toBe(0);
  });
});

describe('sensitivity', () => {
  const draw = { ...seed, drawIndex: 1 };
  it.each([tikhonov, { method: 'truncated-svd', parameters: {}, rule: { key: 'gcv' } }, { method: 'cgls', parameters: {}, rule: null }] as const)('of $method: the oracle is the best of the grid and the rule lies on the curve', (configuration) => {
    const result = errorAgainstParameter(problem, configuration, simulated, draw)!;
    expect(result.oracle.error).toBe(Math.min(...result.errors));
    expect(result.choice!.error!).toBeGreaterThanOrEqual(0.98 * result.oracle.error);
    const own = recomputeDraw(prepareRun({ problem, ...configuration }), simulated, draw);
    expect(result.choice).toEqual({ parameter: own.parameter, error: own.metrics['relative-l2-error'].value });
    const { parameters, errors } = result;
    const at = 7;
    const fixed = recomputeDraw(prepareRun({ problem, ...configuration, rule: { key: 'fixed', value: parameters[at] } }), simulated, draw);
    expect(errors[at]).toBe(fixed.metrics['relative-l2-error'].value);
  });
  it('does not exist for methods without a parameter', () => {
    expect(errorAgainstParameter(problem, { method: 'trivial', parameters: {}, rule: null }, simulated, draw)).toBeNull();
  });
  it('the grid ascends within the range of the field', () => {
    for (const key of ['tikhonov', 'truncated-svd']) {
      const field = getMethod(key).fixedValue!;
      const grid = parameterGrid(field, 40);
      expect(grid.every((value, i) => i === 0 || value > grid[i - 1])).toBe(true);
      expect(grid[0]).toBeCloseTo(field.minimum!, 12);
    }
  });
  it('the Picard view shows where the noise takes over', () => {
    const picard = picardData(problem, 'identity', simulated, { ...draw, level: 0.1 })!;
    expect(picard.singularValues.length).toBe(picard.coefficients.length);
    expect(picard.crossing).not.toBeNull();
    expect(picardData({ ...problem, dataSize: 2000, unknowns: 2000 }, 'identity', simulated, { ...draw, level: 0.1 })).toBeNull();
    expect(picardData(problem, 'identity', simulated, { ...draw, level: 1e-3 })!.crossing ?? 30).toBeGreaterThan(picard.crossing!);
    expect(picard.noisePerCoefficient).toBeCloseTo((0.1 * simulated.noiseScale) / Math.sqrt(30), 12);
  });
});
