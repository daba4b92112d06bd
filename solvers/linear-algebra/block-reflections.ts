import type { VectorMachine } from './vector-machine';

/** Reflections taken together (Bischof and Van Loan 1987; the triangle form of Schreiber and Van Loan 1989). */
export const panelRows = 32;

/**
 * Householder reflections H_k = I - v_k v_k^T, the vectors as rows of one matrix; row k is zero before its first entry.
 * Products of `panelRows` of them are I - V^T T V, T upper triangular with ones on its diagonal.
 */
export interface Reflections {
  readonly vectors: number;
  /** Values a row. */
  readonly stride: number;
  readonly count: number;
  /** The triangles, panelRows x panelRows each, one after another. */
  readonly triangles: number;
}

/** Squares below this are too small for a reflection to be orthogonal; matrices are scaled to a largest entry near one. */
const negligible = 1e-280;

/**
 * Makes v of the vector at `x` (in place), so that x (I - v v^T) = (beta, 0, ..., 0).
 * @returns beta
 */
export function makeReflection(machine: VectorMachine, x: number, count: number): number {
  const { values } = machine;
  const square = machine.dot(x, x, count);
  if (!(square > negligible)) {
    values.fill(0, x, x + count);
    return 0;
  }
  const head = values[x];
  const norm = Math.sqrt(square);
  const beta = head > 0 ? -norm : norm;
  const scale = 1 / Math.sqrt(beta * (beta - head));
  values[x] = (head - beta) * scale;
  for (let k = x + 1; k < x + count; k++) values[k] *= scale;
  return beta;
}

/** T of one panel: T[0 .. j, j] = -T[0 .. j, 0 .. j] (V v_j). */
export function makeTriangle(machine: VectorMachine, reflections: Reflections, from: number, size: number, scratch: number): void {
  const { values } = machine;
  const { vectors, stride, triangles } = reflections;
  const t = triangles + (from / panelRows) * panelRows * panelRows;
  values.fill(0, t, t + panelRows * panelRows);
  for (let j = 0; j < size; j++) {
    const first = from + j;
    values[t + j * panelRows + j] = 1;
    machine.rowsTimes(vectors + from * stride + first, stride, j, stride - first, vectors + first * stride + first, scratch);
    for (let i = 0; i < j; i++) {
      let s = 0;
      for (let k = i; k < j; k++) s += values[t + i * panelRows + k] * values[scratch + k];
      values[t + i * panelRows + j] = -s;
    }
  }
}

/**
 * Rows of C times I - V^T T V (or its transpose) of one panel.
 * @param target C, `rows` x stride with `targetStride` values a row
 * @param scratch 2 rows panelRows
 */
export function applyPanel(
  machine: VectorMachine, reflections: Reflections, from: number, size: number, transposed: boolean, target: number, targetStride: number, rows: number, scratch: number,
): void {
  if (rows === 0) return;
  const { vectors, stride, triangles } = reflections;
  const t = triangles + (from / panelRows) * panelRows * panelRows;
  const v = vectors + from * stride + from;
  const cols = stride - from;
  const second = scratch + rows * panelRows;
  machine.multiply(target + from, targetStride, 1, v, 1, stride, scratch, panelRows, rows, cols, size, false);
  machine.multiply(scratch, panelRows, 1, t, transposed ? 1 : panelRows, transposed ? panelRows : 1, second, panelRows, rows, size, size, false);
  const { values } = machine;
  for (let k = second; k < second + rows * panelRows; k++) values[k] = -values[k];
  machine.multiply(second, panelRows, 1, v, stride, 1, target + from, targetStride, rows, size, cols, true);
}

/** Rows of C times (H_0 H_1 ...)^T. */
export function applyAllTransposed(machine: VectorMachine, reflections: Reflections, target: number, targetStride: number, rows: number, scratch: number): void {
  const last = Math.floor((reflections.count - 1) / panelRows) * panelRows;
  for (let from = last; from >= 0; from -= panelRows)
    applyPanel(machine, reflections, from, Math.min(panelRows, reflections.count - from), true, target, targetStride, rows, scratch);
}

/**
 * A (H_0 H_1 ...) = L, lower triangular, for A with at least as many columns as rows: left in place of A. Blocked Householder
 * reflections of the rows.
 * @param a rows x reflections.stride, row-major
 * @param scratch (2 rows + 1) panelRows
 */
export function reduceToLower(machine: VectorMachine, a: number, rows: number, reflections: Reflections, scratch: number): void {
  const { values } = machine;
  const { vectors, stride: cols } = reflections;
  for (let from = 0; from < rows; from += panelRows) {
    const size = Math.min(panelRows, rows - from);
    for (let k = from; k < from + size; k++) {
      const v = vectors + k * cols + k;
      const own = a + k * cols + k;
      values.copyWithin(v, own, own + cols - k);
      const beta = makeReflection(machine, v, cols - k);
      values[own] = beta;
      values.fill(0, own + 1, own + cols - k);
      for (let i = k + 1; i < from + size; i++) {
        const row = a + i * cols + k;
        machine.addScaled(-machine.dot(v, row, cols - k), v, row, cols - k);
      }
    }
    makeTriangle(machine, reflections, from, size, scratch);
    applyPanel(machine, reflections, from, size, false, a + (from + size) * cols, cols, rows - from - size, scratch);
  }
}
