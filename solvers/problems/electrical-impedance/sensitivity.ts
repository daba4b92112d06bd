import { scratchOf } from '../../kernels/kernel-memory';
import { multiplyRows } from '../../linear-algebra/product-kernel';
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
 * @param L number of fields
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
  const room = scratchOf(
    4 * elements.length, 8 * stiffness.length, 4 * start.length, 4 * list.length, 8 * fields.length, 48 * most * (L + 3), 48 * most * (L + 3), 8 * 36, 8 * cells * L * L,
  );
  if (!room) return pairsInTypeScript(elements, stiffness, groups, fields, L, most, out);
  const [atElements, atStiffness, atStart, atList, atFields, f, g, matrix, atOut] = room.addresses;
  new Int32Array(room.buffer, atElements, elements.length).set(elements);
  new Float64Array(room.buffer, atStiffness, stiffness.length).set(stiffness);
  new Int32Array(room.buffer, atStart, start.length).set(start);
  new Int32Array(room.buffer, atList, list.length).set(list);
  new Float64Array(room.buffer, atFields, fields.length).set(fields);
  room.kernels.pairSensitivities(atElements, atStiffness, atStart, atList, cells, atFields, L, f, g, matrix, atOut);
  out.set(new Float64Array(room.buffer, atOut, cells * L * L));
  return out;
}

/** The twin of the compiled kernel (../../kernels/sensitivity.as). */
function pairsInTypeScript(elements: Int32Array, stiffness: Float64Array, groups: ElementsByCell, fields: Float64Array, L: number, most: number, out: Float64Array): Float64Array {
  const { start, list } = groups;
  // Field j in row j, six values an element, and the element matrices times the fields in the same layout.
  const stride = 6 * most;
  const f = new Float64Array(L * stride);
  const g = new Float64Array(L * stride);
  const m = new Float64Array(36);
  for (let c = 0; c < start.length - 1; c++) {
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
    const base = c * L * L;
    multiplyRows({ values: f, from: 0, stride, rows: L }, { values: g, from: 0, stride, rows: L }, 6 * count, out, base, L);
    for (let j = 1; j < L; j++) for (let k = 0; k < j; k++) out[base + j * L + k] = out[base + k * L + j];
  }
  return out;
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
