export interface SymmetricEigen {
  /** Ascending. */
  readonly values: Float64Array;
  /** Row k is the unit eigenvector of value k, n x n, row-major. */
  readonly vectors: Float64Array;
}

/** Sweeps at most; quadratic convergence needs 6 to 10. */
const largestSweep = 40;

/**
 * Eigenvalues and eigenvectors of a small symmetric matrix by cyclic Jacobi rotations (the lower triangle is not read).
 * Cost: about 6 n^3 operations a sweep.
 * @param values n x n, row-major, not changed
 * @throws RangeError when the length is not n x n or a value is not finite
 * Source: H. Rutishauser, The Jacobi method for real symmetric matrices, Numerische Mathematik 9 (1966) 1-10 (from memory).
 */
export function symmetricEigen(values: Float64Array, n: number): SymmetricEigen {
  if (values.length !== n * n) throw new RangeError(`The matrix has ${values.length} values, not ${n} x ${n}.`);
  const a = new Float64Array(n * n);
  let total = 0;
  for (let i = 0; i < n; i++) {
    for (let j = i; j < n; j++) {
      const value = values[i * n + j];
      if (!Number.isFinite(value)) throw new RangeError(`The matrix is not finite at row ${i}, column ${j}.`);
      a[i * n + j] = value;
      a[j * n + i] = value;
      total = Math.max(total, Math.abs(value));
    }
  }
  const v = new Float64Array(n * n);
  for (let i = 0; i < n; i++) v[i * n + i] = 1;
  const negligible = total * 1e-17;
  for (let sweep = 0; sweep < largestSweep; sweep++) {
    let largest = 0;
    for (let p = 0; p < n - 1; p++) {
      for (let q = p + 1; q < n; q++) {
        const off = a[p * n + q];
        if (Math.abs(off) <= negligible) continue;
        largest = Math.max(largest, Math.abs(off));
        const half = (a[q * n + q] - a[p * n + p]) / (2 * off);
        const t = (half >= 0 ? 1 : -1) / (Math.abs(half) + Math.sqrt(half * half + 1));
        const c = 1 / Math.sqrt(t * t + 1);
        const s = t * c;
        const pp = a[p * n + p] - t * off;
        const qq = a[q * n + q] + t * off;
        for (let k = 0; k < n; k++) {
          const x = a[p * n + k];
          const y = a[q * n + k];
          const nx = c * x - s * y;
          const ny = s * x + c * y;
          a[p * n + k] = nx;
          a[q * n + k] = ny;
          a[k * n + p] = nx;
          a[k * n + q] = ny;
          const vx = v[p * n + k];
          const vy = v[q * n + k];
          v[p * n + k] = c * vx - s * vy;
          v[q * n + k] = s * vx + c * vy;
        }
        a[p * n + p] = pp;
        a[q * n + q] = qq;
        a[p * n + q] = 0;
        a[q * n + p] = 0;
      }
    }
    if (largest <= 1e-15 * total) break;
  }
  const order = Array.from({ length: n }, (_, i) => i).sort((i, j) => a[i * n + i] - a[j * n + j] || i - j);
  const sorted = new Float64Array(n);
  const vectors = new Float64Array(n * n);
  order.forEach((from, k) => {
    sorted[k] = a[from * n + from];
    vectors.set(v.subarray(from * n, (from + 1) * n), k * n);
  });
  return { values: sorted, vectors };
}
