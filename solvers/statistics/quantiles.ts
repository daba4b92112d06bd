/**
 * Sample quantile of type 7 (Hyndman and Fan 1996): linear interpolation between the order statistics at position (n - 1) p, as numpy
 * and R do by default.
 * @param sorted ascending, at least one value
 */
export function quantileOfSorted(sorted: ArrayLike<number>, p: number): number {
  const n = sorted.length;
  if (n === 0) throw new RangeError('A quantile needs at least one value.');
  if (!(p >= 0 && p <= 1)) throw new RangeError(`A quantile needs a share between 0 and 1, not ${p}.`);
  const position = (n - 1) * p;
  const below = Math.floor(position);
  if (below + 1 >= n) return sorted[n - 1];
  const weight = position - below;
  return weight === 0 ? sorted[below] : sorted[below] + weight * (sorted[below + 1] - sorted[below]);
}

/** The values ascending, in a new typed array. */
export function sortedCopy(values: ArrayLike<number>): Float64Array {
  return Float64Array.from(values).sort();
}

export function median(values: ArrayLike<number>): number {
  return quantileOfSorted(sortedCopy(values), 0.5);
}
