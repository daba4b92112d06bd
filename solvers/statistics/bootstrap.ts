import { deriveKey, RandomStream } from '../core/random';
import { quantileOfSorted } from './quantiles';

export interface Interval {
  readonly value: number;
  readonly low: number;
  readonly high: number;
}

/**
 * Percentile interval of a statistic by resampling with replacement (Efron 1979), seeded.
 * @param level coverage, e.g. 0.9
 */
export function bootstrapInterval(values: Float64Array, statistic: (sample: Float64Array) => number, level: number, resamples: number, seed: string): Interval & { readonly standardError: number } {
  const stream = new RandomStream(deriveKey('hadamark bootstrap 1', seed));
  const sample = new Float64Array(values.length);
  const found = new Float64Array(resamples);
  let mean = 0;
  for (let r = 0; r < resamples; r++) {
    for (let i = 0; i < sample.length; i++) sample[i] = values[stream.nextIndex(values.length)];
    found[r] = statistic(sample);
    mean += found[r] / resamples;
  }
  let squares = 0;
  for (let r = 0; r < resamples; r++) squares += (found[r] - mean) * (found[r] - mean);
  found.sort();
  return {
    value: statistic(values), low: quantileOfSorted(found, 0.5 * (1 - level)), high: quantileOfSorted(found, 0.5 * (1 + level)),
    standardError: Math.sqrt(squares / Math.max(1, resamples - 1)),
  };
}
