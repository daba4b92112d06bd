import { lossOf, type Better } from './loss';

/** One solver in a bench: its values by phantom, level and draw; null where undefined. A phantom whose run is missing is null. */
export interface RankedEntry {
  readonly id: string;
  readonly values: readonly (readonly (readonly (number | null)[])[] | null)[];
}

/** Median of losses, where undefined values count as Infinity. NaN without any. */
export function medianLoss(losses: ArrayLike<number>): number {
  const sorted = Float64Array.from(losses).sort();
  const n = sorted.length;
  if (n === 0) return NaN;
  const middle = n >> 1;
  return n % 2 === 1 ? sorted[middle] : 0.5 * (sorted[middle - 1] + sorted[middle]);
}

export function phantomsOf(entries: readonly RankedEntry[]): number {
  return entries.reduce((most, entry) => Math.max(most, entry.values.length), 0);
}

/** Losses of the draws of one phantom at a level; a draw that another entry has and this one lacks is the worst. Null without a run. */
export function drawLosses(entry: RankedEntry, phantom: number, level: number, draws: number, better: Better): Float64Array | null {
  const values = entry.values[phantom]?.[level];
  return values ? Float64Array.from({ length: draws }, (_, draw) => lossOf(values[draw] ?? null, better)) : null;
}

/** Most draws that any entry has of a phantom at a level. */
export function drawCount(entries: readonly RankedEntry[], phantom: number, level: number): number {
  return entries.reduce((most, entry) => Math.max(most, entry.values[phantom]?.[level]?.length ?? 0), 0);
}

/**
 * One figure a phantom: the median loss over the draws of a level, and of several levels the mean of their medians. NaN where the run
 * is missing, Infinity where the median draw is undefined.
 */
export function phantomLosses(entries: readonly RankedEntry[], levels: readonly number[], better: Better): Float64Array[] {
  if (levels.length === 0) throw new RangeError('A comparison needs at least one level.');
  const phantoms = phantomsOf(entries);
  return entries.map((entry) => {
    const losses = new Float64Array(phantoms);
    for (let phantom = 0; phantom < phantoms; phantom++) {
      let sum = 0;
      for (const level of levels) {
        const draws = drawLosses(entry, phantom, level, drawCount(entries, phantom, level), better);
        sum += draws ? medianLoss(draws) : NaN;
      }
      losses[phantom] = sum / levels.length;
    }
    return losses;
  });
}

/** One figure a draw of a phantom: its loss at a level, or the mean of its losses over several. Null without a run. */
export function drawFigures(entry: RankedEntry, phantom: number, levels: readonly number[], draws: number, better: Better): Float64Array | null {
  const figures = new Float64Array(draws);
  for (const level of levels) {
    const losses = drawLosses(entry, phantom, level, draws, better);
    if (!losses) return null;
    for (let draw = 0; draw < draws; draw++) figures[draw] += losses[draw] / levels.length;
  }
  return figures;
}
