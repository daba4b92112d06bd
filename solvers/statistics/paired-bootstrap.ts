import { exp, ln } from '../core/math';
import { deriveKey, RandomStream } from '../core/random';
import { quantileOfSorted } from './quantiles';

/** One solver: its losses by phantom and draw; small is good, Infinity where undefined. Draws of one place are paired across solvers. */
export interface BootstrapEntry {
  readonly id: string;
  readonly phantoms: readonly Float64Array[];
}

/** How many times the first solver's error is the second's. */
export interface PairedRatio {
  readonly first: string;
  readonly second: string;
  /** Geometric mean over phantoms of the ratio of medians over draws; null with the reason where a median is not positive. */
  readonly ratio: number | null;
  readonly low: number | null;
  readonly high: number | null;
  /** Share of the resamples in which the first has the smaller error; equal ones are half. */
  readonly firstBetter: number | null;
  /** The interval leaves 1 out. */
  readonly separable: boolean;
  readonly reason: string | null;
}

/**
 * Paired bootstrap in two stages (Davison and Hinkley 1997, section 3.8): phantoms are drawn with replacement, then the draws of each;
 * all solvers get the same resamples, so what they share cancels. Percentile intervals. With one phantom its draws alone are resampled,
 * and the interval speaks about that phantom.
 *
 * Cost: resamples x solvers x phantoms x draws.
 * @param options.level coverage aimed at; with few phantoms the true one is lower
 * @throws RangeError where solvers differ in their phantoms or draws, or there is none
 */
export function pairedBootstrap(entries: readonly BootstrapEntry[], options: { readonly seed: string; readonly resamples?: number; readonly level?: number }): PairedRatio[] {
  const { seed, resamples = 1000, level = 0.95 } = options;
  const phantoms = entries[0]?.phantoms.length ?? 0;
  for (const { id, phantoms: own } of entries)
    if (own.length !== phantoms || own.some((draws, p) => draws.length !== entries[0].phantoms[p].length || draws.length === 0 || draws.some(Number.isNaN)))
      throw new RangeError(`The losses of '${id}' are not paired with those of '${entries[0].id}'.`);
  if (phantoms === 0) return [];
  // Ascending order of each solver's draws, once: a resampled median is then a walk over counts.
  const sorted = entries.map(({ phantoms: own }) => own.map((draws) => Uint16Array.from(Array.from(draws.keys()).sort((a, b) => Number(draws[a] > draws[b]) - Number(draws[a] < draws[b]) || a - b))));
  const counts = entries[0].phantoms.map((draws) => new Uint16Array(draws.length));
  const logs = entries.map(() => new Float64Array(resamples));
  const stream = new RandomStream(deriveKey('hadamark paired bootstrap 1', seed));
  for (let r = 0; r < resamples; r++) {
    for (let k = 0; k < phantoms; k++) {
      const p = stream.nextIndex(phantoms);
      const count = counts[p].fill(0);
      for (let d = 0; d < count.length; d++) count[stream.nextIndex(count.length)]++;
      for (let e = 0; e < entries.length; e++) logs[e][r] += logOf(countedMedian(entries[e].phantoms[p], sorted[e][p], count)) / phantoms;
    }
  }
  const plain = entries.map(({ phantoms: own }, e) => own.reduce((sum, draws, p) => sum + logOf(countedMedian(draws, sorted[e][p], counts[p].fill(1))) / phantoms, 0));
  const found: PairedRatio[] = [];
  const differences = new Float64Array(resamples);
  for (let i = 0; i < entries.length; i++)
    for (let j = i + 1; j < entries.length; j++) {
      const names = { first: entries[i].id, second: entries[j].id };
      let better = 0;
      for (let r = 0; r < resamples; r++) {
        differences[r] = logs[i][r] - logs[j][r];
        better += differences[r] < 0 ? 1 : differences[r] === 0 ? 0.5 : 0;
      }
      if (!Number.isFinite(plain[i] - plain[j]) || differences.some((value) => !Number.isFinite(value))) {
        found.push({ ...names, ratio: null, low: null, high: null, firstBetter: null, separable: false, reason: 'A median error is undefined or not positive: there is no ratio.' });
        continue;
      }
      const ordered = Float64Array.from(differences).sort();
      const low = exp(quantileOfSorted(ordered, 0.5 * (1 - level)));
      const high = exp(quantileOfSorted(ordered, 0.5 * (1 + level)));
      found.push({ ...names, ratio: exp(plain[i] - plain[j]), low, high, firstBetter: better / resamples, separable: low > 1 || high < 1, reason: null });
    }
  return found;
}

const logOf = (median: number): number => (median > 0 ? (median === Infinity ? Infinity : ln(median)) : NaN);

/** Median of values taken `count` times each. @param order places of the values, ascending */
function countedMedian(values: Float64Array, order: Uint16Array, count: Uint16Array): number {
  const n = values.length;
  const upper = n >> 1;
  let seen = 0;
  let below = NaN;
  for (let i = 0; i < n; i++) {
    seen += count[order[i]];
    if (n % 2 === 0 && Number.isNaN(below) && seen >= upper) below = values[order[i]];
    if (seen > upper) return n % 2 === 0 ? 0.5 * (below + values[order[i]]) : values[order[i]];
  }
  return NaN;
}
