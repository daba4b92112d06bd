/**
 * Dense products, row-major. Every entry is one sum over the inner index in ascending order from zero, whatever the blocking
 * and however many columns are computed together: a product with one column has the bits of the same column in a batch.
 */

/** Inner indices per pass: six rows of this length stay in the first-level cache. */
const innerBlock = 512;

/**
 * C = A B.
 * @param a rows x inner
 * @param b inner x cols
 * @param out rows x cols, overwritten; must not alias an input
 * @returns `out`
 * @throws RangeError when a length does not fit
 */
export function matmul(a: Float64Array, b: Float64Array, rows: number, inner: number, cols: number, out = new Float64Array(rows * cols)): Float64Array {
  if (b.length !== inner * cols) throw new RangeError(`The second factor has ${b.length} values, not ${inner} x ${cols}.`);
  return matmulTransposed(a, transpose(b, inner, cols), rows, inner, cols, out);
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
  if (a.length !== rows * inner) throw new RangeError(`The first factor has ${a.length} values, not ${rows} x ${inner}.`);
  if (b.length !== cols * inner) throw new RangeError(`The second factor has ${b.length} values, not ${cols} x ${inner} (transposed).`);
  if (out.length !== rows * cols) throw new RangeError(`The product has ${out.length} values, not ${rows} x ${cols}.`);
  out.fill(0);
  for (let from = 0; from < inner; from += innerBlock) accumulate(a, b, rows, inner, cols, out, from, Math.min(inner, from + innerBlock));
  return out;
}

function accumulate(a: Float64Array, b: Float64Array, rows: number, inner: number, cols: number, out: Float64Array, from: number, to: number): void {
  const length = to - from;
  let j = 0;
  for (; j + 3 < cols; j += 4) {
    const b0 = j * inner + from;
    const b1 = b0 + inner;
    const b2 = b1 + inner;
    const b3 = b2 + inner;
    let i = 0;
    for (; i + 1 < rows; i += 2) {
      const a0 = i * inner + from;
      const a1 = a0 + inner;
      const t0 = i * cols + j;
      const t1 = t0 + cols;
      let s00 = out[t0], s01 = out[t0 + 1], s02 = out[t0 + 2], s03 = out[t0 + 3];
      let s10 = out[t1], s11 = out[t1 + 1], s12 = out[t1 + 2], s13 = out[t1 + 3];
      for (let k = 0; k < length; k++) {
        const p0 = a[a0 + k];
        const p1 = a[a1 + k];
        let q = b[b0 + k];
        s00 += p0 * q;
        s10 += p1 * q;
        q = b[b1 + k];
        s01 += p0 * q;
        s11 += p1 * q;
        q = b[b2 + k];
        s02 += p0 * q;
        s12 += p1 * q;
        q = b[b3 + k];
        s03 += p0 * q;
        s13 += p1 * q;
      }
      out[t0] = s00;
      out[t0 + 1] = s01;
      out[t0 + 2] = s02;
      out[t0 + 3] = s03;
      out[t1] = s10;
      out[t1 + 1] = s11;
      out[t1 + 2] = s12;
      out[t1 + 3] = s13;
    }
    for (; i < rows; i++) {
      const a0 = i * inner + from;
      const t = i * cols + j;
      let s0 = out[t], s1 = out[t + 1], s2 = out[t + 2], s3 = out[t + 3];
      for (let k = 0; k < length; k++) {
        const p = a[a0 + k];
        s0 += p * b[b0 + k];
        s1 += p * b[b1 + k];
        s2 += p * b[b2 + k];
        s3 += p * b[b3 + k];
      }
      out[t] = s0;
      out[t + 1] = s1;
      out[t + 2] = s2;
      out[t + 3] = s3;
    }
  }
  for (; j < cols; j++) {
    const b0 = j * inner + from;
    let i = 0;
    for (; i + 3 < rows; i += 4) {
      const a0 = i * inner + from;
      const a1 = a0 + inner;
      const a2 = a1 + inner;
      const a3 = a2 + inner;
      const t = i * cols + j;
      let s0 = out[t], s1 = out[t + cols], s2 = out[t + 2 * cols], s3 = out[t + 3 * cols];
      for (let k = 0; k < length; k++) {
        const q = b[b0 + k];
        s0 += a[a0 + k] * q;
        s1 += a[a1 + k] * q;
        s2 += a[a2 + k] * q;
        s3 += a[a3 + k] * q;
      }
      out[t] = s0;
      out[t + cols] = s1;
      out[t + 2 * cols] = s2;
      out[t + 3 * cols] = s3;
    }
    for (; i < rows; i++) {
      const a0 = i * inner + from;
      let s = out[i * cols + j];
      for (let k = 0; k < length; k++) s += a[a0 + k] * b[b0 + k];
      out[i * cols + j] = s;
    }
  }
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
