import { matrixOperator } from '../../core/matrix-operator';
import type { Derivative, ForwardProblem, SparseMatrix } from '../../core/types';

const pick = (values: Float64Array, rows: Int32Array): Float64Array => Float64Array.from(rows, (row) => values[row]);

/** The problem that has only some of the data: every model and derivative keeps these rows. */
export function restrictedProblem(problem: ForwardProblem, rows: Int32Array): ForwardProblem {
  return {
    ...problem,
    dataSize: rows.length,
    // What is reciprocal in the whole frame need not be among the rows that are left.
    dataBasis: undefined,
    evaluate: (x) => pick(problem.evaluate(x), rows),
    linearise: (x) => restrictedDerivative(problem.linearise(x), rows),
  };
}

function restrictedDerivative(derivative: Derivative, rows: Int32Array): Derivative {
  const { cols, values, sparse } = derivative;
  if (values) {
    const kept = new Float64Array(rows.length * cols);
    for (let i = 0; i < rows.length; i++) kept.set(values.subarray(rows[i] * cols, (rows[i] + 1) * cols), i * cols);
    return matrixOperator(kept, rows.length, cols);
  }
  const whole = new Float64Array(derivative.rows);
  return {
    rows: rows.length,
    cols,
    ...(sparse ? { sparse: restrictedSparse(sparse, rows) } : {}),
    apply(x, out) {
      derivative.apply(x, whole);
      for (let i = 0; i < rows.length; i++) out[i] = whole[rows[i]];
    },
    applyAdjoint(y, out) {
      whole.fill(0);
      for (let i = 0; i < rows.length; i++) whole[rows[i]] = y[i];
      derivative.applyAdjoint(whole, out);
    },
  };
}

function restrictedSparse(a: SparseMatrix, rows: Int32Array): SparseMatrix {
  const rowStart = new Int32Array(rows.length + 1);
  for (let i = 0; i < rows.length; i++) rowStart[i + 1] = rowStart[i] + a.rowStart[rows[i] + 1] - a.rowStart[rows[i]];
  const columns = new Int32Array(rowStart[rows.length]);
  const values = new Float64Array(rowStart[rows.length]);
  for (let i = 0; i < rows.length; i++) {
    columns.set(a.columns.subarray(a.rowStart[rows[i]], a.rowStart[rows[i] + 1]), rowStart[i]);
    values.set(a.values.subarray(a.rowStart[rows[i]], a.rowStart[rows[i] + 1]), rowStart[i]);
  }
  return { rows: rows.length, cols: a.cols, rowStart, columns, values };
}
