import type { QuadraticMesh } from '../../mesh/quadratic-mesh';
import { degreeFourShapes, elementStiffness, entriesPerElement, straightStiffness } from './elements';

/**
 * Sensitivities of pairs of fields, per cell: `out[(cell * L + j) * L + k]` = integral over the cell of grad f_j . grad f_k.
 * @param stiffness unit-coefficient element matrices, lower triangle row by row, 21 values an element
 * @param fields node potentials, node-major: `fields[node * L + j]`
 */
export function pairSensitivities(mesh: QuadraticMesh, stiffness: Float64Array, cellOf: Int32Array, cells: number, fields: Float64Array, L: number): Float64Array {
  const { elements } = mesh;
  const out = new Float64Array(cells * L * L);
  const f = new Float64Array(6 * L);
  const g = new Float64Array(6 * L);
  const full = new Float64Array(36);
  for (let t = 0; t < cellOf.length; t++) {
    for (let i = 0, k = entriesPerElement * t; i < 6; i++)
      for (let j = 0; j <= i; j++, k++) {
        full[6 * i + j] = stiffness[k];
        full[6 * j + i] = stiffness[k];
      }
    for (let i = 0; i < 6; i++) {
      const from = elements[6 * t + i] * L;
      for (let j = 0; j < L; j++) f[i * L + j] = fields[from + j];
    }
    for (let i = 0; i < 6; i++) {
      const k0 = full[6 * i], k1 = full[6 * i + 1], k2 = full[6 * i + 2], k3 = full[6 * i + 3], k4 = full[6 * i + 4], k5 = full[6 * i + 5];
      for (let j = 0; j < L; j++) g[i * L + j] = k0 * f[j] + k1 * f[L + j] + k2 * f[2 * L + j] + k3 * f[3 * L + j] + k4 * f[4 * L + j] + k5 * f[5 * L + j];
    }
    const base = cellOf[t] * L * L;
    for (let j = 0; j < L; j++) {
      const f0 = f[j], f1 = f[L + j], f2 = f[2 * L + j], f3 = f[3 * L + j], f4 = f[4 * L + j], f5 = f[5 * L + j];
      const row = base + j * L;
      for (let k = j; k < L; k++) out[row + k] += f0 * g[k] + f1 * g[L + k] + f2 * g[2 * L + k] + f3 * g[3 * L + k] + f4 * g[4 * L + k] + f5 * g[5 * L + k];
    }
  }
  for (let c = 0; c < cells; c++) {
    const base = c * L * L;
    for (let j = 0; j < L; j++) for (let k = 0; k < j; k++) out[base + j * L + k] = out[base + k * L + j];
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
