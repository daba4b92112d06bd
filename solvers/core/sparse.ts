import type { SparseMatrix } from './types';

/** out = A x. Each row is summed in the order of its entries. @throws RangeError when a length does not fit */
export function applySparse(a: SparseMatrix, x: Float64Array, out: Float64Array): void {
  if (x.length !== a.cols || out.length !== a.rows) throw new RangeError(`Lengths ${x.length} and ${out.length} do not fit a ${a.rows} x ${a.cols} matrix.`);
  const { rowStart, columns, values } = a;
  for (let i = 0; i < a.rows; i++) {
    let sum = 0;
    for (let k = rowStart[i]; k < rowStart[i + 1]; k++) sum += values[k] * x[columns[k]];
    out[i] = sum;
  }
}

/** out = A^T y. @throws RangeError when a length does not fit */
export function applySparseTransposed(a: SparseMatrix, y: Float64Array, out: Float64Array): void {
  if (y.length !== a.rows || out.length !== a.cols) throw new RangeError(`Lengths ${y.length} and ${out.length} do not fit the transpose of a ${a.rows} x ${a.cols} matrix.`);
  const { rowStart, columns, values } = a;
  out.fill(0);
  for (let i = 0; i < a.rows; i++) for (let k = rowStart[i]; k < rowStart[i + 1]; k++) out[columns[k]] += values[k] * y[i];
}
