/** Factors of many symmetric positive semidefinite matrices A_c of one size n: A_c is the sum of f f^T over its rows f. */
export interface SemidefiniteFactors {
  readonly size: number;
  readonly count: number;
  /** Rows of matrix c: starts[c] <= k < starts[c + 1]. */
  readonly starts: Int32Array;
  /** Row k at k * size. */
  readonly rows: Float64Array;
}

/**
 * Pivoted Cholesky factors, stopped where the rest has less than `tolerance` of the trace: few rows for the smooth fields of a small region.
 * Rounding that makes a diagonal negative counts as zero.
 * @param fill writes matrix c into its argument (n x n, row-major, the lower triangle is read)
 * Source: N. J. Higham, Accuracy and Stability of Numerical Algorithms (2002), 10.3 (from memory).
 */
export function semidefiniteFactors(count: number, size: number, fill: (c: number, matrix: Float64Array) => void, tolerance = 1e-6): SemidefiniteFactors {
  const matrix = new Float64Array(size * size);
  const diagonal = new Float64Array(size);
  const starts = new Int32Array(count + 1);
  const parts: Float64Array[] = [];
  for (let c = 0; c < count; c++) {
    fill(c, matrix);
    let trace = 0;
    for (let i = 0; i < size; i++) trace += diagonal[i] = Math.max(0, matrix[i * size + i]);
    const enough = tolerance * trace;
    const rows: Float64Array[] = [];
    let rest = trace;
    while (rows.length < size && rest > enough) {
      let pivot = 0;
      for (let i = 1; i < size; i++) if (diagonal[i] > diagonal[pivot]) pivot = i;
      const root = Math.sqrt(diagonal[pivot]);
      const row = new Float64Array(size);
      rest = 0;
      for (let i = 0; i < size; i++) {
        let value = i >= pivot ? matrix[i * size + pivot] : matrix[pivot * size + i];
        for (const before of rows) value -= before[i] * before[pivot];
        row[i] = value / root;
        diagonal[i] = i === pivot ? 0 : Math.max(0, diagonal[i] - row[i] * row[i]);
        rest += diagonal[i];
      }
      rows.push(row);
    }
    parts.push(...rows);
    starts[c + 1] = starts[c] + rows.length;
  }
  const all = new Float64Array(parts.length * size);
  parts.forEach((row, k) => all.set(row, k * size));
  return { size, count, starts, rows: all };
}
