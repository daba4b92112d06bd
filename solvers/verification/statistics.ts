import type { Source } from '../core/types';
import { nemenyiCriticalValue } from '../statistics/distributions';
import { friedman, friedmanFromRanks, type FriedmanResult } from '../statistics/friedman';
import { wilcoxonSignedRank } from '../statistics/wilcoxon';
import { digestOf, type VerificationCheck } from './check';

const group = 'Metrics and statistics';
const demsar: Source = { short: 'Demšar 2006', full: 'J. Demšar, Statistical comparisons of classifiers over multiple data sets, J. Mach. Learn. Res. 7 (2006) 1-30: worked example and table 5.' };

/** Mean ranks of four classifiers over 14 data sets, as printed. */
const printedRanks = [3.143, 2, 2.893, 1.964] as const;

function workedExample(key: string, name: string, line: string, published: string, figure: (result: FriedmanResult) => number, alpha = 0.05): VerificationCheck {
  return {
    key, group, name, line: `${line}, 4 methods over 14 data sets`, published, unit: '', bound: 5e-3, source: demsar, cost: 'light',
    reason: 'Half a unit of the last printed digit.',
    run() {
      const measured = figure(friedmanFromRanks(Float64Array.from(printedRanks), 14, 1, alpha));
      return { measured, gap: Math.abs(measured - Number(published)), digest: digestOf(measured) };
    },
  };
}

/** q for 2 .. 10 methods at the 5 % level, as printed. */
const printedQ = [1.96, 2.343, 2.569, 2.728, 2.85, 2.949, 3.031, 3.102, 3.164] as const;

const criticalValues: VerificationCheck = {
  key: 'nemenyi-table',
  group,
  name: 'Nemenyi critical values',
  line: '8 methods, 5 % level; the gap is over 2 to 10 methods',
  published: '3.031',
  unit: '',
  bound: 1e-3,
  reason: 'The table is printed with three decimals, and its entries for 3 and 7 methods are off by 7e-4.',
  source: demsar,
  cost: 'light',
  run() {
    const values = Float64Array.from(printedQ, (_, i) => nemenyiCriticalValue(i + 2, 0.05));
    return { measured: values[6], gap: Math.max(...values.map((v, i) => Math.abs(v - printedQ[i]))), digest: digestOf(values) };
  },
};

const before = [1.83, 0.5, 1.62, 2.48, 1.68, 1.88, 1.55, 3.06, 1.3];
const after = [0.878, 0.647, 0.598, 2.05, 1.06, 1.29, 1.06, 3.14, 1.29];
const hollander: Source = { short: 'Hollander and Wolfe; scipy 1.10.1', full: 'M. Hollander, D. A. Wolfe, Nonparametric Statistical Methods, Wiley, 1973: scale values of nine patients. Statistic and p computed with scipy 1.10.1.', fromMemory: true };

const wilcoxonStatistic: VerificationCheck = {
  key: 'wilcoxon-statistic', group, name: 'Wilcoxon signed ranks', line: 'smaller rank sum, nine pairs', published: '5', unit: '', bound: 0, reason: 'A sum of whole ranks.', source: hollander, cost: 'light',
  run() {
    const { statistic, positive, negative } = wilcoxonSignedRank(before, after);
    return { measured: statistic, gap: Math.abs(statistic - 5), digest: digestOf(Float64Array.of(positive, negative)) };
  },
};
const wilcoxonP: VerificationCheck = {
  key: 'wilcoxon-p', group, name: 'Wilcoxon signed ranks, p', line: 'two-sided, exact, nine pairs', published: '0.0390625', unit: '', bound: 1e-15, reason: 'A count over 2⁹ sign patterns: a binary fraction, so only rounding of the quotient is allowed.', source: hollander, cost: 'light',
  run() {
    const { pTwoSided } = wilcoxonSignedRank(before, after);
    return { measured: pTwoSided, gap: Math.abs(pTwoSided - 0.0390625), digest: digestOf(pTwoSided) };
  },
};

const friedman1937: Source = { short: 'Friedman 1937', full: 'M. Friedman, The use of ranks to avoid the assumption of normality implicit in the analysis of variance, J. Amer. Statist. Assoc. 32 (1937) 675-701: table of exact levels, three ranks, three sets.', fromMemory: true };

/** One order in three blocks of three: 6 of 216 arrangements, chi-square 6. */
const friedmanCounted: VerificationCheck = {
  key: 'friedman-counted', group, name: 'Friedman, level by counting', line: '3 methods in one order over 3 blocks', published: '0.028', unit: '', bound: 5e-4, reason: 'Half a unit of the last printed digit.', source: friedman1937, cost: 'light',
  run() {
    const { p, chiSquare } = friedman([[1, 2, 3], [1, 2, 3], [1, 2, 3]]);
    return { measured: p, gap: Math.abs(p - 0.028), digest: digestOf(Float64Array.of(p, chiSquare)) };
  },
};

export const statisticsChecks: readonly VerificationCheck[] = [
  friedmanCounted,
  workedExample('friedman-chi-square', 'Friedman chi-square', 'worked example', '9.28', (result) => result.chiSquare),
  workedExample('friedman-f', 'F of Iman and Davenport', 'worked example', '3.69', (result) => result.f),
  workedExample('nemenyi-critical-difference', 'Nemenyi critical difference, 5 %', 'worked example', '1.25', (result) => result.criticalDifference),
  workedExample('nemenyi-critical-difference-10', 'Nemenyi critical difference, 10 %', 'worked example', '1.12', (result) => result.criticalDifference, 0.1),
  criticalValues,
  wilcoxonStatistic,
  wilcoxonP,
];
