import type { LevelStatistics } from '../../../../shared/contracts/common';
import type { RunDetail } from '../../../../shared/contracts/runs';
import { metrics } from '../../../../solvers/metrics/registry';

/** Of the images of a level, not of the figures of its draws. */
export const momentColumns = ['biasSquared', 'variance', 'meanSquaredError'] as const;
export type MomentColumn = (typeof momentColumns)[number];
export const isMoment = (column: string): column is MomentColumn => momentColumns.some((own) => own === column);

/** Figures shown for a metric in the error table, or bias and variance of the image. */
export interface TableGroup {
  key: string;
  name: string;
  unit: string;
  /** Factor from the stored value to the printed one (shares are printed in per cent). */
  scale: number;
  columns: readonly ('mean' | 'sd' | 'p05' | 'p95' | 'worst' | MomentColumn)[];
  /** The dot strip of all draws follows. */
  draws: boolean;
  /** 'three' significant ones where values span decades, as variances do. */
  digits: 'error' | 'one' | 'three';
}

const standing: Record<string, Partial<TableGroup>> = {
  'relative-l2-error': { columns: ['mean', 'sd', 'p05', 'p95', 'worst'], draws: true },
  'sup-error': { columns: ['mean', 'sd', 'worst'] },
  'position-error': { columns: ['mean', 'worst'], unit: '% of radius', scale: 100, digits: 'one' },
  resolution: { unit: '% of radius', scale: 100, digits: 'one' },
};
/** Groups shown before the reader chooses; relative L2 is always first and always there. */
export const fixedGroup = 'relative-l2-error';
export const standardGroups: ReadonlySet<string> = new Set(['sup-error', 'position-error', 'bias-variance']);

export const momentsGroup = 'bias-variance';

/** The standard groups that have a value somewhere: a function of one variable has no position error but that of its peak. */
export function openGroups(run: Pick<RunDetail, 'table'>): ReadonlySet<string> {
  const known = (key: string): boolean => key === momentsGroup || (run.table[key] ?? []).some((row) => row.median !== null);
  return new Set([...standardGroups, ...(known('position-error') ? [] : ['peak-position-error'])].filter(known));
}

/** Every metric that the run has a table for, in registry order; then bias and variance, where the run has them. */
export function tableGroups(run: Pick<RunDetail, 'table' | 'moments'> & { readonly unit?: string }): TableGroup[] {
  const ofMetrics = metrics
    .filter((metric) => run.table[metric.key])
    .map((metric) => ({
      key: metric.key, name: metric.short, unit: metric.unit, scale: 1, columns: ['mean', 'worst'] as const, draws: false, digits: 'error' as const, ...standing[metric.key],
      // In the unit of what is reconstructed.
      ...(metric.key === 'sup-error' ? { unit: run.unit ?? '' } : {}),
    }));
  if (run.moments.every((own) => own === null)) return ofMetrics;
  return [...ofMetrics, { key: momentsGroup, name: 'Bias and variance of the image', unit: 'squares', scale: 1, columns: momentColumns, draws: false, digits: 'three' }];
}

/** How many standard deviations the worst draw lies beyond the mean; null when it does not pass three. */
export function outlier(row: LevelStatistics): { draw: number; deviations: number } | null {
  if (row.worst === null || row.mean === null || !row.sd || row.worstDraw === null) return null;
  const deviations = Math.abs(row.worst - row.mean) / row.sd;
  return deviations > 3 ? { draw: row.worstDraw, deviations } : null;
}

/** Shade of an error cell, 0 to 0.38, by the logarithm of the error between a twentieth of and the trivial reconstruction. */
export function shade(value: number | null, trivial: number | null): number {
  if (value === null || value <= 0 || !trivial) return 0;
  return Math.min(0.38, Math.max(0, (Math.log(value / (trivial * 0.05)) / Math.log(20)) * 0.38));
}

/** Index of the ladder level nearest to a noise, in the logarithm. */
export function nearestLevel(ladder: readonly number[], noise: number): number {
  let best = 0;
  for (let i = 1; i < ladder.length; i++)
    if (Math.abs(Math.log(ladder[i]! / noise)) < Math.abs(Math.log(ladder[best]! / noise))) best = i;
  return best;
}
