import type { MatrixOperator } from './types';

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
