import reference from '../reference/regularisation.json';
import { thinSvd } from '../../solvers/linear-algebra/thin-svd';
import type { SpectralData } from '../../solvers/parameter-choice/spectral-data';

export type RegularisationCase = (typeof reference.cases)[number];
export const regularisation = reference;

/** The matrix of a case, row-major: listed, or Shaw's kernel by the midpoint rule. */
export function caseMatrix(item: RegularisationCase): { values: Float64Array; n: number } {
  const listed = 'A' in item.inputs ? item.inputs.A : undefined;
  const n = item.inputs.b.length;
  if (listed) return { values: Float64Array.from(listed.flat()), n };
  const values = new Float64Array(n * n);
  for (let i = 0; i < n; i++)
    for (let j = 0; j < n; j++) {
      const s = -Math.PI / 2 + ((i + 0.5) * Math.PI) / n;
      const t = -Math.PI / 2 + ((j + 0.5) * Math.PI) / n;
      const u = Math.PI * (Math.sin(s) + Math.sin(t));
      const sinc = Math.abs(u) < 1e-12 ? 1 : Math.sin(u) / u;
      values[i * n + j] = (Math.PI / n) * (Math.cos(s) + Math.cos(t)) ** 2 * sinc * sinc;
    }
  return { values, n };
}

/** The case in coefficients, with V for going back. */
export function caseSpectrum(item: RegularisationCase): { data: SpectralData; v: Float64Array; r: number; n: number } {
  const { values, n } = caseMatrix(item);
  const { u, s, v } = thinSvd(values, n, n);
  const r = s.length;
  const b = item.inputs.b;
  const coefficients = new Float64Array(r);
  for (let i = 0; i < n; i++) for (let k = 0; k < r; k++) coefficients[k] += u[i * r + k] * b[i];
  let outside = 0;
  for (let i = 0; i < n; i++) {
    let rest = b[i];
    for (let k = 0; k < r; k++) rest -= u[i * r + k] * coefficients[k];
    outside += rest * rest;
  }
  return { data: { singularValues: s, coefficients, outside, dataSize: n }, v, r, n };
}

/** V d. */
export function expandCase(v: Float64Array, r: number, n: number, d: ArrayLike<number>): Float64Array {
  const x = new Float64Array(n);
  for (let j = 0; j < n; j++) for (let k = 0; k < d.length; k++) x[j] += v[j * r + k] * d[k];
  return x;
}
