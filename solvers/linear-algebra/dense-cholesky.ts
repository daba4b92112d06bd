import { scratchOf } from '../kernels/kernel-memory';
import { factorPanel, paddedHeight } from './panel-kernels';

export interface DenseCholesky {
  readonly n: number;
  /** Solves A x = b in place; `b` holds `k` right-hand sides one after another. */
  solveMany(b: Float64Array, k?: number): void;
}

/** Smaller matrices do not repay the copies into the memory of the compiled kernels. */
const worthCompiled = 16;

/**
 * A = L L^T of a small dense matrix (lower triangle read, row-major), n^3 / 3 operations.
 * @throws RangeError when a pivot is not positive or the length is not n x n
 */
export function denseCholesky(values: Float64Array, n: number): DenseCholesky {
  if (values.length !== n * n) throw new RangeError(`The matrix has ${values.length} values, not ${n} x ${n}.`);
  const stride = paddedHeight(n);
  // One panel: column-major, the columns padded with zeros.
  const factor = new Float64Array(n * stride);
  for (let j = 0; j < n; j++) for (let i = j; i < n; i++) factor[j * stride + i] = values[i * n + j];
  const failed = factorInPlace(factor, n);
  if (failed >= 0) throw new RangeError(`The matrix is not positive definite: pivot ${failed} is not positive.`);
  return {
    n,
    solveMany(b, k = 1) {
      if (b.length !== n * k) throw new RangeError(`The right-hand sides have ${b.length} values, not n k = ${n} x ${k}.`);
      for (let r = 0; r < k; r++) {
        const at = r * n;
        for (let j = 0; j < n; j++) {
          const x = b[at + j] / factor[j * stride + j];
          b[at + j] = x;
          for (let i = j + 1; i < n; i++) b[at + i] -= factor[j * stride + i] * x;
        }
        for (let j = n - 1; j >= 0; j--) {
          let s = b[at + j];
          for (let i = j + 1; i < n; i++) s -= factor[j * stride + i] * b[at + i];
          b[at + j] = s / factor[j * stride + j];
        }
      }
    },
  };
}

function factorInPlace(factor: Float64Array, n: number): number {
  const room = n < worthCompiled ? null : scratchOf(8 * (factor.length + 4));
  if (!room) return factorPanel(factor, 0, n, n);
  const inside = new Float64Array(room.buffer, room.addresses[0], factor.length);
  inside.set(factor);
  const failed = room.kernels.factorPanel(room.addresses[0], n, n);
  factor.set(inside);
  return failed;
}
