import { createEvaluationGrid } from '../core/grid';
import { matrixOperator } from '../core/matrix-operator';
import type { ForwardProblem, SparseMatrix } from '../core/types';
import { unitDisc } from './disc';

/** One row per neighbouring pair of a chain of n unknowns. */
function chain(n: number): SparseMatrix {
  const rowStart = Int32Array.from({ length: n }, (_, i) => 2 * i);
  const columns = new Int32Array(2 * (n - 1));
  const values = new Float64Array(2 * (n - 1));
  for (let i = 0; i < n - 1; i++) {
    columns[2 * i] = i;
    columns[2 * i + 1] = i + 1;
    values[2 * i] = -1;
    values[2 * i + 1] = 1;
  }
  return { rows: n - 1, cols: n, rowStart, columns, values };
}

function identity(n: number): SparseMatrix {
  return { rows: n, cols: n, rowStart: Int32Array.from({ length: n + 1 }, (_, i) => i), columns: Int32Array.from({ length: n }, (_, i) => i), values: new Float64Array(n).fill(1) };
}

/**
 * A square matrix as a forward problem, so that published examples go through the methods as runs do: unknowns of measure 1 around a
 * background of `level`, data of the change, the unknowns in a chain.
 * @param values n x n, row-major
 */
export function matrixProblem(values: Float64Array, n: number, level = 1): ForwardProblem {
  const operator = matrixOperator(values, n, n);
  const background = new Float64Array(n).fill(level);
  const notAnImage = (): never => {
    throw new RangeError('The unknowns of a matrix have no place on a grid.');
  };
  return {
    // No acquisition stands behind a matrix: the unit disc fills the place.
    family: 'electrical-impedance',
    geometry: unitDisc({ electrodes: 8 }),
    dataKind: 'difference',
    linear: true,
    dataSize: n,
    unknowns: n,
    unknownWeights: new Float64Array(n).fill(1),
    grid: createEvaluationGrid(1, 4),
    unit: '',
    lowerBound: -1e9,
    background: () => background.slice(),
    evaluate(x) {
      const out = new Float64Array(n);
      operator.apply(x.map((v, j) => v - background[j]), out);
      return out;
    },
    linearise: () => matrixOperator(values, n, n),
    toImage: notAnImage,
    penalty: (kind) => (kind === 'identity' ? identity(n) : chain(n)),
    jumps: () => ({ matrix: chain(n), lengths: new Float64Array(n - 1).fill(1) }),
  };
}
