import { normalCdf } from '../core/normal';
import { tieSum } from './friedman';
import { averageRanks } from './ranks';

export interface WilcoxonResult {
  /** Rank sums of the positive and the negative differences; those of zeros are split between them (Demsar 2006; scipy's `zsplit`). */
  readonly positive: number;
  readonly negative: number;
  /** The smaller of the two. */
  readonly statistic: number;
  readonly pTwoSided: number;
  /** True where p counts all sign patterns (no ties, no zeros, at most 50 pairs); else the normal approximation. */
  readonly exact: boolean;
}

/** Wilcoxon's signed-rank test of paired values (Wilcoxon 1945). */
export function wilcoxonSignedRank(a: ArrayLike<number>, b: ArrayLike<number>): WilcoxonResult {
  if (a.length !== b.length) throw new RangeError(`Paired values differ in number: ${a.length} and ${b.length}.`);
  const n = a.length;
  if (n === 0) throw new RangeError('The signed-rank test needs at least one pair.');
  const difference = new Float64Array(n);
  // Two undefined values (both worst) do not differ.
  for (let i = 0; i < n; i++) difference[i] = a[i] === b[i] ? 0 : a[i] - b[i];
  const ranks = averageRanks(difference.map(Math.abs));
  let positive = 0;
  let negative = 0;
  let zeros = 0;
  for (let i = 0; i < n; i++) {
    if (difference[i] > 0) positive += ranks[i];
    else if (difference[i] < 0) negative += ranks[i];
    else {
      positive += ranks[i] / 2;
      negative += ranks[i] / 2;
      zeros++;
    }
  }
  const statistic = Math.min(positive, negative);
  const ties = tieSum(ranks);
  if (ties === 0 && zeros === 0 && n <= 50) return { positive, negative, statistic, pTwoSided: exactP(n, statistic), exact: true };
  // Each rank that is not a zero's has its sign by a fair coin. With ties this is the usual corrected variance; with zeros it is smaller than
  // scipy's, which lets the split zeros scatter.
  let variance = 0;
  for (let i = 0; i < n; i++) if (difference[i] !== 0) variance += 0.25 * ranks[i] * ranks[i];
  if (variance === 0) return { positive, negative, statistic, pTwoSided: 1, exact: false };
  const z = (statistic - 0.25 * n * (n + 1)) / Math.sqrt(variance);
  return { positive, negative, statistic, pTwoSided: Math.min(1, 2 * normalCdf(z)), exact: false };
}

/** Twice the share of sign patterns whose rank sum is at most `statistic`, by counting subsets of 1 ... n. */
function exactP(n: number, statistic: number): number {
  const top = (n * (n + 1)) / 2;
  const ways = new Float64Array(top + 1);
  ways[0] = 1;
  for (let rank = 1; rank <= n; rank++) for (let sum = top; sum >= rank; sum--) ways[sum] += ways[sum - rank];
  let below = 0;
  let all = 1;
  for (let sum = 0; sum <= statistic; sum++) below += ways[sum];
  for (let rank = 0; rank < n; rank++) all *= 2;
  return Math.min(1, (2 * below) / all);
}

/** Holm's step-down adjustment (Holm 1979): p values that may be held against the level of the whole family, in the order given. */
export function holm(pValues: readonly number[]): number[] {
  const order = pValues.map((_, i) => i).sort((i, j) => pValues[i] - pValues[j] || i - j);
  const adjusted = new Array<number>(pValues.length);
  let running = 0;
  order.forEach((index, step) => {
    running = Math.max(running, Math.min(1, (pValues.length - step) * pValues[index]));
    adjusted[index] = running;
  });
  return adjusted;
}
