import { median } from './quantiles';
import { holm, wilcoxonSignedRank } from './wilcoxon';

/** Two solvers on the same blocks: phantoms, or draws of one phantom. */
export interface PairComparison {
  readonly first: string;
  readonly second: string;
  readonly pairs: number;
  /** Share of the blocks that the first wins; a tie is half a win. */
  readonly wins: number;
  /** Median of first / second; null where a loss is not positive. */
  readonly medianRatio: number | null;
  readonly pValue: number;
  /** With Holm's correction over all pairs compared. */
  readonly pHolm: number;
  readonly separable: boolean;
}

/**
 * Every pair of solvers by Wilcoxon's signed-rank test over paired losses (small is good, Infinity where undefined), with Holm's
 * correction (Demsar 2006).
 * @throws RangeError where the solvers have different numbers of blocks
 */
export function comparePairs(solvers: readonly { readonly id: string; readonly losses: Float64Array }[], alpha = 0.05): PairComparison[] {
  const drafts: Omit<PairComparison, 'pHolm' | 'separable'>[] = [];
  for (let i = 0; i < solvers.length; i++)
    for (let j = i + 1; j < solvers.length; j++) {
      const a = solvers[i].losses;
      const b = solvers[j].losses;
      const ratios: number[] = [];
      for (let k = 0; k < a.length; k++) if (a[k] > 0 && b[k] > 0 && Number.isFinite(a[k]) && Number.isFinite(b[k])) ratios.push(a[k] / b[k]);
      drafts.push({
        first: solvers[i].id, second: solvers[j].id, pairs: a.length, wins: winShare(a, b) ?? 0.5,
        medianRatio: ratios.length > 0 ? median(ratios) : null, pValue: wilcoxonSignedRank(a, b).pTwoSided,
      });
    }
  const adjusted = holm(drafts.map((draft) => draft.pValue));
  return drafts.map((draft, i) => ({ ...draft, pHolm: adjusted[i], separable: adjusted[i] < alpha }));
}

/** Share of common blocks in which `a` has the smaller loss; equal losses are half a win each. */
export function winShare(a: Float64Array, b: Float64Array): number | null {
  let wins = 0;
  let pairs = 0;
  for (let i = 0; i < a.length; i++) {
    if (Number.isNaN(a[i]) || Number.isNaN(b[i])) continue;
    pairs++;
    if (a[i] < b[i]) wins++;
    else if (a[i] === b[i]) wins += 0.5;
  }
  return pairs === 0 ? null : wins / pairs;
}
