import type { Trial } from '../campaign/trial';
import { lossOf, type Better } from './loss';
import { quantileOfSorted, sortedCopy } from './quantiles';

/** One row of an error table: one metric at one noise level over its draws. Quantiles are of type 7. */
export interface LevelStatistics {
  readonly level: number;
  /** Draws with a defined value. */
  readonly count: number;
  readonly median: number | null;
  readonly mean: number | null;
  /** Sample standard deviation (n - 1); null below two values. */
  readonly sd: number | null;
  readonly p05: number | null;
  readonly p95: number | null;
  readonly worst: number | null;
  /** Draw whose value lies closest to the median, the first of equals; and the worst one. */
  readonly medianDraw: number | null;
  readonly worstDraw: number | null;
  /** In draw order, null where undefined. */
  readonly draws: (number | null)[];
  readonly reason: string | null;
}

/** @param draws values in draw order */
export function levelStatistics(level: number, draws: readonly (number | null)[], better: Better, reason: string | null = null): LevelStatistics {
  const defined = draws.filter((value): value is number => value !== null && Number.isFinite(value));
  const kept = draws.map((value) => (value !== null && Number.isFinite(value) ? value : null));
  if (defined.length === 0)
    return { level, count: 0, median: null, mean: null, sd: null, p05: null, p95: null, worst: null, medianDraw: null, worstDraw: null, draws: kept, reason: reason ?? (draws.length === 0 ? 'No draw has finished.' : null) };
  const sorted = sortedCopy(defined);
  const middle = quantileOfSorted(sorted, 0.5);
  let mean = 0;
  for (const value of defined) mean += value;
  mean /= defined.length;
  let squares = 0;
  for (const value of defined) squares += (value - mean) * (value - mean);
  let medianDraw = -1;
  let worstDraw = -1;
  kept.forEach((value, draw) => {
    if (value === null) return;
    if (medianDraw < 0 || Math.abs(value - middle) < Math.abs(kept[medianDraw]! - middle)) medianDraw = draw;
    if (worstDraw < 0 || lossOf(value, better) > lossOf(kept[worstDraw], better)) worstDraw = draw;
  });
  return {
    level, count: defined.length, median: middle, mean, sd: defined.length > 1 ? Math.sqrt(squares / (defined.length - 1)) : null,
    p05: quantileOfSorted(sorted, 0.05), p95: quantileOfSorted(sorted, 0.95), worst: kept[worstDraw], medianDraw, worstDraw, draws: kept,
    reason: defined.length < draws.length ? reason : null,
  };
}

/**
 * The error table of one metric: one row a level of the ladder, whatever trials are finished. Draws are placed by their index.
 */
export function errorTable(trials: readonly Pick<Trial, 'levelIndex' | 'drawIndex' | 'metrics'>[], ladder: readonly number[], metric: { readonly key: string; readonly better: Better }): LevelStatistics[] {
  return ladder.map((level, levelIndex) => {
    const draws: (number | null)[] = [];
    let reason: string | null = null;
    for (const trial of trials) {
      if (trial.levelIndex !== levelIndex) continue;
      const value = trial.metrics[metric.key];
      while (draws.length <= trial.drawIndex) draws.push(null);
      draws[trial.drawIndex] = value?.value ?? null;
      if (value?.value == null) reason ??= value?.reason ?? 'This metric was not computed.';
    }
    return levelStatistics(level, draws, metric.better, reason);
  });
}
