/**
 * Dense products, row-major. Every entry is one sum over the inner index in ascending order from zero, whatever the blocking
 * and however many columns are computed together: a product with one column has the bits of the same column in a batch.
 */
import { kernels, scratchOf } from '../kernels/kernel-memory';
import { multiplyRows } from './product-kernel';

/** Fewer multiply-adds than this do not repay the copies into the memory of the compiled kernel. */
const worthCompiled = 8192;

/**
 * C = A B.
 * @param a rows x inner
 * @param b inner x cols
 * @param out rows x cols, overwritten; must not alias an input
 * @returns `out`
 * @throws RangeError when a length does not fit
 */
export function matmul(a: Float64Array, b: Float64Array, rows: number, inner: number, cols: number, out = new Float64Array(rows * cols)): Float64Array {
  requireLengths(a, b, rows, inner, cols, out, '');
  if (!multiplyCompiled(a, inner, 1, b, cols, 1, rows, inner, cols, out)) multiplyPlain(a, transpose(b, inner, cols), rows, inner, cols, out);
  return out;
}

/**
 * C = A B^T.
 * @param a rows x inner
 * @param b cols x inner
 * @param out rows x cols, overwritten; must not alias an input
 * @returns `out`
 * @throws RangeError when a length does not fit
 */
export function matmulTransposed(a: Float64Array, b: Float64Array, rows: number, inner: number, cols: number, out = new Float64Array(rows * cols)): Float64Array {
  requireLengths(a, b, rows, inner, cols, out, ' (transposed)');
  if (!multiplyCompiled(a, inner, 1, b, 1, inner, rows, inner, cols, out)) multiplyPlain(a, b, rows, inner, cols, out);
  return out;
}

/**
 * C = A^T B.
 * @param a inner x rows
 * @param b inner x cols
 * @param out rows x cols, overwritten; must not alias an input
 * @returns `out`
 * @throws RangeError when a length does not fit
 */
export function matmulLeftTransposed(a: Float64Array, b: Float64Array, rows: number, inner: number, cols: number, out = new Float64Array(rows * cols)): Float64Array {
  requireLengths(a, b, rows, inner, cols, out, '');
  if (!multiplyCompiled(a, 1, rows, b, cols, 1, rows, inner, cols, out)) multiplyPlain(transpose(a, inner, rows), transpose(b, inner, cols), rows, inner, cols, out);
  return out;
}

function requireLengths(a: Float64Array, b: Float64Array, rows: number, inner: number, cols: number, out: Float64Array, how: string): void {
  if (a.length !== rows * inner) throw new RangeError(`The first factor has ${a.length} values, not ${rows} x ${inner}.`);
  if (b.length !== inner * cols) throw new RangeError(`The second factor has ${b.length} values, not ${how ? `${cols} x ${inner}${how}` : `${inner} x ${cols}`}.`);
  if (out.length !== rows * cols) throw new RangeError(`The product has ${out.length} values, not ${rows} x ${cols}.`);
}

function multiplyPlain(a: Float64Array, b: Float64Array, rows: number, inner: number, cols: number, out: Float64Array): void {
  multiplyRows({ values: a, from: 0, stride: inner, rows }, { values: b, from: 0, stride: inner, rows: cols }, inner, out, 0, cols);
}

/** By the compiled kernel; false when the product is too small or too large for it. Strides in values. */
function multiplyCompiled(
  a: Float64Array, rowA: number, stepA: number, b: Float64Array, stepB: number, colB: number, rows: number, inner: number, cols: number, out: Float64Array,
): boolean {
  const product = productInMemory(a, rowA, stepA, b, stepB, colB, rows, inner, cols);
  if (product) out.set(product);
  return product !== null;
}

/** A view of the product in the memory of the kernels: good until they are used again. */
function productInMemory(
  a: Float64Array, rowA: number, stepA: number, b: Float64Array, stepB: number, colB: number, rows: number, inner: number, cols: number,
): Float64Array | null {
  // With one row or column the product only reads its matrix once.
  if (rows < 3 || cols < 3 || inner < 3 || rows * inner * cols < worthCompiled) return null;
  const scratch = scratchOf(8 * a.length, 8 * b.length, 8 * rows * cols, kernels()?.packedBytes(cols) ?? 0);
  if (!scratch) return null;
  const [atA, atB, atC, pack] = scratch.addresses;
  new Float64Array(scratch.buffer, atA, a.length).set(a);
  new Float64Array(scratch.buffer, atB, b.length).set(b);
  scratch.kernels.multiply(atA, 8 * rowA, 8 * stepA, atB, 8 * stepB, 8 * colB, atC, 8 * cols, rows, inner, cols, pack, 0);
  return new Float64Array(scratch.buffer, atC, rows * cols);
}

/**
 * Hands A B to `use` without copying it: the product is only good during that call, which must not multiply or factorise.
 * @param a rows x inner
 * @param b inner x cols
 * @throws RangeError when a length does not fit
 */
export function withProduct<T>(a: Float64Array, b: Float64Array, rows: number, inner: number, cols: number, use: (product: Float64Array) => T): T {
  if (a.length === rows * inner && b.length === inner * cols) {
    const product = productInMemory(a, inner, 1, b, cols, 1, rows, inner, cols);
    if (product) return use(product);
  }
  return use(matmul(a, b, rows, inner, cols));
}

/** The transpose of a rows x cols matrix, in tiles. */
export function transpose(values: Float64Array, rows: number, cols: number, out = new Float64Array(rows * cols)): Float64Array {
  const tile = 32;
  for (let i0 = 0; i0 < rows; i0 += tile)
    for (let j0 = 0; j0 < cols; j0 += tile) {
      const i1 = Math.min(rows, i0 + tile);
      const j1 = Math.min(cols, j0 + tile);
      for (let i = i0; i < i1; i++) for (let j = j0; j < j1; j++) out[j * rows + i] = values[i * cols + j];
    }
  return out;
}
