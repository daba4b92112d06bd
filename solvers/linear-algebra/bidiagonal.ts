import { makeReflection, panelRows, makeTriangle, type Reflections } from './block-reflections';
import type { VectorMachine } from './vector-machine';

/**
 * G = P B W^T of a square matrix, B upper bidiagonal, P and W products of reflections: half of the work is matrix products
 * (Dongarra, Sorensen, Hammarling 1989). The matrix is left as it may be.
 * @param g n x n, row-major
 * @param left reflections of the columns, vector k from entry k on
 * @param right reflections of the rows, vector k from entry k + 1 on, the last one zero
 * @param scratch (4 panelRows + 4) n
 * @returns diagonal (n) and superdiagonal (n, the last zero) of B
 */
export function bidiagonalise(machine: VectorMachine, g: number, n: number, left: Reflections, right: Reflections, scratch: number): { diagonal: Float64Array; upper: Float64Array } {
  const { values } = machine;
  const diagonal = new Float64Array(n);
  const upper = new Float64Array(n);
  // Within a panel the matrix is G + sum of v_l y_l^T + x_l u_l^T, with y and x already negative.
  const y = scratch;
  const x = y + panelRows * n;
  const product = x + panelRows * n;
  const weights = product + n;
  for (let from = 0; from < n; from += panelRows) {
    const size = Math.min(panelRows, n - from);
    const vRows = left.vectors + from * n;
    const uRows = right.vectors + from * n;
    for (let i = 0; i < size; i++) {
      const k = from + i;
      const v = vRows + i * n;
      for (let r = k; r < n; r++) values[v + r] = values[g + r * n + k];
      for (let l = 0; l < i; l++) {
        machine.addScaled(values[y + l * n + k], vRows + l * n + k, v + k, n - k);
        machine.addScaled(values[uRows + l * n + k], x + l * n + k, v + k, n - k);
      }
      diagonal[k] = makeReflection(machine, v + k, n - k);
      const rest = n - k - 1;
      const u = uRows + i * n;
      const own = y + i * n;
      const next = k + 1;
      if (rest === 0) break;
      // y = -(G + ...)^T v
      machine.timesRows(g + k * n + next, n, n - k, rest, v + k, own + next);
      machine.rowsTimes(vRows + k, n, i, n - k, v + k, weights);
      machine.rowsTimes(x + k, n, i, n - k, v + k, weights + panelRows);
      for (let l = 0; l < i; l++) {
        machine.addScaled(values[weights + l], y + l * n + next, own + next, rest);
        machine.addScaled(values[weights + panelRows + l], uRows + l * n + next, own + next, rest);
      }
      for (let c = next; c < n; c++) values[own + c] = -values[own + c];
      // Row k after the reflection of the columns.
      values.copyWithin(u + next, g + k * n + next, g + k * n + n);
      for (let l = 0; l <= i; l++) machine.addScaled(values[vRows + l * n + k], y + l * n + next, u + next, rest);
      for (let l = 0; l < i; l++) machine.addScaled(values[x + l * n + k], uRows + l * n + next, u + next, rest);
      upper[k] = makeReflection(machine, u + next, rest);
      // x = -(G + ...) u
      const column = x + i * n;
      machine.rowsTimes(g + next * n + next, n, rest, rest, u + next, column + next);
      machine.rowsTimes(y + next, n, i + 1, rest, u + next, weights);
      machine.rowsTimes(uRows + next, n, i, rest, u + next, weights + panelRows);
      for (let l = 0; l <= i; l++) machine.addScaled(values[weights + l], vRows + l * n + next, column + next, rest);
      for (let l = 0; l < i; l++) machine.addScaled(values[weights + panelRows + l], x + l * n + next, column + next, rest);
      for (let r = next; r < n; r++) values[column + r] = -values[column + r];
    }
    const end = from + size;
    const rest = n - end;
    machine.multiply(vRows + end, 1, n, y + end, n, 1, g + end * n + end, n, rest, size, rest, true);
    machine.multiply(x + end, 1, n, uRows + end, n, 1, g + end * n + end, n, rest, size, rest, true);
    makeTriangle(machine, left, from, size, product);
    makeTriangle(machine, right, from, size, product);
  }
  return { diagonal, upper };
}
