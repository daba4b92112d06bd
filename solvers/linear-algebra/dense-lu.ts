/**
 * Dense systems by Gaussian elimination with partial pivoting, in blocks (Golub and Van Loan, Matrix Computations, section 3.4).
 * Every entry is reduced in a fixed order, so the result has the same bits on every engine.
 */

/** Rows and columns eliminated at a time. */
const block = 48;

/**
 * Solves A X = B in place.
 * @param a the matrix [A B], n x cols, row-major; on return the last cols - n columns hold X and the others are spent
 * @throws RangeError when A is singular
 */
export function solveAugmented(a: Float64Array, n: number, cols: number): void {
  if (a.length !== n * cols || cols < n) throw new RangeError(`The system has ${a.length} values, not ${n} rows of at least as many columns.`);
  const packed = new Float64Array(block * (cols + 3));
  for (let from = 0; from < n; from += block) {
    const to = Math.min(n, from + block);
    eliminatePanel(a, n, cols, from, to);
    // The rows of the block, right of it.
    for (let k = from; k < to; k++) {
      for (let i = k + 1; i < to; i++) {
        const f = a[i * cols + k];
        if (f !== 0) for (let j = to; j < cols; j++) a[i * cols + j] -= f * a[k * cols + j];
      }
    }
    subtractProduct(a, cols, to, n, from, to, to, cols, packed);
  }
  for (let from = block * Math.floor((n - 1) / block); from >= 0; from -= block) {
    const to = Math.min(n, from + block);
    for (let k = to - 1; k >= from; k--) {
      const pivot = a[k * cols + k];
      for (let j = n; j < cols; j++) a[k * cols + j] /= pivot;
      for (let i = from; i < k; i++) {
        const f = a[i * cols + k];
        if (f !== 0) for (let j = n; j < cols; j++) a[i * cols + j] -= f * a[k * cols + j];
      }
    }
    subtractProduct(a, cols, 0, from, from, to, n, cols, packed);
  }
}

/** Eliminates columns from .. to below the diagonal; whole rows change places, multipliers stay where the zeros would be. */
function eliminatePanel(a: Float64Array, n: number, cols: number, from: number, to: number): void {
  for (let k = from; k < to; k++) {
    let pivot = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(a[i * cols + k]) > Math.abs(a[pivot * cols + k])) pivot = i;
    if (!(Math.abs(a[pivot * cols + k]) > 0)) throw new RangeError('The dense system is singular.');
    if (pivot !== k) {
      for (let j = 0; j < cols; j++) {
        const t = a[k * cols + j];
        a[k * cols + j] = a[pivot * cols + j];
        a[pivot * cols + j] = t;
      }
    }
    const inverse = 1 / a[k * cols + k];
    for (let i = k + 1; i < n; i++) {
      const f = a[i * cols + k] * inverse;
      a[i * cols + k] = f;
      for (let j = k + 1; j < to; j++) a[i * cols + j] -= f * a[k * cols + j];
    }
  }
}

/** a[i, j] -= sum over k of a[i, k] a[k, j], rows i0 .. i1, inner k0 .. k1, columns j0 .. j1, four columns and two rows at a time. */
function subtractProduct(a: Float64Array, cols: number, i0: number, i1: number, k0: number, k1: number, j0: number, j1: number, packed: Float64Array): void {
  if (i1 <= i0 || j1 <= j0) return;
  const depth = k1 - k0;
  const groups = Math.ceil((j1 - j0) / 4);
  for (let g = 0; g < groups; g++) {
    const j = j0 + 4 * g;
    const width = Math.min(4, j1 - j);
    const base = 4 * g * depth;
    for (let k = 0; k < depth; k++) {
      const row = (k0 + k) * cols + j;
      for (let c = 0; c < 4; c++) packed[base + 4 * k + c] = c < width ? a[row + c] : 0;
    }
  }
  for (let i = i0; i < i1; i += 2) {
    const second = i + 1 < i1;
    const l0 = i * cols + k0;
    const l1 = second ? l0 + cols : l0;
    for (let g = 0; g < groups; g++) {
      const j = j0 + 4 * g;
      let s00 = 0, s01 = 0, s02 = 0, s03 = 0, s10 = 0, s11 = 0, s12 = 0, s13 = 0;
      let b = 4 * g * depth;
      for (let k = 0; k < depth; k++) {
        const p = a[l0 + k];
        const q = a[l1 + k];
        const b0 = packed[b];
        const b1 = packed[b + 1];
        const b2 = packed[b + 2];
        const b3 = packed[b + 3];
        s00 += p * b0;
        s01 += p * b1;
        s02 += p * b2;
        s03 += p * b3;
        s10 += q * b0;
        s11 += q * b1;
        s12 += q * b2;
        s13 += q * b3;
        b += 4;
      }
      const t0 = i * cols + j;
      const t1 = t0 + cols;
      const width = Math.min(4, j1 - j);
      a[t0] -= s00;
      if (width > 1) a[t0 + 1] -= s01;
      if (width > 2) a[t0 + 2] -= s02;
      if (width > 3) a[t0 + 3] -= s03;
      if (second) {
        a[t1] -= s10;
        if (width > 1) a[t1 + 1] -= s11;
        if (width > 2) a[t1 + 2] -= s12;
        if (width > 3) a[t1 + 3] -= s13;
      }
    }
  }
}
