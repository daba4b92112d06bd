/** Ranks from 1, the smallest value first; equal values share the mean of their ranks. */
export function averageRanks(values: ArrayLike<number>): Float64Array {
  const n = values.length;
  const order = Array.from({ length: n }, (_, i) => i).sort((a, b) => (values[a] < values[b] ? -1 : values[a] > values[b] ? 1 : a - b));
  const ranks = new Float64Array(n);
  for (let i = 0; i < n; ) {
    let j = i;
    while (j + 1 < n && values[order[j + 1]] === values[order[i]]) j++;
    for (let k = i; k <= j; k++) ranks[order[k]] = 0.5 * (i + j) + 1;
    i = j + 1;
  }
  return ranks;
}

/** Sum over groups of equal ranks of (t^3 - t). */
export function tieSum(ranks: Float64Array): number {
  const sorted = Float64Array.from(ranks).sort();
  let sum = 0;
  for (let i = 0; i < sorted.length; ) {
    let j = i;
    while (j + 1 < sorted.length && sorted[j + 1] === sorted[i]) j++;
    const t = j - i + 1;
    sum += t * t * t - t;
    i = j + 1;
  }
  return sum;
}
