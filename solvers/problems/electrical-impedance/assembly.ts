import type { QuadraticMesh } from '../../mesh/quadratic-mesh';
import { degreeFourShapes, elementStiffness, entriesPerElement, straightStiffness } from './elements';

/**
 * Lower triangle by columns of the matrices on a quadratic mesh, and where each element's entries go:
 * `positions[21 t + k]` for entry k (lower triangle row by row) of element t.
 */
export interface MeshPattern {
  readonly n: number;
  readonly colStart: Int32Array;
  readonly rows: Int32Array;
  readonly coordinates: Float64Array;
  readonly positions: Int32Array;
}

export function meshPattern(mesh: QuadraticMesh): MeshPattern {
  const { elements, nodes } = mesh;
  const n = nodes.length / 2;
  const elementCount = elements.length / 6;
  const pairs = elementCount * entriesPerElement;
  // Pairs (column = smaller node, row = larger), bucketed by row first and then stably by column: rows come out ascending.
  const rowOf = new Int32Array(pairs);
  const columnOf = new Int32Array(pairs);
  const rowCount = new Int32Array(n + 1);
  for (let t = 0, k = 0; t < elementCount; t++) {
    for (let i = 0; i < 6; i++) {
      const a = elements[6 * t + i];
      for (let j = 0; j <= i; j++, k++) {
        const b = elements[6 * t + j];
        rowOf[k] = a > b ? a : b;
        columnOf[k] = a > b ? b : a;
        rowCount[rowOf[k] + 1]++;
      }
    }
  }
  for (let i = 0; i < n; i++) rowCount[i + 1] += rowCount[i];
  const byRow = new Int32Array(pairs);
  for (let k = 0; k < pairs; k++) byRow[rowCount[rowOf[k]]++] = k;
  const columnStart = new Int32Array(n + 1);
  for (let k = 0; k < pairs; k++) columnStart[columnOf[k] + 1]++;
  for (let j = 0; j < n; j++) columnStart[j + 1] += columnStart[j];
  const next = columnStart.slice(0, n);
  const sorted = new Int32Array(pairs);
  for (let i = 0; i < pairs; i++) {
    const k = byRow[i];
    sorted[next[columnOf[k]]++] = k;
  }
  const colStart = new Int32Array(n + 1);
  const rows = new Int32Array(pairs);
  const positions = new Int32Array(pairs);
  let count = 0;
  for (let j = 0; j < n; j++) {
    colStart[j] = count;
    let last = -1;
    for (let i = columnStart[j]; i < columnStart[j + 1]; i++) {
      const k = sorted[i];
      if (rowOf[k] !== last) {
        last = rowOf[k];
        rows[count++] = last;
      }
      positions[k] = count - 1;
    }
  }
  colStart[n] = count;
  return { n, colStart, rows: rows.slice(0, count), coordinates: nodes, positions };
}

/** Place of entry (a, b) in the lower triangle. */
export function entryPosition(pattern: MeshPattern, a: number, b: number): number {
  const row = a > b ? a : b;
  const column = a > b ? b : a;
  let low = pattern.colStart[column];
  let high = pattern.colStart[column + 1] - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (pattern.rows[middle] < row) low = middle + 1;
    else high = middle;
  }
  if (pattern.rows[low] !== row) throw new RangeError(`Nodes ${a} and ${b} share no element.`);
  return low;
}

/**
 * Stiffness matrix, integral of sigma grad N_i . grad N_j, in the order of the pattern.
 * @param sigma one value, or six per element at the points of the degree-four rule
 * @param values overwritten, length `pattern.rows.length`
 */
export function assembleStiffness(mesh: QuadraticMesh, pattern: MeshPattern, sigma: number | Float64Array, values: Float64Array): void {
  const elementCount = mesh.elements.length / 6;
  const { positions } = pattern;
  const points = degreeFourShapes.points;
  const local = new Float64Array(points * entriesPerElement);
  values.fill(0);
  for (let t = 0; t < elementCount; t++) {
    let first = typeof sigma === 'number' ? sigma : sigma[points * t];
    let constant = true;
    if (typeof sigma !== 'number') for (let p = 1; p < points; p++) if (sigma[points * t + p] !== first) constant = false;
    const base = entriesPerElement * t;
    if (constant && mesh.curved[t] === 0) {
      straightStiffness(mesh, t, local);
      for (let k = 0; k < entriesPerElement; k++) values[positions[base + k]] += first * local[k];
      continue;
    }
    elementStiffness(mesh, t, degreeFourShapes, local);
    for (let p = 0; p < points; p++) {
      if (!constant) first = (sigma as Float64Array)[points * t + p];
      for (let k = 0; k < entriesPerElement; k++) values[positions[base + k]] += first * local[entriesPerElement * p + k];
    }
  }
}

/**
 * The same for one conductivity an element, from the element matrices for unit conductivity (lower triangles, row by row).
 * @param values overwritten, length `pattern.rows.length`
 */
export function assembleScaled(pattern: MeshPattern, stiffness: Float64Array, sigma: Float64Array, values: Float64Array): void {
  const { positions } = pattern;
  values.fill(0);
  for (let t = 0, k = 0; t < sigma.length; t++) {
    const value = sigma[t];
    for (const end = k + entriesPerElement; k < end; k++) values[positions[k]] += value * stiffness[k];
  }
}

/** Points of the degree-four rule in every element, x, y pairs, six an element. */
export function quadraturePoints(mesh: QuadraticMesh): Float64Array {
  const { nodes, elements } = mesh;
  const { points, value } = degreeFourShapes;
  const elementCount = elements.length / 6;
  const places = new Float64Array(2 * points * elementCount);
  for (let t = 0, k = 0; t < elementCount; t++) {
    for (let p = 0; p < points; p++, k += 2) {
      let x = 0;
      let y = 0;
      for (let i = 0; i < 6; i++) {
        const node = elements[6 * t + i];
        x += value[6 * p + i] * nodes[2 * node];
        y += value[6 * p + i] * nodes[2 * node + 1];
      }
      places[k] = x;
      places[k + 1] = y;
    }
  }
  return places;
}
