/**
 * Householder reflections of the rows of a wide matrix: A P = ... is worked on as A^T = Q R with the columns of A^T (rows of
 * A) contiguous in memory.
 */
export interface RowReflections {
  readonly cols: number;
  readonly rank: number;
  /** Reflector k in row k: entries k .. cols - 1, scaled so that H = I - v v^T. */
  readonly vectors: Float64Array;
  /** R^T, lower trapezoidal, rows x rank row-major, rows in pivoted order. */
  readonly lower: Float64Array;
  /** `pivots[i]` = row of the input at place i. */
  readonly pivots: Int32Array;
}

/**
 * Pivoted factorisation A[pivots] = R^T Q^T (Businger and Golub 1965): at each step the row of largest remaining norm comes
 * next, and the process stops when all remaining norms are at most `tolerance` times the largest row norm.
 * @param values rows x cols, row-major; overwritten
 */
export function reflectRows(values: Float64Array, rows: number, cols: number, tolerance: number): RowReflections {
  const steps = Math.min(rows, cols);
  const lower = new Float64Array(rows * steps);
  const pivots = new Int32Array(rows);
  const remaining = new Float64Array(rows);
  const reference = new Float64Array(rows);
  // at[i] = where the row at place i lies in `values`; swapping places moves no data.
  const at = new Int32Array(rows);
  let largest = 0;
  for (let i = 0; i < rows; i++) {
    pivots[i] = i;
    at[i] = i * cols;
    remaining[i] = squaredNorm(values, at[i], at[i] + cols);
    reference[i] = remaining[i];
    if (remaining[i] > largest) largest = remaining[i];
  }
  const floor = tolerance * tolerance * largest;
  let rank = 0;
  for (let k = 0; k < steps; k++) {
    let best = k;
    for (let i = k + 1; i < rows; i++) if (remaining[i] > remaining[best]) best = i;
    if (best !== k) {
      swapEntries(pivots, k, best);
      swapEntries(at, k, best);
      swapEntries(remaining, k, best);
      swapEntries(reference, k, best);
      for (let c = 0; c < k; c++) {
        const t = lower[k * steps + c];
        lower[k * steps + c] = lower[best * steps + c];
        lower[best * steps + c] = t;
      }
    }
    const row = at[k];
    const norm2 = squaredNorm(values, row + k, row + cols);
    if (!(norm2 > floor)) break;
    rank = k + 1;
    // v = (a - beta e) / sqrt(beta (beta - a_k)) with beta = -sign(a_k) ||a||: H = I - v v^T.
    const norm = Math.sqrt(norm2);
    const head = values[row + k];
    const beta = head > 0 ? -norm : norm;
    const scale = 1 / Math.sqrt(beta * (beta - head));
    values[row + k] = (head - beta) * scale;
    for (let c = row + k + 1; c < row + cols; c++) values[c] *= scale;
    lower[k * steps + k] = beta;
    let i = k + 1;
    for (; i + 3 < rows; i += 4) {
      applyToFour(values, row + k, cols - k, values, at[i] + k, at[i + 1] + k, at[i + 2] + k, at[i + 3] + k);
    }
    for (; i < rows; i++) applyToOne(values, row + k, cols - k, values, at[i] + k);
    for (let r = k + 1; r < rows; r++) {
      const value = values[at[r] + k];
      lower[r * steps + k] = value;
      remaining[r] -= value * value;
      // Downdated norms lose their digits by cancellation: recompute well before they are gone.
      if (!(remaining[r] > 1e-6 * reference[r])) {
        remaining[r] = squaredNorm(values, at[r] + k + 1, at[r] + cols);
        reference[r] = remaining[r];
      }
    }
  }
  const vectors = new Float64Array(rank * cols);
  for (let k = 0; k < rank; k++) for (let c = k; c < cols; c++) vectors[k * cols + c] = values[at[k] + c];
  const packed = new Float64Array(rows * rank);
  for (let i = 0; i < rows; i++) for (let k = 0; k < rank && k <= i; k++) packed[i * rank + k] = lower[i * steps + k];
  return { cols, rank, vectors, lower: packed, pivots };
}

/** Applies Q = H_0 H_1 ... to `count` vectors of length `cols`, one after another, in place. */
export function applyReflections(reflections: RowReflections, target: Float64Array, count: number): void {
  const { cols, rank, vectors } = reflections;
  let i = 0;
  for (; i + 3 < count; i += 4) {
    const t = i * cols;
    for (let k = rank - 1; k >= 0; k--)
      applyToFour(vectors, k * cols + k, cols - k, target, t + k, t + cols + k, t + 2 * cols + k, t + 3 * cols + k);
  }
  for (; i < count; i++) for (let k = rank - 1; k >= 0; k--) applyToOne(vectors, k * cols + k, cols - k, target, i * cols + k);
}

function squaredNorm(values: Float64Array, from: number, to: number): number {
  let s = 0;
  for (let c = from; c < to; c++) s += values[c] * values[c];
  return s;
}

function applyToFour(v: Float64Array, from: number, length: number, x: Float64Array, a: number, b: number, c: number, d: number): void {
  let s0 = 0, s1 = 0, s2 = 0, s3 = 0;
  for (let k = 0; k < length; k++) {
    const t = v[from + k];
    s0 += t * x[a + k];
    s1 += t * x[b + k];
    s2 += t * x[c + k];
    s3 += t * x[d + k];
  }
  for (let k = 0; k < length; k++) {
    const t = v[from + k];
    x[a + k] -= s0 * t;
    x[b + k] -= s1 * t;
    x[c + k] -= s2 * t;
    x[d + k] -= s3 * t;
  }
}

function applyToOne(v: Float64Array, from: number, length: number, x: Float64Array, a: number): void {
  let s = 0;
  for (let k = 0; k < length; k++) s += v[from + k] * x[a + k];
  for (let k = 0; k < length; k++) x[a + k] -= s * v[from + k];
}

function swapEntries(values: Float64Array | Int32Array, i: number, j: number): void {
  const t = values[i];
  values[i] = values[j];
  values[j] = t;
}
