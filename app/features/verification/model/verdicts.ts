import type { VerificationItem } from '../../../../shared/contracts/verification';
import { marginOf, withinBound } from '../../../../solvers/verification/check';
import type { MarkState } from '../../../components/ui/state-mark';
import { plural } from '../../../lib/format';
import type { BrowserOutcome } from '../../../workers/verification-messages';

/** A check in this browser. */
export type BrowserResult =
  | { readonly state: 'waiting' }
  | { readonly state: 'running' }
  | { readonly state: 'done'; readonly outcome: BrowserOutcome }
  | { readonly state: 'failed'; readonly message: string };

export type BrowserVerdict = 'same' | 'differs' | 'unmatched' | 'fail';

/** What this browser's result says beside the server's; 'unmatched' where the server has none to compare with. */
export function browserVerdict(item: VerificationItem, outcome: BrowserOutcome): BrowserVerdict {
  if (item.digest === outcome.digest) return 'same';
  if (!withinBound(outcome.gap, item.bound)) return 'fail';
  return item.digest === null ? 'unmatched' : 'differs';
}
export const verdictMarks: Record<BrowserVerdict, readonly [MarkState, string]> = {
  same: ['pass', 'Same bits'],
  differs: ['caution', 'Differs in last bit'],
  unmatched: ['pass', 'Pass, not compared'],
  fail: ['fail', 'Fails here'],
};

export const shows = ['all', 'not-run', 'failed'] as const;
export type Show = (typeof shows)[number];
export const readShow = (text: string | null): Show => shows.find((show) => show === text) ?? 'all';

export function shown(items: readonly VerificationItem[], show: Show): VerificationItem[] {
  return items.filter(({ state }) => show === 'all' || (show === 'not-run' ? state === 'not-run' : state === 'fail'));
}

/** In the order of the page, group by group. */
export function byGroup(items: readonly VerificationItem[]): readonly (readonly [group: string, items: readonly VerificationItem[]])[] {
  const groups = new Map<string, VerificationItem[]>();
  for (const item of items) groups.set(item.group, [...(groups.get(item.group) ?? []), item]);
  return [...groups];
}

/** The check whose gap comes closest to its bound; exact ones have no margin. */
export function tightest(items: readonly VerificationItem[]): { readonly item: VerificationItem; readonly margin: number } | null {
  let found: { item: VerificationItem; margin: number } | null = null;
  for (const item of items) {
    if (item.gap === null || item.gap === 0 || item.bound === 0) continue;
    const margin = marginOf(item.gap, item.bound);
    if (!found || margin < found.margin) found = { item, margin };
  }
  return found;
}

export function slowest(items: readonly VerificationItem[]): VerificationItem | null {
  return items.reduce<VerificationItem | null>((worst, item) => (item.seconds !== null && item.seconds > (worst?.seconds ?? -1) ? item : worst), null);
}

export interface BrowserTally {
  readonly done: number;
  readonly words: string;
}
export function tallyBrowser(items: readonly VerificationItem[], results: ReadonlyMap<string, BrowserResult>): BrowserTally {
  const count: Record<BrowserVerdict, number> = { same: 0, differs: 0, unmatched: 0, fail: 0 };
  let broken = 0;
  for (const item of items) {
    const result = results.get(item.key);
    if (result?.state === 'done') count[browserVerdict(item, result.outcome)]++;
    else if (result?.state === 'failed') broken++;
  }
  const done = count.same + count.differs + count.unmatched + count.fail;
  const words = [
    count.same ? `${count.same} with the same bits` : '',
    count.differs ? (count.differs === 1 ? '1 differs' : `${count.differs} differ`) : '',
    count.unmatched ? `${count.unmatched} not compared` : '',
    count.fail + broken ? `${plural(count.fail + broken, 'failure')}` : '',
  ].filter(Boolean).join(', ');
  return { done, words: words || 'nothing computed yet' };
}
