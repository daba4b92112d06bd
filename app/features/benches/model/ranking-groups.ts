import type { Ranking } from '../../../../shared/contracts/benches';

export type RankingRow = Ranking['rows'][number];

/** Rows of one rank in table order. */
export interface RankingGroup {
  /** Null below the model-error floor, or where runs are missing. */
  rank: number | null;
  rows: readonly RankingRow[];
}

/** Neighbouring rows of the same tie group share one rank; a row without a group stands alone. */
export function rankingGroups(rows: readonly RankingRow[]): RankingGroup[] {
  const groups: { rank: number | null; tie: number | null; rows: RankingRow[] }[] = [];
  for (const row of rows) {
    const last = groups[groups.length - 1];
    if (last && row.tieGroup !== null && last.tie === row.tieGroup) last.rows.push(row);
    else groups.push({ rank: row.rank, tie: row.tieGroup, rows: [row] });
  }
  return groups.map(({ rank, rows: members }) => ({ rank, rows: members }));
}
