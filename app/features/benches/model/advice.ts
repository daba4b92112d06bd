import type { Ranking } from '../../../../shared/contracts/benches';
import type { FamilyKey } from '../../../../shared/domain/families';
import { formatPercent } from '../../../lib/format';
import type { RankingRow } from './ranking-groups';

/** What a reader may care most about. */
export const cares = [
  { key: 'overall', words: 'overall error', metric: 'relative-l2-error', by: 'by relative L2' },
  { key: 'largest', words: 'the largest error', metric: 'sup-error', by: 'by L∞' },
  { key: 'position', words: 'position of targets', metric: 'position-error', by: 'by position error' },
  { key: 'worse-noise', words: 'surviving worse noise', metric: 'relative-l2-error', by: 'by breakdown noise' },
  { key: 'time', words: 'time per reconstruction', metric: 'relative-l2-error', by: 'by time' },
] as const;
export type Care = (typeof cares)[number]['key'];
export const careOf = (key: string): (typeof cares)[number] => cares.find((c) => c.key === key) ?? cares[0];

/** A function of one variable has no targets. */
export const caresFor = (family: FamilyKey): readonly (typeof cares)[number][] => cares.filter((c) => !(c.key === 'position' && family === 'integral-equation'));

/** Seconds that a reader can wait for a reconstruction. */
export const budgets = [
  { key: 'any', words: 'any time', seconds: Infinity },
  { key: '1s', words: 'one second', seconds: 1 },
  { key: '50ms', words: '50 ms', seconds: 0.05 },
  { key: '5ms', words: '5 ms', seconds: 0.005 },
] as const;
export const budgetOf = (key: string): (typeof budgets)[number] => budgets.find((b) => b.key === key) ?? budgets[0];

/** For breakdown and time only methods count that still beat the trivial answer by a tenth. */
const useful = (row: RankingRow, ranking: Ranking): boolean => ranking.trivial === null || (row.median !== null && row.median < 0.9 * ranking.trivial);

/** The three rows to name, best first, within the time budget. Rows without a finished run are left out. */
export function advise(ranking: Ranking, care: Care, seconds: number): RankingRow[] {
  const rows = ranking.rows.filter((r) => r.median !== null && (r.secondsPerReconstruction ?? 0) <= seconds);
  if (care === 'worse-noise') {
    return rows.filter((r) => useful(r, ranking)).sort((a, b) => (b.breakdown ?? Infinity) - (a.breakdown ?? Infinity) || (a.median ?? 0) - (b.median ?? 0)).slice(0, 3);
  }
  if (care === 'time') return rows.filter((r) => useful(r, ranking)).sort((a, b) => (a.secondsPerReconstruction ?? Infinity) - (b.secondsPerReconstruction ?? Infinity)).slice(0, 3);
  return rows.slice(0, 3);
}

/** How far a method's breakdown is from the reader's noise. */
export function marginWords(row: Pick<RankingRow, 'breakdown' | 'breakdownNote'>, noise: number, ladderEnd: number): string {
  if (row.breakdown === null) return row.breakdownNote === 'throughout' ? 'Worse than the plain background at every level.' : row.breakdownNote === 'beyond' ? `Holds up to ${formatPercent(ladderEnd)}.` : '';
  const times = row.breakdown / noise;
  if (times > 8) return `Breakdown at ${formatPercent(row.breakdown)}, ${times.toFixed(0)} times your noise.`;
  if (times > 1) return `Near its limit, breakdown at ${formatPercent(row.breakdown)}.`;
  return `Past its breakdown of ${formatPercent(row.breakdown)}.`;
}

/** How sure the reading is: who else the test cannot tell from it. */
export function tieWords(row: RankingRow, ranking: Ranking): string {
  if (ranking.belowFloor) return '';
  if (row.complete && ranking.test.fewest !== null && !ranking.test.enough) return `${ranking.test.blocks === 1 ? 'One phantom is' : `${ranking.test.blocks} phantoms are`} too few to separate it from others.`;
  if (row.tieGroup === null) return '';
  const others = ranking.rows.filter((r) => r.tieGroup === row.tieGroup && r.solver.slug !== row.solver.slug).length;
  if (others === 0) return '';
  return `Cannot be separated from ${others === 1 ? 'one other' : `${others} others`}.`;
}
