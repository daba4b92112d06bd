import { factorDiagonalRows } from './panel-kernels';

export interface DenseCholesky {
  readonly n: number;
  /** Lower triangle of L, row-major n x n; the upper triangle is not defined. */
  readonly factor: Float64Array;
  /** Solves A x = b in place; `b` holds `k` right-hand sides one after another. */
  solveMany(b: Float64Array, k?: number): void;
}

/**
 * A = L L^T of a small dense matrix (lower triangle read, row-major), n^3 / 3 operations.
 * @throws RangeError when a pivot is not positive or the length is not n x n
 */
export function denseCholesky(values: Float64Array, n: number): DenseCholesky {
  if (values.length !== n * n) throw new RangeError(`The matrix has ${values.length} values, not ${n} x ${n}.`);
  const factor = values.slice();
  const failed = factorDiagonalRows(factor, 0, n, n);
  if (failed >= 0) throw new RangeError(`The matrix is not positive definite: pivot ${failed} is not positive.`);
  return {
    n,
    factor,
    solveMany(b, k = 1) {
      if (b.length !== n * k) throw new RangeError(`The right-hand sides have ${b.length} values, not n k = ${n} x ${k}.`);
      for (let r = 0; r < k; r++) {
        const at = r * n;
        for (let i = 0; i < n; i++) {
          let s = b[at + i];
          for (let j = 0; j < i; j++) s -= factor[i * n + j] * b[at + j];
          b[at + i] = s / factor[i * n + i];
        }
        for (let i = n - 1; i >= 0; i--) {
          const x = b[at + i] / factor[i * n + i];
          b[at + i] = x;
          for (let j = 0; j < i; j++) b[at + j] -= factor[i * n + j] * x;
        }
      }
    },
  };
}
