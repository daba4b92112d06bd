import { kernels, scratchOf } from '../kernels/kernel-memory';

/**
 * Level-one to level-three operations on one block of doubles, by the compiled kernels or by their twins with the same bits.
 * Places and strides count doubles. A machine lives for one computation: nothing else may use the memory of the kernels meanwhile.
 */
export interface VectorMachine {
  readonly values: Float64Array;
  /** Sum of a[k] b[k], in four parts by the index modulo four, added as (0 + 2) + (1 + 3). */
  dot(a: number, b: number, count: number): number;
  /** y += alpha x */
  addScaled(alpha: number, x: number, y: number, count: number): void;
  /** out[i] = dot of row i of a and x. */
  rowsTimes(a: number, stride: number, rows: number, cols: number, x: number, out: number): void;
  /** out[k] = sum over i of x[i] a[i, k], i ascending from zero. */
  timesRows(a: number, stride: number, rows: number, cols: number, x: number, out: number): void;
  /**
   * C = A B, or C += A B with every sum starting from the entry of C. A is read at a + i rowA + k stepA, B at b + k stepB + j colB,
   * C is row-major with rowC values a row; k ascends.
   */
  multiply(
    a: number, rowA: number, stepA: number, b: number, stepB: number, colB: number, c: number, rowC: number,
    rows: number, inner: number, cols: number, keep: boolean,
  ): void;
}

/** A machine with room for `length` doubles (zero at first) whose products have at most `widest` columns. */
export function vectorMachine(length: number, widest: number): VectorMachine {
  const room = scratchOf(8 * length, kernels()?.packedBytes(widest) ?? 0);
  if (!room) return plainMachine(new Float64Array(length));
  const [base, pack] = room.addresses;
  const { kernels: compiled } = room;
  const values = new Float64Array(room.buffer, base, length).fill(0);
  const at = (place: number): number => base + 8 * place;
  return {
    values,
    dot: (a, b, count) => compiled.dot(at(a), at(b), count),
    addScaled: (alpha, x, y, count) => compiled.addScaled(alpha, at(x), at(y), count),
    rowsTimes: (a, stride, rows, cols, x, out) => compiled.rowsTimes(at(a), 8 * stride, rows, cols, at(x), at(out)),
    timesRows: (a, stride, rows, cols, x, out) => compiled.timesRows(at(a), 8 * stride, rows, cols, at(x), at(out)),
    multiply: (a, rowA, stepA, b, stepB, colB, c, rowC, rows, inner, cols, keep) => {
      if (rows > 0 && cols > 0 && (inner > 0 || !keep)) compiled.multiply(at(a), 8 * rowA, 8 * stepA, at(b), 8 * stepB, 8 * colB, at(c), 8 * rowC, rows, inner, cols, pack, keep ? 1 : 0);
      if (inner === 0 && !keep) for (let i = 0; i < rows; i++) values.fill(0, c + i * rowC, c + i * rowC + cols);
    },
  };
}

/** The twins. */
export function plainMachine(values: Float64Array): VectorMachine {
  const dot = (a: number, b: number, count: number): number => {
    let s0 = 0, s1 = 0, s2 = 0, s3 = 0;
    let k = 0;
    for (; k + 3 < count; k += 4) {
      s0 += values[a + k] * values[b + k];
      s1 += values[a + k + 1] * values[b + k + 1];
      s2 += values[a + k + 2] * values[b + k + 2];
      s3 += values[a + k + 3] * values[b + k + 3];
    }
    if (k < count) s0 += values[a + k] * values[b + k];
    if (k + 1 < count) s1 += values[a + k + 1] * values[b + k + 1];
    if (k + 2 < count) s2 += values[a + k + 2] * values[b + k + 2];
    return s0 + s2 + (s1 + s3);
  };
  const addScaled = (alpha: number, x: number, y: number, count: number): void => {
    for (let k = 0; k < count; k++) values[y + k] += alpha * values[x + k];
  };
  return {
    values,
    dot,
    addScaled,
    rowsTimes(a, stride, rows, cols, x, out) {
      for (let i = 0; i < rows; i++) values[out + i] = dot(a + i * stride, x, cols);
    },
    timesRows(a, stride, rows, cols, x, out) {
      values.fill(0, out, out + cols);
      for (let i = 0; i < rows; i++) addScaled(values[x + i], a + i * stride, out, cols);
    },
    multiply(a, rowA, stepA, b, stepB, colB, c, rowC, rows, inner, cols, keep) {
      for (let i = 0; i < rows; i++) {
        const row = c + i * rowC;
        if (!keep) values.fill(0, row, row + cols);
        for (let k = 0; k < inner; k++) {
          const p = values[a + i * rowA + k * stepA];
          for (let j = 0, from = b + k * stepB; j < cols; j++, from += colB) values[row + j] += p * values[from];
        }
      }
    },
  };
}
