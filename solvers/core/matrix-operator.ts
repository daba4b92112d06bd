import type { Derivative, MatrixOperator } from './types';

/**
 * A linear operator with its explicit matrix (row-major, kept, not copied). Sums run over the inner index in ascending order.
 * @throws RangeError when the length is not rows x cols
 */
export function matrixOperator(values: Float64Array, rows: number, cols: number): MatrixOperator {
  if (values.length !== rows * cols) throw new RangeError(`The matrix has ${values.length} values, not ${rows} x ${cols}.`);
  return {
    rows,
    cols,
    values,
    apply(x, out) {
      requireLengths(x.length, cols, out.length, rows);
      for (let i = 0; i < rows; i++) {
        const row = i * cols;
        let sum = 0;
        for (let j = 0; j < cols; j++) sum += values[row + j] * x[j];
        out[i] = sum;
      }
    },
    applyAdjoint(y, out) {
      requireLengths(y.length, rows, out.length, cols);
      out.fill(0);
      for (let i = 0; i < rows; i++) {
        const row = i * cols;
        const weight = y[i];
        for (let j = 0; j < cols; j++) out[j] += values[row + j] * weight;
      }
    },
  };
}

function requireLengths(input: number, expectedInput: number, output: number, expectedOutput: number): void {
  if (input !== expectedInput || output !== expectedOutput)
    throw new RangeError(`Lengths ${input} and ${output} do not fit an operator from ${expectedInput} to ${expectedOutput} values.`);
}

/** Entries of an explicit matrix, at most: 256 MB. */
export const largestDenseMatrix = 32_000_000;

/**
 * The explicit matrix of a derivative, row-major, rows x cols: its own (not to be changed), filled from its sparse rows, or column by
 * column from its action.
 * @throws RangeError when it would have more than `largestDenseMatrix` entries
 */
export function denseMatrix(derivative: Derivative): Float64Array {
  const { rows, cols, values, sparse } = derivative;
  if (values) return values;
  if (rows * cols > largestDenseMatrix) throw new RangeError(`A matrix of ${rows} x ${cols} is too large to be made explicit.`);
  const dense = new Float64Array(rows * cols);
  if (sparse) {
    for (let i = 0; i < rows; i++) for (let k = sparse.rowStart[i]; k < sparse.rowStart[i + 1]; k++) dense[i * cols + sparse.columns[k]] += sparse.values[k];
    return dense;
  }
  const unit = new Float64Array(cols);
  const column = new Float64Array(rows);
  for (let j = 0; j < cols; j++) {
    unit[j] = 1;
    derivative.apply(unit, column);
    unit[j] = 0;
    for (let i = 0; i < rows; i++) dense[i * cols + j] = column[i];
  }
  return dense;
}
