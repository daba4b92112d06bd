import { describe, expect, it } from 'vitest';
import reference from '../../reference/statistics-tests.json';
import { levelMoments } from '../../../solvers/campaign/level-moments';
import { deriveKey, RandomStream } from '../../../solvers/core/random';
import { pairedBootstrap, type BootstrapEntry } from '../../../solvers/statistics/paired-bootstrap';
import { paretoFront } from '../../../solvers/statistics/pareto-front';
import { performanceProfiles, profileAt } from '../../../solvers/statistics/performance-profile';

describe('performance profiles', () => {
  const { losses, shares } = reference.profile;
  const column = (m: number) => losses.map((row) => row[m] ?? Infinity);
  const profiles = performanceProfiles(['a', 'b', 'c'].map((id, m) => ({ id, losses: column(m) })));
  it('equal the definition on a small table (numpy, make-statistics.py)', () => {
    for (const [tau, values] of Object.entries(shares))
      values.forEach((share, m) => expect(profileAt(profiles.items[m]!, profiles.problems, Number(tau)), `rho(${tau}) of ${m}`).toBeCloseTo(share, 14));
  });
  it('worked by hand: a is best twice, ties count for both, and what is unsolved never comes in', () => {
    // Problems: (1, 2, 4), (3, 3, -), (10, 5, 20), (0.2, 0.3, 0.1), (-, 7, 7).
    expect(profiles.items.map((item) => item.ratios)).toEqual([[1, 1, 2, 2], [1, 1, 1, 2, 0.3 / 0.1], [1, 1, 4, 4]]);
    expect(profiles).toMatchObject({ problems: 5, unsolved: 0 });
  });
  it('take a best of zero, and problems that nobody solves', () => {
    const found = performanceProfiles([{ id: 'a', losses: [0, Infinity] }, { id: 'b', losses: [1, Infinity] }]);
    expect(found).toMatchObject({ problems: 2, unsolved: 1, items: [{ ratios: [1] }, { ratios: [] }] });
    expect(() => performanceProfiles([{ id: 'a', losses: [-1] }])).toThrow(RangeError);
    expect(() => performanceProfiles([{ id: 'a', losses: [1] }, { id: 'b', losses: [] }])).toThrow(RangeError);
    expect(performanceProfiles([])).toEqual({ problems: 0, unsolved: 0, items: [] });
  });
});

describe('error-time front', () => {
  it('keeps what nothing beats, equal ones together, and leaves out what has no time', () => {
    const found = paretoFront([
      { id: 'fast', loss: 0.5, seconds: 0.01 }, { id: 'good', loss: 0.1, seconds: 1 }, { id: 'twin', loss: 0.1, seconds: 1 },
      { id: 'late', loss: 0.1, seconds: 2 }, { id: 'poor', loss: 0.6, seconds: 0.5 }, { id: 'untimed', loss: 0.05, seconds: null }, { id: 'undefined', loss: null, seconds: 0.001 },
    ]);
    expect(Object.fromEntries(found.map((place) => [place.id, place.onFront]))).toEqual({ fast: true, good: true, twin: true, late: false, poor: false, untimed: null, undefined: null });
    expect(found.find((place) => place.id === 'poor')!.dominatedBy).toBe('fast');
    expect(found.find((place) => place.id === 'late')!.dominatedBy).toBe('good');
    expect(paretoFront([])).toEqual([]);
  });
});

/**
 * Two methods whose errors have a true ratio, up to a factor of each phantom. Standard deviations of logarithms: `between` phantoms; of a
 * draw, `shared` by both methods and `own` to each.
 */
function world(name: string, phantoms: number, ratio: number, scatter: { between: number; shared: number; own: number }): BootstrapEntry[] {
  const stream = new RandomStream(deriveKey('test world', name));
  const fill = <T>(count: number, make: () => T): T[] => Array.from({ length: count }, make);
  const draws = fill(phantoms, () => fill(12, () => scatter.shared * stream.nextNormal()));
  const losses = (factor: () => number): Float64Array[] => draws.map((shared) => {
    const effect = factor();
    return Float64Array.from(shared, (value) => effect * Math.exp(value + scatter.own * stream.nextNormal()));
  });
  return [{ id: 'a', phantoms: losses(() => ratio * Math.exp(scatter.between * stream.nextNormal())) }, { id: 'b', phantoms: losses(() => 1) }];
}

describe('paired bootstrap', () => {
  it('finds an exact ratio, and repeats itself', () => {
    const entries: BootstrapEntry[] = [{ id: 'a', phantoms: [Float64Array.of(1, 2, 3), Float64Array.of(4, 5, 6, 7)] }, { id: 'b', phantoms: [Float64Array.of(2, 4, 6), Float64Array.of(8, 10, 12, 14)] }];
    const [pair] = pairedBootstrap(entries, { seed: 's', resamples: 200 });
    // Every draw of b is twice that of a, so is every resampled median.
    expect(pair).toMatchObject({ first: 'a', second: 'b', firstBetter: 1, separable: true, reason: null });
    for (const value of [pair!.ratio, pair!.low, pair!.high]) expect(value).toBeCloseTo(0.5, 14);
    const other = world('repeat', 3, 0.9, { between: 0.1, shared: 0.5, own: 0.2 });
    expect(pairedBootstrap(other, { seed: 's' })).toEqual(pairedBootstrap(other, { seed: 's' }));
    expect(pairedBootstrap(other, { seed: 't' })[0]!.low).not.toBe(pairedBootstrap(other, { seed: 's' })[0]!.low);
  });
  it('covers the true ratio about as often as it says with twelve phantoms, less often with four, and errs on the long side where draws scatter', () => {
    const cover = (phantoms: number, scatter: { between: number; shared: number; own: number }): number => {
      let held = 0;
      for (let w = 0; w < 200; w++) {
        const [pair] = pairedBootstrap(world(`cover ${phantoms} ${w}`, phantoms, 0.8, scatter), { seed: `${w}`, resamples: 300 });
        if (pair!.low! <= 0.8 && pair!.high! >= 0.8) held++;
      }
      return held / 200;
    };
    // 200 worlds: standard error 1.5 % at 95 %, 2.7 % at 82 %. A percentile interval of the mean of n values is too short by
    // t(n - 1) / 1.96 sqrt(n / (n - 1)): it covers 92 of 100 for n = 12, and 81 for n = 4; four standard errors.
    const still = { between: 0.15, shared: 0.02, own: 0.02 };
    expect(Math.abs(cover(12, still) - 0.92)).toBeLessThan(0.06);
    expect(Math.abs(cover(4, still) - 0.81)).toBeLessThan(0.1);
    // The medians of phantoms scatter with their draws already; drawing draws again counts that scatter twice.
    expect(cover(12, { between: 0.15, shared: 0.5, own: 0.15 })).toBeGreaterThan(0.93);
  });
  it('gives the reason where there is no ratio, and refuses what is not paired', () => {
    const good = Float64Array.of(1, 2, 3);
    expect(pairedBootstrap([{ id: 'a', phantoms: [Float64Array.of(Infinity, Infinity, 1)] }, { id: 'b', phantoms: [good] }], { seed: 's' })[0]).toMatchObject({ ratio: null, separable: false, reason: expect.stringMatching(/undefined/) });
    expect(pairedBootstrap([{ id: 'a', phantoms: [Float64Array.of(0, 0, 0)] }, { id: 'b', phantoms: [good] }], { seed: 's' })[0]!.ratio).toBeNull();
    expect(() => pairedBootstrap([{ id: 'a', phantoms: [good] }, { id: 'b', phantoms: [good, good] }], { seed: 's' })).toThrow(RangeError);
    expect(() => pairedBootstrap([{ id: 'a', phantoms: [good] }, { id: 'b', phantoms: [Float64Array.of(1, 2)] }], { seed: 's' })).toThrow(RangeError);
    expect(pairedBootstrap([], { seed: 's' })).toEqual([]);
  });
});

describe('bias and variance of the image over draws', () => {
  const { images, truth, background, biasSquared, variance, meanSquaredError } = reference.moments;
  const draws = images.map((image) => Float64Array.from(image));
  it('equal numpy, and add up to the mean squared error', () => {
    const found = levelMoments(draws, Float64Array.from(truth), Float64Array.from(background));
    expect(found.biasSquared).toBeCloseTo(biasSquared, 12);
    expect(found.variance).toBeCloseTo(variance, 12);
    // numpy takes it from the errors themselves.
    expect(found.meanSquaredError).toBeCloseTo(meanSquaredError, 12);
    expect(found.draws).toBe(6);
  });
  it('one draw has no variance; the background alone has a bias of 1', () => {
    const found = levelMoments([Float64Array.from(background)], Float64Array.from(truth), Float64Array.from(background));
    expect(found).toMatchObject({ biasSquared: 1, variance: 0, meanSquaredError: 1 });
  });
  it('gives reasons instead of figures, and refuses bad images', () => {
    const flat = new Float64Array(3).fill(1);
    expect(levelMoments([flat], flat, flat)).toMatchObject({ biasSquared: null, reason: expect.stringMatching(/nothing to find/) });
    expect(levelMoments([], flat, flat)).toMatchObject({ variance: null, reason: 'No draw has finished.' });
    expect(() => levelMoments([new Float64Array(2)], flat, flat)).toThrow(RangeError);
    expect(() => levelMoments([new Float64Array(3).fill(NaN)], Float64Array.of(1, 2, 3), flat)).toThrow(RangeError);
  });
});
