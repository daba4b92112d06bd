import type { ForwardProblem, PenaltyKey, SparseMatrix } from '../core/types';
import { analyse, factorise, type CholeskyFactor } from '../linear-algebra/sparse-cholesky';

/** Lower triangle by columns of a symmetric matrix. */
interface LowerTriangle {
  readonly n: number;
  readonly colStart: Int32Array;
  readonly rows: Int32Array;
  readonly values: Float64Array;
}

/**
 * Weight of the added mass, over the square (the fourth power for the Laplacian) of the body radius. On a disc the first mode that is not
 * constant has 3.39 (11.5) in the same unit, so a constant is penalised some thirty (hundred) times less than that mode.
 */
const massShare = 0.1;

/**
 * Lower triangle of L^T L + mass * diag(weights), columns and rows ascending. A gradient or a Laplacian does not see a constant, so a
 * small multiple of the mass makes the matrix definite.
 */
export function penaltyMatrix(problem: ForwardProblem, kind: PenaltyKey): LowerTriangle {
  const radius = problem.grid.bodyRadius;
  const square = radius * radius;
  const mass = kind === 'identity' ? 0 : kind === 'gradient' ? massShare / square : massShare / (square * square);
  return gramLower(problem.penalty(kind), problem.unknownWeights, mass);
}

/** Lower triangle of L^T L + mass * diag(weights). @throws RangeError where the number of weights is not that of the columns */
export function gramLower(l: SparseMatrix, weights: Float64Array, mass: number): LowerTriangle {
  const n = l.cols;
  if (weights.length !== n) throw new RangeError(`The penalty has ${n} columns, the problem ${weights.length} weights.`);
  // Rows of L that touch each column.
  const touchStart = new Int32Array(n + 1);
  for (let k = 0; k < l.columns.length; k++) touchStart[l.columns[k] + 1]++;
  for (let j = 0; j < n; j++) touchStart[j + 1] += touchStart[j];
  const next = touchStart.slice(0, n);
  const touchRow = new Int32Array(l.columns.length);
  const touchValue = new Float64Array(l.columns.length);
  for (let i = 0; i < l.rows; i++)
    for (let k = l.rowStart[i]; k < l.rowStart[i + 1]; k++) {
      const at = next[l.columns[k]]++;
      touchRow[at] = i;
      touchValue[at] = l.values[k];
    }
  const colStart = new Int32Array(n + 1);
  const rows: number[] = [];
  const values: number[] = [];
  const sum = new Float64Array(n);
  const mark = new Int32Array(n).fill(-1);
  for (let j = 0; j < n; j++) {
    const found: number[] = [j];
    mark[j] = j;
    sum[j] = mass * weights[j];
    for (let t = touchStart[j]; t < touchStart[j + 1]; t++) {
      const row = touchRow[t];
      for (let k = l.rowStart[row]; k < l.rowStart[row + 1]; k++) {
        const i = l.columns[k];
        if (i < j) continue;
        if (mark[i] !== j) {
          mark[i] = j;
          sum[i] = 0;
          found.push(i);
        }
        sum[i] += touchValue[t] * l.values[k];
      }
    }
    found.sort((a, b) => a - b);
    for (const i of found) {
      rows.push(i);
      values.push(sum[i]);
    }
    colStart[j + 1] = rows.length;
  }
  return { n, colStart, rows: Int32Array.from(rows), values: Float64Array.from(values) };
}

/** Factor of the penalty matrix P = R^T R. `halfSolveMany(b, k, 'forward')` gives R^{-T} b, 'backward' R^{-1} b. */
export function factorPenalty(problem: ForwardProblem, kind: PenaltyKey): CholeskyFactor {
  const { n, colStart, rows, values } = penaltyMatrix(problem, kind);
  return factorise(analyse({ n, colStart, rows }), values);
}

export const penaltyChoices = [
  { value: 'identity', label: 'Size (identity)' },
  { value: 'gradient', label: 'Gradient' },
  { value: 'laplacian', label: 'Laplacian' },
] as const;
