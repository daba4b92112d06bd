import { matmul } from './matrix-product';

/**
 * Dense systems by Gaussian elimination with partial pivoting, in blocks (Golub and Van Loan, Matrix Computations, section 3.4).
 * Every entry is reduced in a fixed order, so the result has the same bits on every engine.
 */

/** Columns eliminated at a time. */
const block = 64;

/**
 * Solves A X = B in place.
 * @param a the matrix [A B], n x cols, row-major; on return the last cols - n columns hold X and the others are spent
 * @throws RangeError when A is singular
 */
export function solveAugmented(a: Float64Array, n: number, cols: number): void {
  if (a.length !== n * cols || cols < n) throw new RangeError(`The system has ${a.length} values, not ${n} rows of at least as many columns.`);
  for (let from = 0; from < n; from += block) {
    const to = Math.min(n, from + block);
    const width = to - from;
    const panel = copyOf(a, cols, from, n, from, to);
    const swaps = factorPanel(panel, n - from, width);
    for (let k = 0; k < width; k++) if (swaps[k] !== k) swapRows(a, cols, from + k, from + swaps[k], to);
    // The rows of the block, right of it.
    for (let k = 0; k < width; k++) {
      const source = (from + k) * cols;
      for (let i = k + 1; i < width; i++) {
        const f = panel[i * width + k];
        const target = (from + i) * cols;
        for (let j = to; j < cols; j++) a[target + j] -= f * a[source + j];
      }
    }
    for (let i = 0; i < width; i++) for (let j = i; j < width; j++) a[(from + i) * cols + from + j] = panel[i * width + j];
    subtract(a, cols, to, to, matmul(panel.subarray(width * width), copyOf(a, cols, from, to, to, cols), n - to, width, cols - to), n - to, cols - to);
  }
  const rhs = cols - n;
  for (let from = block * Math.floor((n - 1) / block); from >= 0; from -= block) {
    const to = Math.min(n, from + block);
    for (let k = to - 1; k >= from; k--) {
      const source = k * cols;
      const pivot = a[source + k];
      for (let j = n; j < cols; j++) a[source + j] /= pivot;
      for (let i = from; i < k; i++) {
        const f = a[i * cols + k];
        for (let j = n; j < cols; j++) a[i * cols + j] -= f * a[source + j];
      }
    }
    subtract(a, cols, 0, n, matmul(copyOf(a, cols, 0, from, from, to), copyOf(a, cols, from, to, n, cols), from, to - from, rhs), from, rhs);
  }
}

function copyOf(a: Float64Array, cols: number, row0: number, row1: number, col0: number, col1: number): Float64Array {
  const width = col1 - col0;
  const copy = new Float64Array((row1 - row0) * width);
  for (let i = row0; i < row1; i++) copy.set(a.subarray(i * cols + col0, i * cols + col1), (i - row0) * width);
  return copy;
}

function subtract(a: Float64Array, cols: number, row: number, col: number, product: Float64Array, rows: number, width: number): void {
  for (let i = 0; i < rows; i++) {
    const target = (row + i) * cols + col;
    for (let j = 0; j < width; j++) a[target + j] -= product[i * width + j];
  }
}

/** From column `col` on: what lies left of it is spent. */
function swapRows(a: Float64Array, cols: number, i: number, k: number, col: number): void {
  for (let j = col; j < cols; j++) {
    const t = a[i * cols + j];
    a[i * cols + j] = a[k * cols + j];
    a[k * cols + j] = t;
  }
}

/** Factors a tall panel, rows x width: multipliers below the diagonal, the upper factor on and above it. @returns the row that each came from */
function factorPanel(panel: Float64Array, rows: number, width: number): Int32Array {
  const swaps = new Int32Array(width);
  for (let k = 0; k < width; k++) {
    let pivot = k;
    for (let i = k + 1; i < rows; i++) if (Math.abs(panel[i * width + k]) > Math.abs(panel[pivot * width + k])) pivot = i;
    if (!(Math.abs(panel[pivot * width + k]) > 0)) throw new RangeError('The dense system is singular.');
    swaps[k] = pivot;
    if (pivot !== k) swapRows(panel, width, k, pivot, 0);
    const inverse = 1 / panel[k * width + k];
    for (let i = k + 1; i < rows; i++) {
      const f = panel[i * width + k] * inverse;
      panel[i * width + k] = f;
      for (let j = k + 1; j < width; j++) panel[i * width + j] -= f * panel[k * width + j];
    }
  }
  return swaps;
}
