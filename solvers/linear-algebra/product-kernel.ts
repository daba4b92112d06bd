/**
 * The TypeScript twin of the compiled product: sums over the inner index in ascending order. `out[i, j] = sum over k of
 * a[i, k] b[j, k]`, both factors with `inner` values side by side.
 */

/** Inner indices per pass: six rows of this length stay in the first-level cache. */
const innerBlock = 512;

export interface RowBlock {
  readonly values: Float64Array;
  /** Where the first row starts, and how far apart the rows are. */
  readonly from: number;
  readonly stride: number;
  readonly rows: number;
}

/** @param out row-major with `outStride` values a row, from `outFrom`; overwritten, and must not alias an input */
export function multiplyRows(a: RowBlock, b: RowBlock, inner: number, out: Float64Array, outFrom: number, outStride: number): void {
  for (let i = 0; i < a.rows; i++) out.fill(0, outFrom + i * outStride, outFrom + i * outStride + b.rows);
  for (let from = 0; from < inner; from += innerBlock) accumulate(a, b, out, outFrom, outStride, from, Math.min(innerBlock, inner - from));
}

function accumulate(left: RowBlock, right: RowBlock, out: Float64Array, outFrom: number, outStride: number, from: number, length: number): void {
  const a = left.values;
  const b = right.values;
  const rows = left.rows;
  const cols = right.rows;
  let j = 0;
  for (; j + 3 < cols; j += 4) {
    const b0 = right.from + j * right.stride + from;
    const b1 = b0 + right.stride;
    const b2 = b1 + right.stride;
    const b3 = b2 + right.stride;
    let i = 0;
    for (; i + 1 < rows; i += 2) {
      const a0 = left.from + i * left.stride + from;
      const a1 = a0 + left.stride;
      const t0 = outFrom + i * outStride + j;
      const t1 = t0 + outStride;
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
      const a0 = left.from + i * left.stride + from;
      const t = outFrom + i * outStride + j;
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
    const b0 = right.from + j * right.stride + from;
    let i = 0;
    for (; i + 3 < rows; i += 4) {
      const a0 = left.from + i * left.stride + from;
      const a1 = a0 + left.stride;
      const a2 = a1 + left.stride;
      const a3 = a2 + left.stride;
      const t = outFrom + i * outStride + j;
      let s0 = out[t], s1 = out[t + outStride], s2 = out[t + 2 * outStride], s3 = out[t + 3 * outStride];
      for (let k = 0; k < length; k++) {
        const q = b[b0 + k];
        s0 += a[a0 + k] * q;
        s1 += a[a1 + k] * q;
        s2 += a[a2 + k] * q;
        s3 += a[a3 + k] * q;
      }
      out[t] = s0;
      out[t + outStride] = s1;
      out[t + 2 * outStride] = s2;
      out[t + 3 * outStride] = s3;
    }
    for (; i < rows; i++) {
      const a0 = left.from + i * left.stride + from;
      const t = outFrom + i * outStride + j;
      let s = out[t];
      for (let k = 0; k < length; k++) s += a[a0 + k] * b[b0 + k];
      out[t] = s;
    }
  }
}
