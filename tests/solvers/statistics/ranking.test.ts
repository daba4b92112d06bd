import { describe, expect, it } from 'vitest';
import { defaultLadder } from '../../../shared/domain/ladder';
import { medianLoss, phantomLosses, type RankedEntry } from '../../../solvers/statistics/blocks';
import { placeOnLadder } from '../../../solvers/statistics/ladder-place';
import { compareMethods, profileMethods } from '../../../solvers/statistics/comparison';
import { comparePairs } from '../../../solvers/statistics/pairs';
import { rankAtNoise } from '../../../solvers/statistics/ranking';
import { scattered } from '../../support/scattered-draws';

const entry = (id: string, law: (level: number) => number, scatter: number, phantoms: number): RankedEntry => ({
  id, values: Array.from({ length: phantoms }, (_, p) => scattered(law, scatter, `${id} ${p}`)),
});
const good = entry('good', (d) => 0.1 + d, 0.05, 8);
const twin = entry('twin', (d) => 0.1 + d, 0.05, 8);
const bad = entry('bad', (d) => 0.3 + d, 0.05, 8);
const first = (item: RankedEntry, phantoms: number): RankedEntry => ({ ...item, values: item.values.slice(0, phantoms) });

describe('ranking', () => {
  it('separates over phantoms what differs, ties what does not, from one ordering', () => {
    const ranking = rankAtNoise({ ladder: defaultLadder, noise: 0.01, better: 'lower', entries: [bad, twin, good] });
    expect(ranking.rows.map((row) => row.rank)).toEqual([1, 1, 3]);
    expect(ranking.rows.map((row) => row.tieGroup)).toEqual([0, 0, 1]);
    expect(ranking.rows[2]!.id).toBe('bad');
    const meanRanks = ranking.rows.map((row) => row.meanRank!);
    expect([...meanRanks].sort((a, b) => a - b)).toEqual(meanRanks);
    // 24 draws of each of eight phantoms are eight blocks.
    expect(ranking.test).toMatchObject({ separable: true, blocks: 8, fewest: 3, enough: true, exact: true });
    expect(ranking.wins[0]![2]).toBe(1);
    expect(ranking.wins[2]![0]).toBe(0);
    expect(ranking.wins[1]![0]! + ranking.wins[0]![1]!).toBeCloseTo(1, 14);
    expect(ranking.wins[1]![1]).toBeNull();
  });
  it('many draws of few phantoms do not make a winner', () => {
    const ranking = rankAtNoise({ ladder: defaultLadder, noise: 0.01, better: 'lower', entries: [bad, good].map((item) => first(item, 5)) });
    expect(ranking.rows.map((row) => [row.id, row.rank, row.meanRank])).toEqual([['good', null, 1], ['bad', null, 2]]);
    expect(ranking.test).toMatchObject({ enough: false, blocks: 5, fewest: 6, pValue: null, criticalDifference: null });
    expect(ranking.test.words).toBe('Not enough phantoms to separate: five phantoms, and for two solvers the tests need at least six to reach 5 %. No winner is named.');
    const six = rankAtNoise({ ladder: defaultLadder, noise: 0.01, better: 'lower', entries: [bad, good].map((item) => first(item, 6)) });
    expect(six.test).toMatchObject({ enough: true, separable: true, pValue: 1 / 32 });
    expect(six.rows.map((row) => row.rank)).toEqual([1, 2]);
  });
  it('ranks by the mean of the levels where asked', () => {
    // Better at low noise, worse at high: the mean over levels, which the high ones dominate, turns the order.
    const early = entry('early', (d) => 0.05 + 6 * d, 0, 6);
    const late = entry('late', (d) => 0.2 + d, 0, 6);
    const at = rankAtNoise({ ladder: defaultLadder, noise: 0.001, better: 'lower', entries: [late, early] });
    const over = rankAtNoise({ ladder: defaultLadder, noise: 0.001, better: 'lower', entries: [late, early], levels: defaultLadder.map((_, i) => i) });
    expect([at.rows[0]!.id, over.rows[0]!.id]).toEqual(['early', 'late']);
    const mean = defaultLadder.reduce((sum, d) => sum + 0.2 + d, 0) / defaultLadder.length;
    expect(phantomLosses([late], defaultLadder.map((_, i) => i), 'lower')[0]![0]).toBeCloseTo(mean, 14);
    expect(() => phantomLosses([late], [], 'lower')).toThrow(RangeError);
  });
  it('interpolates between levels and says so', () => {
    const exact = [entry('a', (d) => 2 * d ** 0.5, 0, 1), entry('b', (d) => 3 * d ** 0.5, 0, 1)];
    const ranking = rankAtNoise({ ladder: defaultLadder, noise: 0.015, better: 'lower', entries: exact });
    expect(ranking.interpolated).toBe(true);
    // A power law is a straight line in log-log: exact up to rounding.
    expect(ranking.rows[0]!.median).toBeCloseTo(2 * 0.015 ** 0.5, 12);
    expect(rankAtNoise({ ladder: defaultLadder, noise: 0.02, better: 'lower', entries: exact }).interpolated).toBe(false);
    expect(placeOnLadder(defaultLadder, 1e-6)).toMatchObject({ nearest: 0, interpolated: true });
    expect(placeOnLadder(defaultLadder, 0.9)).toMatchObject({ nearest: 9, interpolated: true });
  });
  it('puts rows with missing runs last, without a rank', () => {
    const ranking = rankAtNoise({ ladder: defaultLadder, noise: 0.01, better: 'lower', entries: [{ ...good, values: [null, ...good.values.slice(1)] }, bad, twin] });
    expect(ranking.rows[2]).toMatchObject({ id: 'good', rank: null, complete: false, meanRank: null });
    expect(ranking.rows[0]).toMatchObject({ id: 'twin', rank: 1 });
    const alone = rankAtNoise({ ladder: defaultLadder, noise: 0.01, better: 'lower', entries: [good] });
    expect(alone).toMatchObject({ separation: null, rows: [{ rank: null, meanRank: null }] });
    expect(alone.test.words).toMatch(/nothing to compare/);
  });
  it('counts an undefined value as the worst', () => {
    const none: RankedEntry = { id: 'none', values: good.values.map((levels) => levels!.map((draws) => draws.map(() => null))) };
    const ranking = rankAtNoise({ ladder: defaultLadder, noise: 0.01, better: 'lower', entries: [none, good] });
    expect(ranking.rows[1]).toMatchObject({ id: 'none', median: null, rank: 2 });
    expect(ranking.wins[0]![1]).toBe(1);
    expect([medianLoss([1, Infinity]), medianLoss([1, 3, Infinity]), medianLoss([Infinity, Infinity])]).toEqual([Infinity, 3, Infinity]);
  });
  it('compares pairs with Holm', () => {
    const losses = (item: RankedEntry) => Float64Array.from(item.values.flatMap((levels) => levels![5] as number[]));
    const pairs = comparePairs([good, twin, bad].map((item) => ({ id: item.id, losses: losses(item) })));
    expect(pairs.map((pair) => pair.separable)).toEqual([false, true, true]);
    expect(pairs[1]!.medianRatio).toBeLessThan(0.5);
  });
});

describe('comparison', () => {
  const at = defaultLadder.indexOf(0.01);
  const entries = [bad, twin, good];
  it('has over phantoms the order, the groups and the test of the ranking', () => {
    const ranking = rankAtNoise({ ladder: defaultLadder, noise: 0.01, better: 'lower', entries });
    const found = compareMethods({ better: 'lower', entries, levels: [at], seed: 'bench' });
    expect(found.methods).toEqual(ranking.rows.map((row) => ({ id: row.id, meanRank: row.meanRank, tieGroup: row.tieGroup })));
    expect(found.test).toEqual(ranking.test);
    expect(found.pairs.map((pair) => [pair.first, pair.second, pair.pairs])).toEqual([[ranking.rows[0]!.id, ranking.rows[1]!.id, 8], [ranking.rows[0]!.id, 'bad', 8], [ranking.rows[1]!.id, 'bad', 8]]);
    // Three comparisons need seven phantoms; there are eight, of one sign: p = 2 / 256, times three.
    expect(found.fewestPairs).toBe(7);
    expect(found.pairs[1]).toMatchObject({ pHolm: 6 / 256, separable: true, ratio: { separable: true, firstBetter: 1 } });
    // Medians 0.11 and 0.31 but for the scatter.
    expect(found.pairs[1]!.ratio.ratio).toBeCloseTo(0.11 / 0.31, 1);
  });
  it('within one phantom its draws are the blocks, and the words say so', () => {
    const found = compareMethods({ better: 'lower', entries: entries.map((item) => first(item, 1)), levels: [at], phantom: 0, seed: 'bench' });
    expect(found.test).toMatchObject({ blocks: 24, enough: true, separable: true });
    expect(found.test.words).toMatch(/over 24 draws/);
    expect(found.pairs[2]!.pairs).toBe(24);
    expect(() => compareMethods({ better: 'lower', entries, levels: [at], phantom: 8, seed: 'bench' })).toThrow(RangeError);
  });
  it('leaves out what is not complete, and compares nothing with one', () => {
    const missing = { ...good, values: [null, ...good.values.slice(1)] };
    expect(compareMethods({ better: 'lower', entries: [missing, bad, twin], levels: [at], seed: 's' }).methods.map((own) => own.id)).toEqual(['twin', 'bad']);
    expect(compareMethods({ better: 'lower', entries: [missing, bad], levels: [at], seed: 's' })).toMatchObject({ methods: [{ id: 'bad' }], pairs: [], test: { name: 'No test' } });
  });
  it('profiles take every phantom and level, and none for scores', () => {
    const found = profileMethods({ better: 'lower', entries, levels: [0, at] })!;
    expect(found.problems).toBe(16);
    expect(found.items.find((item) => item.id === 'bad')!.ratios.every((ratio) => ratio > 1)).toBe(true);
    expect(profileMethods({ better: 'higher', entries, levels: [0] })).toBeNull();
  });
});
