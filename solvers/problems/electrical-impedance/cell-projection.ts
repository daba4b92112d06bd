import { exp, ln } from '../../core/math';
import type { QuadraticMesh } from '../../mesh/quadratic-mesh';
import type { TruthField } from '../../truth/truth-field';
import type { ElectrodeFrame } from './electrodes';

/** Sub-triangles along an edge of a cell. */
const subdivisions = 10;

/**
 * A ground truth on the conductivity cells, S/m: geometric means, which in two dimensions is what a fine isotropic mixture of
 * two conductivities conducts like (Dykhne 1971). Each element is split into equal triangles of its reference triangle, about
 * 100 to a cell, sampled at their centroids.
 */
export function projectOnCells(truth: TruthField, mesh: QuadraticMesh, cellOf: Int32Array, cells: number, areas: Float64Array, frame: ElectrodeFrame): Float64Array {
  const { nodes, elements } = mesh;
  const sums = new Float64Array(cells);
  const weights = new Float64Array(cells);
  const radius2 = frame.radius * frame.radius;
  const shape = new Float64Array(6);
  const dr = new Float64Array(6);
  const ds = new Float64Array(6);
  for (let t = 0; t < cellOf.length; t++) {
    const a = 2 * elements[6 * t];
    const b = 2 * elements[6 * t + 1];
    const c = 2 * elements[6 * t + 2];
    const area = 0.5 * ((nodes[b] - nodes[a]) * (nodes[c + 1] - nodes[a + 1]) - (nodes[b + 1] - nodes[a + 1]) * (nodes[c] - nodes[a])) * radius2;
    const n = Math.max(1, Math.ceil(subdivisions * Math.sqrt(area / areas[cellOf[t]])));
    for (let i = 0; i < n; i++)
      for (let j = 0; j < 2 * (n - i) - 1; j++) {
        // Upright triangles at even j, turned ones at odd j.
        const k = j >> 1;
        const third = (j & 1) === 0 ? 1 / 3 : 2 / 3;
        const r = (k + third) / n;
        const s = (i + third) / n;
        const q = 1 - r - s;
        shape[0] = q * (2 * q - 1);
        shape[1] = r * (2 * r - 1);
        shape[2] = s * (2 * s - 1);
        shape[3] = 4 * q * r;
        shape[4] = 4 * r * s;
        shape[5] = 4 * s * q;
        dr[0] = 1 - 4 * q;
        dr[1] = 4 * r - 1;
        dr[2] = 0;
        dr[3] = 4 * (q - r);
        dr[4] = 4 * s;
        dr[5] = -4 * s;
        ds[0] = 1 - 4 * q;
        ds[1] = 0;
        ds[2] = 4 * s - 1;
        ds[3] = -4 * r;
        ds[4] = 4 * r;
        ds[5] = 4 * (q - s);
        let x = 0, y = 0, xr = 0, yr = 0, xs = 0, ys = 0;
        for (let m = 0; m < 6; m++) {
          const nx = nodes[2 * elements[6 * t + m]];
          const ny = nodes[2 * elements[6 * t + m] + 1];
          x += shape[m] * nx;
          y += shape[m] * ny;
          xr += dr[m] * nx;
          yr += dr[m] * ny;
          xs += ds[m] * nx;
          ys += ds[m] * ny;
        }
        const weight = (xr * ys - xs * yr) / (n * n);
        const [bx, by] = frame.toBody(x, y);
        sums[cellOf[t]] += weight * ln(truth.valueAt(bx, by));
        weights[cellOf[t]] += weight;
      }
  }
  for (let c = 0; c < cells; c++) sums[c] = exp(sums[c] / weights[c]);
  return sums;
}
