import { isLarge, largeProduct } from './large-sparse';
import { multiplyRows } from './sparse-rows';
import type { SparseMatrix } from './types';

/** out = A x. Each row is summed in the order of its entries. @throws RangeError when a length does not fit */
export function applySparse(a: SparseMatrix, x: Float64Array, out: Float64Array): void {
  if (x.length !== a.cols || out.length !== a.rows) throw new RangeError(`Lengths ${x.length} and ${out.length} do not fit a ${a.rows} x ${a.cols} matrix.`);
  if (isLarge(a)) largeProduct(a).apply(x, out);
  else multiplyRows(a, x, out);
}

/**
 * A B for a row-major B of `a.cols` x `count`. Each entry is summed in the order of the row's entries.
 * @throws RangeError when the length does not fit
 */
export function sparseTimesDense(a: SparseMatrix, b: Float64Array, count: number): Float64Array {
  if (b.length !== a.cols * count) throw new RangeError(`The matrix has ${b.length} values, not ${a.cols} x ${count}.`);
  const out = new Float64Array(a.rows * count);
  for (let i = 0; i < a.rows; i++) {
    const to = i * count;
    for (let k = a.rowStart[i]; k < a.rowStart[i + 1]; k++) {
      const value = a.values[k];
      const from = a.columns[k] * count;
      for (let j = 0; j < count; j++) out[to + j] += value * b[from + j];
    }
  }
  return out;
}

/** A^T B for a row-major B of `a.rows` x `count`. @throws RangeError when the length does not fit */
export function sparseTransposedTimesDense(a: SparseMatrix, b: Float64Array, count: number): Float64Array {
  if (b.length !== a.rows * count) throw new RangeError(`The matrix has ${b.length} values, not ${a.rows} x ${count}.`);
  const out = new Float64Array(a.cols * count);
  for (let i = 0; i < a.rows; i++) {
    const from = i * count;
    for (let k = a.rowStart[i]; k < a.rowStart[i + 1]; k++) {
      const value = a.values[k];
      const to = a.columns[k] * count;
      for (let j = 0; j < count; j++) out[to + j] += value * b[from + j];
    }
  }
  return out;
}

/**
 * out = A^T y, every entry summed over ascending rows. A large matrix must not be changed after its first product: see `LargeProduct`.
 * @throws RangeError when a length does not fit
 */
export function applySparseTransposed(a: SparseMatrix, y: Float64Array, out: Float64Array): void {
  if (y.length !== a.rows || out.length !== a.cols) throw new RangeError(`Lengths ${y.length} and ${out.length} do not fit the transpose of a ${a.rows} x ${a.cols} matrix.`);
  if (isLarge(a) && largeProduct(a).applyTransposed(y, out)) return;
  const { rowStart, columns, values } = a;
  out.fill(0);
  for (let i = 0; i < a.rows; i++) for (let k = rowStart[i]; k < rowStart[i + 1]; k++) out[columns[k]] += values[k] * y[i];
}
