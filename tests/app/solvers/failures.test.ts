import { describe, expect, it } from 'vitest';
import { findFailures, type RunTrials } from '../../../app/features/solvers/model/failures';
import { ruleSentence, plainName } from '../../../app/features/solvers/components/sensitivity-section';
import { entryReview, medianChange } from '../../../app/features/solvers/components/solver-tables';

const trial = (level: number, draw: number, error: number, more: Partial<RunTrials['trials'][number]> = {}): RunTrials['trials'][number] => ({
  level, draw, noiseNorm: 1, parameter: 0.1, iterations: 0, forwardSolves: 0, stop: 'direct', supAt: null, seconds: null, imageHash: 'a'.repeat(64), imageStored: false, ...more,
  metrics: { 'relative-l2-error': error, 'position-error': 0.01, ...more.metrics },
});
const run = (trials: RunTrials['trials']): RunTrials => ({ run: 'RN-1', phantom: { name: 'Deep core', slug: 'deep-core', version: 1, sealed: false }, ladder: [0.01, 0.3], trials, trivial: 1, smallestParameter: 1e-3 });

describe('where a solver failed', () => {
  it('says worse than nothing only above the trivial reconstruction, at the level where most draws are', () => {
    const { failures, trials } = findFailures([run([trial(0, 0, 0.4), trial(0, 1, 1.1), trial(1, 0, 1.3), trial(1, 1, 1.8)])]);
    expect(trials).toBe(4);
    expect(failures).toEqual([expect.objectContaining({ kind: 'worse-than-nothing', level: 1, draw: 1, text: expect.stringContaining('2 of 2 draws') })]);
  });
  it('finds draws that diverged, lost a target or sit at the smallest parameter', () => {
    const { failures } = findFailures([run([trial(0, 0, 0.4, { stop: 'diverged' }), trial(0, 1, 0.4, { metrics: { 'position-error': null } }), trial(0, 2, 0.5, { parameter: 1e-3 }), trial(0, 3, 0.4)])]);
    expect(failures.map((f) => f.kind)).toEqual(['diverged', 'target-lost', 'at-the-limit']);
  });
  it('finds nothing in a sound run', () => {
    expect(findFailures([run([trial(0, 0, 0.4), trial(1, 0, 0.7)])]).failures).toEqual([]);
  });
});

describe('words of the solver page', () => {
  it('compare the rule with the oracle', () => {
    const choices = [{ draw: 0, parameter: 2, error: 1.1 }, { draw: 1, parameter: 3, error: 1.2 }, { draw: 2, parameter: 4, error: 1.5 }];
    expect(ruleSentence({ choices, oracle: { parameter: 1, error: 1 } })).toBe('The rule lands at 1.20 times the best error (5 to 95 %: 1.10 to 1.50). It lands above the best value at nearly every draw.');
    expect(plainName('\\alpha/\\sigma_1')).toBe('α/σ₁');
  });
  it('an entry stands for its least settled run', () => {
    expect(entryReview(['signed-off', 'returned', 'in-review'])).toBe('returned');
    expect(entryReview(['signed-off', 'signed-off'])).toBe('signed-off');
    expect(entryReview([])).toBe('unreviewed');
  });
  it('the change between versions is the geometric mean over common phantoms', () => {
    const sheet = (medians: Record<string, number>) => ({
      metric: 'm', items: Object.entries(medians).map(([id, median]) => ({
        run: id, axis: { key: 'noise' as const }, phantom: { slug: id, id, name: id, version: 1, sealed: false, sealedUntil: null }, trivial: 1, modelErrorFloor: 0, secondsPerReconstruction: null, timeRatio: null,
        sheet: { metric: 'm', model: 'none' as const, exponent: null, floor: null, constant: null, breakdown: null, breakdownNote: null, reason: null },
        levels: [{ level: 0.01, count: 1, median, mean: median, sd: 0, p05: median, p95: median, worst: median, medianDraw: 0, worstDraw: 0, draws: [median], reason: null }],
      })),
    });
    // Ratios 0.5 and 2 over the two common phantoms: their geometric mean is 1, no change.
    expect(medianChange(sheet({ a: 0.1, b: 0.4, c: 9 }), sheet({ a: 0.2, b: 0.2 }), 0.01)).toBeCloseTo(0, 12);
    expect(medianChange(sheet({ a: 0.1 }), sheet({ b: 0.1 }), 0.01)).toBeNull();
  });
});
