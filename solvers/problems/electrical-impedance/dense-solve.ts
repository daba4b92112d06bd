/**
 * Solves A x = b for the rows b of `rhs` by Gaussian elimination with partial pivoting.
 * @param a n x n, row-major, not changed
 * @returns rows x, the shape of `rhs`
 * @throws RangeError when A is singular
 */
export function solveDense(a: Float64Array, n: number, rhs: Float64Array): Float64Array {
  const lu = a.slice();
  const count = rhs.length / n;
  const order = new Int32Array(n);
  for (let i = 0; i < n; i++) order[i] = i;
  for (let k = 0; k < n; k++) {
    let pivot = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(lu[i * n + k]) > Math.abs(lu[pivot * n + k])) pivot = i;
    if (!(Math.abs(lu[pivot * n + k]) > 0)) throw new RangeError('The electrode system is singular.');
    if (pivot !== k) {
      for (let j = 0; j < n; j++) {
        const t = lu[k * n + j];
        lu[k * n + j] = lu[pivot * n + j];
        lu[pivot * n + j] = t;
      }
      const t = order[k];
      order[k] = order[pivot];
      order[pivot] = t;
    }
    for (let i = k + 1; i < n; i++) {
      const f = lu[i * n + k] / lu[k * n + k];
      lu[i * n + k] = f;
      for (let j = k + 1; j < n; j++) lu[i * n + j] -= f * lu[k * n + j];
    }
  }
  const x = new Float64Array(rhs.length);
  for (let r = 0; r < count; r++) {
    for (let i = 0; i < n; i++) {
      let sum = rhs[r * n + order[i]];
      for (let j = 0; j < i; j++) sum -= lu[i * n + j] * x[r * n + j];
      x[r * n + i] = sum;
    }
    for (let i = n - 1; i >= 0; i--) {
      let sum = x[r * n + i];
      for (let j = i + 1; j < n; j++) sum -= lu[i * n + j] * x[r * n + j];
      x[r * n + i] = sum / lu[i * n + i];
    }
  }
  return x;
}
