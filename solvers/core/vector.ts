/** Vector kernels with a fixed order of summation (ascending index, one accumulator). */

/** sum a_i b_i, ascending. */
export function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}

/** Sum of squares, ascending. */
export function sumOfSquares(a: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * a[i];
  return sum;
}

/** Euclidean norm. Rescaled by the largest entry where the plain sum of squares would overflow or underflow. */
export function norm2(a: Float64Array): number {
  const plain = sumOfSquares(a);
  if (plain > 1e-280 && plain < 1e280) return Math.sqrt(plain);
  let largest = 0;
  for (let i = 0; i < a.length; i++) largest = Math.max(largest, Math.abs(a[i]));
  if (largest === 0 || !Number.isFinite(largest)) return largest;
  let sum = 0;
  for (let i = 0; i < a.length; i++) {
    const scaled = a[i] / largest;
    sum += scaled * scaled;
  }
  return largest * Math.sqrt(sum);
}

/** True when every entry is finite. */
export function allFinite(a: Float64Array): boolean {
  for (let i = 0; i < a.length; i++) if (!Number.isFinite(a[i])) return false;
  return true;
}

/**
 * Refuses a vector of the wrong length or with a value that is not finite.
 * @throws RangeError that names both lengths, or the index of the first bad value.
 */
export function requireVector(a: Float64Array, length: number, what: string): void {
  if (a.length !== length) throw new RangeError(`${what} has ${a.length} values, expected ${length}.`);
  for (let i = 0; i < a.length; i++)
    if (!Number.isFinite(a[i])) throw new RangeError(`${what} is not finite at index ${i} (${a[i]}).`);
}
