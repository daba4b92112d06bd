import { describe, expect, it } from 'vitest';
import reference from '../../reference/statistics.json';
import { bootstrapInterval } from '../../../solvers/statistics/bootstrap';
import { chiSquareSurvival, fSurvival, incompleteBeta, nemenyiCriticalValue } from '../../../solvers/statistics/distributions';
import { friedman, friedmanFromRanks } from '../../../solvers/statistics/friedman';
import { averageRanks } from '../../../solvers/statistics/ranks';
import { holm, wilcoxonSignedRank } from '../../../solvers/statistics/wilcoxon';
import { median, quantileOfSorted } from '../../../solvers/statistics/quantiles';

const demsar = reference.friedmanNemenyi;

describe('Friedman and Nemenyi', () => {
  // Demsar 2006, worked example: mean ranks over 14 data sets printed with three decimals, so chi-square to 0.01.
  const result = friedmanFromRanks(Float64Array.from(demsar.inputs.average_ranks), demsar.inputs.N);
  it('give the published worked example', () => {
    expect(Math.abs(result.chiSquare - demsar.values.published.chi2_F)).toBeLessThan(0.01);
    expect(Math.abs(result.f - demsar.values.published.F_F)).toBeLessThan(0.01);
    expect(Math.abs(result.criticalDifference - demsar.values.published.CD05)).toBeLessThan(0.005);
    expect(Math.abs(friedmanFromRanks(result.meanRanks, 14, 1, 0.1).criticalDifference - demsar.values.published.CD10)).toBeLessThan(0.005);
  });
  it('equal scipy 1.10.1 on the same ranks', () => {
    // The printed ranks sum to 10 exactly, so only rounding is left: 1e-10. Demsar's own form cancels; chi-square to 1e-4 of it.
    expect(Math.abs(result.chiSquare - demsar.values.chi2_F)).toBeLessThan(1e-4);
    expect(chiSquareSurvival(demsar.values.chi2_F, 3)).toBeCloseTo(demsar.values.p_chi2, 10);
    expect(fSurvival(demsar.values.F_F, 3, 39)).toBeCloseTo(demsar.values.p_F, 10);
    expect(fSurvival(demsar.values.F_critical_05, 3, 39)).toBeCloseTo(0.05, 10);
    expect(result.criticalDifference).toBeCloseTo(demsar.values.CD_nemenyi_05, 9);
  });
  it.each(Object.entries(demsar.values.q_05_nemenyi))('critical value for %s methods', (k, q) => {
    // scipy's studentised range to 1e-9; Demsar's printed table has three digits and two entries off by 7e-4: 1e-3.
    expect(Math.abs(nemenyiCriticalValue(Number(k), 0.05) - q)).toBeLessThan(1e-9);
    expect(Math.abs(nemenyiCriticalValue(Number(k), 0.05) - demsar.values.published.q05_table[k as '2'])).toBeLessThan(1e-3);
    expect(Math.abs(nemenyiCriticalValue(Number(k), 0.1) - demsar.values.q_10_nemenyi[k as '2'])).toBeLessThan(1e-9);
  });
  it('correct for ties as scipy does', () => {
    const { inputs, values } = reference.friedmanTies;
    const tied = friedman(inputs.table_rows_datasets);
    values.average_ranks.forEach((rank, j) => expect(tied.meanRanks[j]).toBeCloseTo(rank, 12));
    expect(tied.chiSquare).toBeCloseTo(values.scipy_tie_corrected, 12);
    expect(tied.pChiSquare).toBeCloseTo(values.p, 10);
    expect(friedmanFromRanks(tied.meanRanks, 6).chiSquare).toBeCloseTo(values.demsar_uncorrected, 12);
  });
  it('a ranking that never changes has F without bound, and one that is all ties has none', () => {
    expect(friedman([[1, 2, 3], [1, 2, 3], [1, 2, 3]])).toMatchObject({ f: Infinity, pF: 0 });
    expect(friedman([[1, 1], [2, 2]])).toMatchObject({ chiSquare: 0, f: 0, pF: 1 });
    expect(() => friedman([[1, 2]])).toThrow(RangeError);
  });
});

describe('Wilcoxon signed ranks', () => {
  // Hollander and Wolfe's depression data (from memory), values by scipy 1.10.1.
  const { inputs, values } = reference.wilcoxon;
  it('equals scipy, exact p', () => {
    const result = wilcoxonSignedRank(inputs.x, inputs.y);
    expect(result).toMatchObject({ statistic: values.statistic_min_W, positive: values.W_plus, exact: true });
    expect(result.pTwoSided).toBeCloseTo(values.p_two_sided, 10);
  });
  it('splits zeros evenly and is symmetric', () => {
    const a = [1, 2, 3, 4, 5];
    const b = [1, 1, 5, 4, 2];
    const forward = wilcoxonSignedRank(a, b);
    const backward = wilcoxonSignedRank(b, a);
    // Ranks of |0, 1, 2, 0, 3|: zeros 1.5 each, then 3, 4, 5; half of each zero's rank on either side.
    expect(forward).toMatchObject({ positive: 3 + 5 + 1.5, negative: 4 + 1.5, exact: true });
    expect(backward).toMatchObject({ positive: forward.negative, negative: forward.positive, pTwoSided: forward.pTwoSided });
    expect(wilcoxonSignedRank([1, 2], [1, 2]).pTwoSided).toBe(1);
  });
  it('the normal approximation meets the exact p where it takes over', () => {
    const values = (n: number) => Array.from({ length: n }, (_, i) => (i % 3 === 0 ? -1 : 1) * (i + 1));
    const exact = wilcoxonSignedRank(values(50), new Float64Array(50));
    const approximate = wilcoxonSignedRank(values(51), new Float64Array(51));
    expect([exact.exact, approximate.exact]).toEqual([true, false]);
    // The same pattern of signs, one pair longer: p moves by a fraction of a per cent, and the normal tail without continuity correction is
    // off by about half a step of the statistic, 0.5 / sd = 0.5 % of a standard deviation, at 50 pairs.
    expect(Math.abs(approximate.pTwoSided - exact.pTwoSided)).toBeLessThan(0.02);
  });
  it('Holm: the example of four p values worked by hand', () => {
    // 0.01*4, max(0.04, 0.02*3), max(0.06, 0.03*2), max(0.06, 0.04): by the definition of Holm 1979.
    const adjusted = holm([0.04, 0.01, 0.03, 0.02]);
    [0.06, 0.04, 0.06, 0.06].forEach((value, i) => expect(adjusted[i]).toBeCloseTo(value, 15));
  });
});

describe('distributions', () => {
  it('have their closed forms', () => {
    for (const x of [0.01, 0.5, 3, 20]) expect(chiSquareSurvival(x, 2)).toBeCloseTo(Math.exp(-x / 2), 12);
    // I_x(2, 3) = 6 x^2 - 8 x^3 + 3 x^4.
    for (const x of [0.05, 0.3, 0.6, 0.95]) expect(incompleteBeta(x, 2, 3)).toBeCloseTo(6 * x ** 2 - 8 * x ** 3 + 3 * x ** 4, 12);
    // Two groups: the range is |difference| of two normals, so the critical value is the normal quantile.
    expect(nemenyiCriticalValue(2, 0.05)).toBeCloseTo(1.959963984540054, 11);
  });
});

describe('quantiles, ranks, bootstrap', () => {
  it('type 7 of Hyndman and Fan 1996, by hand', () => {
    const sorted = [1, 2, 4, 8];
    expect(quantileOfSorted(sorted, 0.5)).toBe(3);
    expect(quantileOfSorted(sorted, 0.05)).toBeCloseTo(1.15, 14);
    expect(quantileOfSorted(sorted, 1)).toBe(8);
    expect(median([5, 1, 3])).toBe(3);
    expect(() => quantileOfSorted([], 0.5)).toThrow(RangeError);
  });
  it('average ranks share ties', () => {
    expect(Array.from(averageRanks([3, 1, 3, Infinity, Infinity]))).toEqual([2.5, 1, 2.5, 4.5, 4.5]);
  });
  it('percentile interval of a mean', () => {
    const { inputs, values } = reference.bootstrapMean;
    const result = bootstrapInterval(Float64Array.from(inputs.x), (s) => s.reduce((a, b) => a + b, 0) / s.length, inputs.level, 10_000, 'mean');
    expect(result.value).toBeCloseTo(values.mean, 12);
    // Monte Carlo error of a percentile end with 10,000 resamples; the standard error has an exact value.
    expect(Math.abs(result.low - values.percentile_ci_200000[0])).toBeLessThan(0.03);
    expect(Math.abs(result.high - values.percentile_ci_200000[1])).toBeLessThan(0.03);
    expect(Math.abs(result.standardError / values.exact_bootstrap_se - 1)).toBeLessThan(0.03);
    expect(bootstrapInterval(Float64Array.from(inputs.x), (s) => s[0], 0.9, 50, 'a')).toEqual(bootstrapInterval(Float64Array.from(inputs.x), (s) => s[0], 0.9, 50, 'a'));
  });
});
