import { describe, expect, it } from 'vitest';
import reference from '../../reference/statistics-tests.json';
import { fewestBlocks, friedman } from '../../../solvers/statistics/friedman';
import { friedmanExactP } from '../../../solvers/statistics/friedman-exact';
import { comparePairs } from '../../../solvers/statistics/pairs';
import { separate, separationWords } from '../../../solvers/statistics/separation';
import { fewestPairs, wilcoxonSignedRank } from '../../../solvers/statistics/wilcoxon';

// scipy's friedmanchisquare, wilcoxon(zero_method='zsplit') and studentized_range; exact levels by enumeration (make-statistics.py).
describe('Friedman over blocks', () => {
  it.each(reference.friedman.map((own, i) => [i, own] as const))('equals scipy, with ties: table %i', (_, own) => {
    const result = friedman(own.table);
    own.meanRanks.forEach((rank, j) => expect(result.meanRanks[j]).toBeCloseTo(rank, 12));
    expect(result.chiSquare).toBeCloseTo(own.chiSquare, 9);
    expect(result.pChiSquare).toBeCloseTo(own.pChiSquare, 9);
    expect(result.criticalDifference).toBeCloseTo(own.criticalDifference, 8);
    if (own.f === null) expect(result.f).toBe(Infinity);
    else {
      expect(result.f).toBeCloseTo(own.f, 8);
      expect(result.pF).toBeCloseTo(own.pF!, 9);
    }
    if ('pExact' in own) expect(result.pExact).toBeCloseTo(own.pExact!, 11);
    // Held against the level: the counted p where there is one.
    expect(result.p).toBe(result.pExact ?? result.pF);
  });
  it('counts the orders of small cases as known', () => {
    // Two methods: the sign test. All six blocks agree: 2 of 64 orders.
    expect(friedmanExactP(Array.from({ length: 6 }, () => Float64Array.of(1, 2)))).toBeCloseTo(2 / 64, 15);
    // Three methods, three blocks of one order: 6 of 216 (Friedman 1937's table gives 0.028).
    expect(friedmanExactP(Array.from({ length: 3 }, () => Float64Array.of(1, 2, 3)))).toBeCloseTo(6 / 216, 15);
    expect(friedmanExactP(Array.from({ length: 4 }, () => Float64Array.of(1.5, 1.5)))).toBe(1);
    expect(friedmanExactP(Array.from({ length: 3 }, () => Float64Array.of(1, 2, 3, 4, 5, 6, 7, 8, 9)))).toBeNull();
  });
  it('needs the blocks that can reach the level at all', () => {
    // (1 / k!)^(n - 1) < 0.05, and q sqrt(k (k + 1) / (6 n)) < k - 1 with q of Demsar 2006, table 5.
    expect([2, 3, 4, 5, 10].map((k) => fewestBlocks(k))).toEqual([6, 3, 3, 3, 3]);
    for (const k of [2, 3, 4, 6]) {
      const same = (n: number) => friedman(Array.from({ length: n }, () => Array.from({ length: k }, (_, j) => j)));
      const reaches = (n: number): boolean => same(n).p < 0.05 && same(n).criticalDifference < k - 1;
      expect([reaches(fewestBlocks(k)), reaches(fewestBlocks(k) - 1)]).toEqual([true, false]);
    }
    expect(fewestBlocks(3, 0.01)).toBeGreaterThan(fewestBlocks(3));
    expect(() => fewestBlocks(1)).toThrow(RangeError);
  });
  it('refuses rows of different lengths and what is not a number', () => {
    expect(() => friedman([[1, 2], [1, 2, 3]])).toThrow(RangeError);
    expect(() => friedman([[1, NaN], [1, 2]])).toThrow(RangeError);
    expect(friedman([[1, Infinity], [1, Infinity]]).meanRanks).toEqual(Float64Array.of(1, 2));
  });
});

describe('Wilcoxon with zeros split', () => {
  it.each(reference.wilcoxon.map((own, i) => [i, own] as const))('equals scipy: pairs %i', (_, own) => {
    const result = wilcoxonSignedRank(own.a, own.b);
    expect(result.positive).toBeCloseTo(own.positive, 12);
    expect(result.negative).toBeCloseTo(own.negative, 12);
    expect(result.statistic).toBeCloseTo(own.statistic, 12);
    expect(result.exact).toBe(own.a.length <= 50);
    expect(result.pTwoSided).toBeCloseTo(result.exact ? own.pExact! : own.pAsymptotic, 10);
  });
  it('needs six pairs, and more where several pairs are compared', () => {
    // p of n pairs of one sign is 2^(1 - n); Holm's first step holds it against 0.05 over the number of comparisons.
    expect([1, 3, 6, 28].map((comparisons) => fewestPairs(comparisons))).toEqual([6, 7, 8, 11]);
    const oneSign = (n: number) => wilcoxonSignedRank(Array.from({ length: n }, (_, i) => i + 1), new Float64Array(n)).pTwoSided;
    expect([oneSign(5), oneSign(6)]).toEqual([2 / 32, 2 / 64]);
  });
  it('refuses pairs that are not numbers; two undefined values do not differ', () => {
    expect(() => wilcoxonSignedRank([NaN], [1])).toThrow(RangeError);
    expect(() => wilcoxonSignedRank([], [])).toThrow(RangeError);
    expect(wilcoxonSignedRank([Infinity, 1], [Infinity, 2])).toMatchObject({ positive: 0.5, negative: 2.5 });
  });
  it('compares every pair with Holm over blocks, and never separates below six of them', () => {
    const of = (id: string, n: number, shift: number) => ({ id, losses: Float64Array.from({ length: n }, (_, i) => i + 1 + shift) });
    expect(comparePairs([of('a', 5, 0), of('b', 5, 1)])[0]!.separable).toBe(false);
    expect(comparePairs([of('a', 6, 0), of('b', 6, 1)])[0]!.separable).toBe(true);
    expect(comparePairs([of('a', 6, 0), of('b', 6, 1), of('c', 6, 2)]).some((pair) => pair.separable)).toBe(false);
  });
});

describe('separation', () => {
  const columns = (rows: readonly (readonly number[])[]): Float64Array[] => rows[0]!.map((_, j) => Float64Array.from(rows, (row) => row[j]!));
  it('names no winner where the blocks cannot reach the level, and says how many there are and are needed', () => {
    const few = separate(columns([[1, 2, 3], [1, 2, 3]]));
    expect(few).toMatchObject({ enough: false, separable: false, groups: null, criticalDifference: null, blocks: 2, fewest: 3, order: [0, 1, 2] });
    expect(separationWords(few)).toBe('Not enough phantoms to separate: two phantoms, and for three solvers the tests need at least three to reach 5 %. No winner is named.');
    const one = separate(columns([[2, 1]]));
    expect(one).toMatchObject({ friedman: null, order: [1, 0], enough: false, fewest: 6 });
    expect(separationWords(one, 'draw')).toMatch(/^Not enough draws to separate: one draw/);
  });
  it('has one ordering for ranks and groups', () => {
    // Ten blocks, two pairs of twins: each twin wins half of the blocks, so the groups are those of the pairs.
    const rows = Array.from({ length: 12 }, (_, b) => (b % 2 ? [1, 2, 8, 9] : [2, 1, 9, 8]));
    const found = separate(columns(rows));
    expect([...found.meanRanks]).toEqual([1.5, 1.5, 3.5, 3.5]);
    // CD = 2.569 sqrt(20 / 72) = 1.354 (Demsar 2006, table 5).
    expect(found.criticalDifference).toBeCloseTo(1.354, 3);
    expect(found).toMatchObject({ groups: [0, 0, 1, 1], order: [0, 1, 2, 3], separable: true });
    expect(separationWords(found)).toBe('Two groups can be separated over twelve phantoms.');
  });
  it('keeps all in one group where Friedman does not reject', () => {
    const rows = Array.from({ length: 6 }, (_, b) => (b % 2 ? [1, 2, 3] : [3, 2, 1]));
    expect(separate(columns(rows))).toMatchObject({ enough: true, separable: false, groups: [0, 0, 0] });
  });
});
