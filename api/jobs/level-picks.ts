import type { Metric } from '../../solvers/core/types';
import { levelStatistics } from '../../solvers/statistics/error-table';

/** Draws of a level whose images are kept, as the error table names them. */
export interface LevelPicks {
  /** Null where the metric is undefined in every draw. */
  readonly median: number | null;
  readonly medianDraw: number;
  readonly worstDraw: number;
}

/** @param rows every draw of the level, in any order */
export function pickDraws(rows: readonly { readonly draw: number; readonly value: number | null }[], better: Metric['better']): LevelPicks {
  if (rows.length === 0) throw new RangeError('A level without draws has no median.');
  const draws: (number | null)[] = [];
  for (const { draw, value } of rows) {
    while (draws.length <= draw) draws.push(null);
    draws[draw] = value;
  }
  const { median, medianDraw, worstDraw } = levelStatistics(0, draws, better);
  return { median, medianDraw: medianDraw ?? 0, worstDraw: worstDraw ?? 0 };
}
