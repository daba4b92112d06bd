import { bidiagonalise } from './bidiagonal';
import { bidiagonalSvd } from './bidiagonal-svd';
import { applyAllTransposed, panelRows, reduceToLower, type Reflections } from './block-reflections';
import { transpose } from './matrix-product';
import { vectorMachine } from './vector-machine';

export interface ThinSvd {
  /** Left singular vectors as columns, rows x r row-major. */
  readonly u: Float64Array;
  /** Singular values, descending, length r. */
  readonly s: Float64Array;
  /** Right singular vectors as columns, cols x r row-major. */
  readonly v: Float64Array;
}

/**
 * A = U diag(s) V^T, thin, of rank r at most min(rows, cols): directions whose singular values are rounding errors
 * (below max(rows, cols) times the unit roundoff of the largest) are left out.
 *
 * The rows are reduced to a triangle first (Chan 1982), that to a bidiagonal matrix, and this one is taken apart by divide and
 * conquer (Gu and Eisenstat 1995). All steps are backward stable, so singular values are within a small multiple of eps s_1.
 * Cost about 2 rows^2 cols + 2 r rows cols + 8 rows^3 operations for rows <= cols, nearly all in matrix products.
 * @param values rows x cols, row-major, not changed
 * @throws RangeError when the length is not rows x cols, or a value is not finite
 */
export function thinSvd(values: Float64Array, rows: number, cols: number): ThinSvd {
  if (values.length !== rows * cols) throw new RangeError(`The matrix has ${values.length} values, not ${rows} x ${cols}.`);
  let largest = 0;
  for (let k = 0; k < values.length; k++) {
    const size = Math.abs(values[k]);
    if (!(size < Infinity)) throw new RangeError(`Entry ${k} of the matrix is not finite.`);
    if (size > largest) largest = size;
  }
  if (largest === 0) return { u: new Float64Array(0), s: new Float64Array(0), v: new Float64Array(0) };
  if (rows <= cols) {
    const { leftRows, s, rightRows } = wideSvd(values, rows, cols, largest);
    return { u: transpose(leftRows, s.length, rows), s, v: transpose(rightRows, s.length, cols) };
  }
  const { leftRows, s, rightRows } = wideSvd(transpose(values, rows, cols), cols, rows, largest);
  return { u: transpose(rightRows, s.length, rows), s, v: transpose(leftRows, s.length, cols) };
}

/** Singular vectors as rows, for rows <= cols. */
function wideSvd(values: Float64Array, rows: number, cols: number, largest: number): { leftRows: Float64Array; s: Float64Array; rightRows: Float64Array } {
  // A power of two scales exactly and keeps the squared norms inside the range of doubles.
  let scale = 1;
  while (largest * scale >= 2) scale /= 2;
  while (largest * scale < 1) scale *= 2;
  const m = rows;
  const panels = Math.ceil(m / panelRows) * panelRows * panelRows;
  let used = 0;
  const room = (count: number): number => {
    const place = used;
    used += (count + 3) & ~3;
    return place;
  };
  const a = room(m * cols);
  const q: Reflections = { vectors: room(m * cols), stride: cols, count: m, triangles: room(panels) };
  const g = room(m * m);
  const p: Reflections = { vectors: room(m * m), stride: m, count: m, triangles: room(panels) };
  const w: Reflections = { vectors: room(m * m), stride: m, count: m, triangles: room(panels) };
  const left = room(m * m);
  const right = room((m + 1) * (m + 1));
  const scratch = room(Math.max(4 * (m + 1) * (m + 1), (4 * panelRows + 8) * Math.max(m, panelRows)));
  const machine = vectorMachine(used, Math.max(cols, m + 1));
  const memory = machine.values;
  for (let k = 0; k < values.length; k++) memory[a + k] = values[k] * scale;
  reduceToLower(machine, a, m, q, scratch);
  for (let i = 0; i < m; i++) memory.copyWithin(g + i * m, a + i * cols, a + i * cols + m);
  const { diagonal, upper } = bidiagonalise(machine, g, m, p, w, scratch);
  const all = bidiagonalSvd(machine, diagonal, upper, { left, right, scratch });
  const order = Array.from(all.keys()).sort((i, j) => all[j] - all[i] || i - j);
  const floor = Math.max(rows, cols) * 2.220446049250313e-16 * all[order[0]];
  const r = order.filter((i) => all[i] > floor).length;
  // The matrix is not needed any more: the right vectors take its place, the left ones that of the triangle.
  for (let i = 0; i < r; i++) {
    memory.copyWithin(g + i * m, left + order[i] * m, left + (order[i] + 1) * m);
    memory.copyWithin(a + i * cols, right + order[i] * (m + 1), right + order[i] * (m + 1) + m);
    memory.fill(0, a + i * cols + m, a + (i + 1) * cols);
  }
  applyAllTransposed(machine, p, g, m, r, scratch);
  applyAllTransposed(machine, w, a, cols, r, scratch);
  applyAllTransposed(machine, q, a, cols, r, scratch);
  const s = new Float64Array(r);
  for (let i = 0; i < r; i++) s[i] = all[order[i]] / scale;
  return { leftRows: memory.slice(g, g + r * m), s, rightRows: memory.slice(a, a + r * cols) };
}
