import type { Metric } from '../core/types';

export type Better = Metric['better'];

/** A metric's value as a loss: small is good. Undefined values and those that are not finite are the worst there is. */
export function lossOf(value: number | null, better: Better): number {
  if (value === null || !Number.isFinite(value)) return Infinity;
  if (better === 'lower') return value;
  if (better === 'higher') return -value;
  return Math.abs(better === 'one' ? value - 1 : value);
}
