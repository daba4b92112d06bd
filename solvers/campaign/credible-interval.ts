import type { ForwardProblem, MetricInput } from '../core/types';
import { quantileOfSorted } from '../statistics/quantiles';

/** Fewer samples than this do not hold the ends of a 90 % interval. */
export const fewestSamples = 20;
const probability = 0.9;

/** Pointwise 90 % intervals on `grid.inside`, between the 5 % and 95 % quantiles (type 7) of the samples mapped to pixels. */
export function credibleInterval(problem: ForwardProblem, samples: readonly Float64Array[]): NonNullable<MetricInput['interval']> {
  const pixels = problem.grid.inside.length;
  const count = samples.length;
  const values = new Float64Array(pixels * count);
  const image = new Float64Array(pixels);
  samples.forEach((sample, i) => {
    problem.toImage(sample, image);
    for (let k = 0; k < pixels; k++) values[k * count + i] = image[k];
  });
  const low = new Float64Array(pixels);
  const high = new Float64Array(pixels);
  for (let k = 0; k < pixels; k++) {
    const sorted = values.subarray(k * count, (k + 1) * count).sort();
    low[k] = quantileOfSorted(sorted, (1 - probability) / 2);
    high[k] = quantileOfSorted(sorted, (1 + probability) / 2);
  }
  return { low, high, probability };
}
