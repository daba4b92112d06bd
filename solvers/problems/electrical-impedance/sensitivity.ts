import type { QuadraticMesh } from '../../mesh/quadratic-mesh';
import { degreeFourShapes, elementStiffness, entriesPerElement, straightStiffness } from './elements';

/** Elements by cell: cell c holds `list[start[c] .. start[c + 1])`, ascending. */
export interface ElementsByCell {
  readonly start: Int32Array;
  readonly list: Int32Array;
}

export function elementsByCell(cellOf: Int32Array, cells: number): ElementsByCell {
  const start = new Int32Array(cells + 1);
  for (let t = 0; t < cellOf.length; t++) start[cellOf[t] + 1]++;
  for (let c = 0; c < cells; c++) start[c + 1] += start[c];
  const next = start.slice(0, cells);
  const list = new Int32Array(cellOf.length);
  for (let t = 0; t < cellOf.length; t++) list[next[cellOf[t]]++] = t;
  return { start, list };
}

/**
 * Sensitivities of pairs of fields, per cell: `out[(cell * L + j) * L + k]` = integral over the cell of grad f_j . grad f_k.
 * @param stiffness unit-coefficient element matrices, lower triangle row by row, 21 values an element
 * @param fields node potentials, node-major: `fields[node * L + j]`
 * @param L number of fields, a multiple of 4
 * @returns `out`, cells x L x L
 */
export function pairSensitivities(
  mesh: QuadraticMesh, stiffness: Float64Array, groups: ElementsByCell, fields: Float64Array, L: number, out = new Float64Array((groups.start.length - 1) * L * L),
): Float64Array {
  const { elements } = mesh;
  const { start, list } = groups;
  const cells = start.length - 1;
  let most = 0;
  for (let c = 0; c < cells; c++) most = Math.max(most, start[c + 1] - start[c]);
  // Field j in row j, six values an element, and the element matrices times the fields in the same layout.
  const stride = 6 * most;
  const f = new Float64Array(L * stride);
  const g = new Float64Array(L * stride);
  const m = new Float64Array(36);
  for (let c = 0; c < cells; c++) {
    const count = start[c + 1] - start[c];
    for (let e = 0; e < count; e++) {
      const t = list[start[c] + e];
      for (let i = 0, k = entriesPerElement * t; i < 6; i++)
        for (let j = 0; j <= i; j++, k++) {
          m[6 * i + j] = stiffness[k];
          m[6 * j + i] = stiffness[k];
        }
      for (let i = 0; i < 6; i++) {
        const from = elements[6 * t + i] * L;
        for (let j = 0, at = 6 * e + i; j < L; j++, at += stride) f[at] = fields[from + j];
      }
      for (let j = 0, at = 6 * e; j < L; j++, at += stride) {
        const f0 = f[at], f1 = f[at + 1], f2 = f[at + 2], f3 = f[at + 3], f4 = f[at + 4], f5 = f[at + 5];
        for (let i = 0; i < 6; i++) g[at + i] = m[6 * i] * f0 + m[6 * i + 1] * f1 + m[6 * i + 2] * f2 + m[6 * i + 3] * f3 + m[6 * i + 4] * f4 + m[6 * i + 5] * f5;
      }
    }
    pairProducts(f, g, stride, 6 * count, L, out, c * L * L);
  }
  return out;
}

/** out[base + j L + k] = sum over the first `length` values of f_j g_k for k >= j, mirrored below. */
function pairProducts(f: Float64Array, g: Float64Array, stride: number, length: number, L: number, out: Float64Array, base: number): void {
  for (let j = 0; j < L; j += 2) {
    const a0 = j * stride;
    const a1 = a0 + stride;
    const row0 = base + j * L;
    const row1 = row0 + L;
    // Blocks of four columns from the one that holds the diagonal on; what lands below the diagonal is overwritten after.
    for (let k = j & ~3; k < L; k += 4) {
      const b0 = k * stride;
      const b1 = b0 + stride;
      const b2 = b1 + stride;
      const b3 = b2 + stride;
      let s00 = 0, s01 = 0, s02 = 0, s03 = 0, s10 = 0, s11 = 0, s12 = 0, s13 = 0;
      for (let i = 0; i < length; i++) {
        const p0 = f[a0 + i];
        const p1 = f[a1 + i];
        let q = g[b0 + i];
        s00 += p0 * q;
        s10 += p1 * q;
        q = g[b1 + i];
        s01 += p0 * q;
        s11 += p1 * q;
        q = g[b2 + i];
        s02 += p0 * q;
        s12 += p1 * q;
        q = g[b3 + i];
        s03 += p0 * q;
        s13 += p1 * q;
      }
      out[row0 + k] = s00;
      out[row0 + k + 1] = s01;
      out[row0 + k + 2] = s02;
      out[row0 + k + 3] = s03;
      out[row1 + k] = s10;
      out[row1 + k + 1] = s11;
      out[row1 + k + 2] = s12;
      out[row1 + k + 3] = s13;
    }
  }
  for (let j = 1; j < L; j++) for (let k = 0; k < j; k++) out[base + j * L + k] = out[base + k * L + j];
}

/** Element matrices for unit conductivity, lower triangle row by row, as the assembly integrates them. */
export function unitStiffness(mesh: QuadraticMesh): Float64Array {
  const count = mesh.elements.length / 6;
  const out = new Float64Array(entriesPerElement * count);
  const local = new Float64Array(entriesPerElement * degreeFourShapes.points);
  for (let t = 0; t < count; t++) {
    const base = entriesPerElement * t;
    if (mesh.curved[t] === 0) {
      straightStiffness(mesh, t, local);
      for (let k = 0; k < entriesPerElement; k++) out[base + k] = local[k];
      continue;
    }
    elementStiffness(mesh, t, degreeFourShapes, local);
    for (let p = 0; p < degreeFourShapes.points; p++) for (let k = 0; k < entriesPerElement; k++) out[base + k] += local[entriesPerElement * p + k];
  }
  return out;
}
