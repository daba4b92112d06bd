import { describe, expect, it } from 'vitest';
import { defaultLadder } from '../../../shared/domain/ladder';
import { prepareRun, recomputeDraw, runLevel } from '../../../solvers/campaign/run';
import { batchEqualsSingleCheck } from '../../../solvers/checks/batch-equals-single';
import { beatsTrivialCheck } from '../../../solvers/checks/beats-trivial';
import { checkRun } from '../../../solvers/checks/check-run';
import { noiseCalibrationCheck } from '../../../solvers/checks/noise-calibration';
import { noiseNormalityCheck } from '../../../solvers/checks/noise-normality';
import { recomputationCheck } from '../../../solvers/checks/recomputation';
import { methodChecks, problemChecks, runChecks } from '../../../solvers/checks/registry';
import type { RunCheckContext } from '../../../solvers/checks/run-check';
import type { NoiseModel } from '../../../solvers/noise/noise-model';
import { syntheticProblem, syntheticTruth } from '../../support/synthetic-problem';

const problem = syntheticProblem({ side: 10, data: 40 });
const { simulated } = syntheticTruth(problem);

function context(method: string, noiseModel?: string): RunCheckContext {
  const prepared = prepareRun({ problem, method, parameters: {}, rule: null, noiseModel });
  const seed = { benchSeed: 5, phantomHash: 'p', levelIndex: 0, level: defaultLadder[0] };
  const lowest = runLevel(prepared, simulated, { ...seed, draws: [0, 1, 2] });
  const { levelIndex, drawIndex, imageHash } = recomputeDraw(prepared, simulated, { ...seed, levelIndex: 4, level: defaultLadder[4], drawIndex: 7 });
  return {
    prepared, simulated, benchSeed: 5, phantomHash: 'p', ladder: defaultLadder, draws: 24,
    lowestErrors: lowest.map((trial) => trial.metrics['relative-l2-error'].value), stored: [{ levelIndex, drawIndex, imageHash }],
  };
}
const withNoise = (base: RunCheckContext, draw: NoiseModel['draw']): RunCheckContext => ({ ...base, prepared: { ...base.prepared, noiseModel: { ...base.prepared.noiseModel, draw } } });

describe('run checks', () => {
  const good = context('tikhonov');
  it('all pass on a sound run', () => {
    const results = checkRun(good);
    for (const result of results) expect(result, `${result.key}: ${result.figure}`).toMatchObject({ state: 'pass' });
    expect(results.map((result) => result.key)).toEqual([...problemChecks, ...methodChecks, ...runChecks].map((check) => check.key));
  });
  it('accept noise whose level holds on average only', () => {
    expect(noiseCalibrationCheck.evaluate(context('tikhonov', 'gaussian-expected')).state).toBe('pass');
  });
  it('catch noise of the wrong level', () => {
    const { draw } = good.prepared.noiseModel;
    const result = noiseCalibrationCheck.evaluate(withNoise(good, (clean, level, scale, key) => draw(clean, 1.02 * level, scale, key)));
    expect(result.state).toBe('fail');
    expect(result.figure).toBeCloseTo(0.02, 6);
  });
  it('catch noise that is not normal', () => {
    const { draw } = good.prepared.noiseModel;
    const uniform: NoiseModel['draw'] = (clean, level, scale, key) => {
      const { data, noiseNorm } = draw(clean, level, scale, key);
      return { data: data.map((value, i) => clean[i] + Math.sign(value - clean[i]) * level * scale * ((i % 5) + 1)), noiseNorm };
    };
    expect(noiseNormalityCheck.evaluate(withNoise(good, uniform)).state).toBe('fail');
  });
  it('catch a batch that differs from single calls in the last bit', () => {
    const { reconstructor } = good.prepared;
    const sloppy = { ...reconstructor, reconstructMany: (...args: Parameters<typeof reconstructor.reconstructMany>) => reconstructor.reconstructMany(...args).map((r, i) => (args[0].length > 1 && i === 1 ? { ...r, x: r.x.map((v) => v * (1 + 2 ** -52)) } : r)) };
    const result = batchEqualsSingleCheck.evaluate({ ...good, prepared: { ...good.prepared, reconstructor: sloppy } });
    expect(result.state).toBe('fail');
    expect(result.figure).toBeGreaterThan(0);
  });
  it('catch a stored image that cannot be computed again', () => {
    expect(recomputationCheck.evaluate({ ...good, stored: [{ ...good.stored[0], imageHash: '0'.repeat(64) }] })).toMatchObject({ state: 'fail', figure: 1 });
    expect(recomputationCheck.evaluate({ ...good, stored: [] }).state).toBe('not-applicable');
  });
  it('warn of a method that is no better than nothing', () => {
    expect(beatsTrivialCheck.evaluate({ ...good, lowestErrors: [1, 1.2, 0.99] })).toMatchObject({ state: 'warning', figure: 1 });
    expect(beatsTrivialCheck.evaluate({ ...good, lowestErrors: [null] }).state).toBe('not-applicable');
    expect(beatsTrivialCheck.evaluate(context('trivial')).state).toBe('not-applicable');
  });
});
