/** Rows of a derivative for iterations that go through the data one by one or by groups. */
import type { Derivative, SparseMatrix } from '../core/types';
import { denseMatrix } from '../core/matrix-operator';
import { largestMatrix } from './explicit-limit';

/** The derivative by sparse rows; an explicit one with all its entries. @throws RangeError where it is neither sparse nor small enough to be made explicit */
export function sparseRows(derivative: Derivative): SparseMatrix {
  if (derivative.sparse) return derivative.sparse;
  const { rows, cols } = derivative;
  if (rows * cols > largestMatrix) throw new RangeError(`The rows of a ${rows} x ${cols} matrix are needed one by one, which takes too much memory (at most ${largestMatrix / 1e6} million entries).`);
  return denseRows(denseMatrix(derivative), rows, cols);
}

/** An explicit matrix as sparse rows; shares its values. */
export function denseRows(values: Float64Array, rows: number, cols: number): SparseMatrix {
  return { rows, cols, values, rowStart: Int32Array.from({ length: rows + 1 }, (_, i) => i * cols), columns: Int32Array.from({ length: rows * cols }, (_, k) => k % cols) };
}

/**
 * Sums of the absolute entries of each row and of each column. Of a derivative that is known by its action alone the entries are taken as
 * not negative, as those of a point-spread function are.
 */
export function absoluteSums(derivative: Derivative): { readonly row: Float64Array; readonly column: Float64Array } {
  const { rows, cols, values, sparse } = derivative;
  const row = new Float64Array(rows);
  const column = new Float64Array(cols);
  if (sparse)
    for (let i = 0; i < rows; i++)
      for (let k = sparse.rowStart[i]; k < sparse.rowStart[i + 1]; k++) {
        const size = Math.abs(sparse.values[k]);
        row[i] += size;
        column[sparse.columns[k]] += size;
      }
  else if (values)
    for (let i = 0; i < rows; i++)
      for (let j = 0; j < cols; j++) {
        const size = Math.abs(values[i * cols + j]);
        row[i] += size;
        column[j] += size;
      }
  else {
    derivative.apply(new Float64Array(cols).fill(1), row);
    derivative.applyAdjoint(new Float64Array(rows).fill(1), column);
  }
  return { row, column };
}
