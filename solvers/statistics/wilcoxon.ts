import { normalCdf } from '../core/normal';
import { averageRanks, tieSum } from './ranks';

export interface WilcoxonResult {
  /** Rank sums of the positive and the negative differences; those of zeros are split between them (Demsar 2006; scipy's `zsplit`). */
  readonly positive: number;
  readonly negative: number;
  /** The smaller of the two. */
  readonly statistic: number;
  readonly pTwoSided: number;
  /** True where p counts all sign patterns (at most 50 pairs); else the normal approximation of Demsar 2006. */
  readonly exact: boolean;
}

const exactUpTo = 50;

/**
 * Wilcoxon's signed-rank test of paired values (Wilcoxon 1945). Up to 50 pairs p counts the sign patterns of the differences that are
 * not zero, on the ranks as they are, ties included; zeros keep their split ranks. Beyond, the normal approximation with the variance
 * of all ranks, as scipy has it.
 * @throws RangeError where the values differ in number, or there are none
 */
export function wilcoxonSignedRank(a: ArrayLike<number>, b: ArrayLike<number>): WilcoxonResult {
  if (a.length !== b.length) throw new RangeError(`Paired values differ in number: ${a.length} and ${b.length}.`);
  const n = a.length;
  if (n === 0) throw new RangeError('The signed-rank test needs at least one pair.');
  const difference = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    if (Number.isNaN(a[i]) || Number.isNaN(b[i])) throw new RangeError(`Pair ${i + 1} is not a number.`);
    // Two undefined values (both Infinity, the worst) do not differ.
    difference[i] = a[i] === b[i] ? 0 : a[i] - b[i];
  }
  const ranks = averageRanks(difference.map(Math.abs));
  let above = 0;
  let below = 0;
  let zeros = 0;
  for (let i = 0; i < n; i++) {
    if (difference[i] > 0) above += ranks[i];
    else if (difference[i] < 0) below += ranks[i];
    else zeros += ranks[i];
  }
  const positive = above + zeros / 2;
  const negative = below + zeros / 2;
  const statistic = Math.min(positive, negative);
  if (above + below === 0) return { positive, negative, statistic, pTwoSided: 1, exact: n <= exactUpTo };
  if (n <= exactUpTo) {
    const signed = ranks.filter((_, i) => difference[i] !== 0);
    return { positive, negative, statistic, pTwoSided: signPatternP(signed, Math.min(above, below)), exact: true };
  }
  const variance = (n * (n + 1) * (2 * n + 1)) / 24 - tieSum(ranks) / 48;
  return { positive, negative, statistic, pTwoSided: Math.min(1, 2 * normalCdf((statistic - 0.25 * n * (n + 1)) / Math.sqrt(variance))), exact: false };
}

/** Twice the share of sign patterns whose rank sum is at most `sum`. Ranks are multiples of one half, so doubled ones are whole. */
function signPatternP(ranks: Float64Array, sum: number): number {
  let top = 0;
  for (let i = 0; i < ranks.length; i++) top += 2 * ranks[i];
  const ways = new Float64Array(top + 1);
  ways[0] = 1;
  let all = 1;
  for (let i = 0; i < ranks.length; i++) {
    const rank = 2 * ranks[i];
    for (let s = top; s >= rank; s--) ways[s] += ways[s - rank];
    all *= 2;
  }
  let below = 0;
  for (let s = 0; s <= 2 * sum; s++) below += ways[s];
  return Math.min(1, (2 * below) / all);
}

/**
 * Fewest pairs with which the test can reach a level: all of one sign have p = 2^(1 - n), and of several comparisons Holm's correction
 * holds the smallest p against the level over their number. One comparison at 5 % needs six.
 */
export function fewestPairs(comparisons = 1, alpha = 0.05): number {
  let n = 1;
  for (let p = 1; p * comparisons >= alpha; p /= 2) n++;
  return n;
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
