import type { SparseMatrix } from '../../core/types';
import { channels, currentPatterns, patternCount, type PatternGeometry } from './patterns';

/**
 * Orthonormal rows, count x frame size, that span every frame a reciprocal body can give; undefined for patterns and measurements whose
 * frames are as many as reciprocity leaves, or have no simple basis.
 *
 * Adjacent drive and adjacent measurement: value (k, m) equals value (m, k). Trigonometric patterns c_i of norms D_i, all electrode
 * voltages: the patterns are orthogonal, so with p_i = c_i / D_i the voltages of pattern i hold D_i S_ij along p_j, S symmetric.
 */
export function reciprocalBasis(geometry: PatternGeometry): SparseMatrix | undefined {
  if (geometry.pattern === 'adjacent' && geometry.measurement !== 'electrode-voltages') return equalPairs(geometry);
  if (geometry.pattern === 'trigonometric' && geometry.measurement === 'electrode-voltages') return symmetricProducts(geometry);
  return undefined;
}

interface Entry {
  readonly column: number;
  readonly value: number;
}

function sparseRows(rows: readonly (readonly Entry[])[], cols: number): SparseMatrix {
  const rowStart = new Int32Array(rows.length + 1);
  rows.forEach((row, i) => {
    rowStart[i + 1] = rowStart[i] + row.length;
  });
  const entries = rows.flat();
  return { rows: rows.length, cols, rowStart, columns: Int32Array.from(entries, ({ column }) => column), values: Float64Array.from(entries, ({ value }) => value) };
}

function equalPairs(geometry: PatternGeometry): SparseMatrix {
  const list = channels(geometry);
  const L = geometry.electrodes;
  const channelOf = new Int32Array(L * L).fill(-1);
  list.forEach(({ pattern, plus }, i) => {
    channelOf[pattern * L + plus] = i;
  });
  const rows: Entry[][] = [];
  const share = Math.sqrt(0.5);
  for (let k = 0; k < L; k++)
    for (let m = k; m < L; m++) {
      const one = channelOf[k * L + m];
      if (one < 0) continue;
      rows.push(m === k ? [{ column: one, value: 1 }] : [{ column: one, value: share }, { column: channelOf[m * L + k], value: share }]);
    }
  return sparseRows(rows, list.length);
}

function symmetricProducts(geometry: PatternGeometry): SparseMatrix {
  const L = geometry.electrodes;
  const P = patternCount(geometry);
  const patterns = currentPatterns(geometry);
  const norms = new Float64Array(P);
  for (let i = 0; i < P; i++) {
    let sum = 0;
    for (let l = 0; l < L; l++) sum += patterns[i * L + l] * patterns[i * L + l];
    norms[i] = Math.sqrt(sum);
  }
  /** `share` of the voltages of pattern i along p_j. */
  const along = (i: number, j: number, share: number): Entry[] => Array.from({ length: L }, (_, l) => ({ column: i * L + l, value: (share * patterns[j * L + l]) / norms[j] }));
  const rows: Entry[][] = [];
  for (let i = 0; i < P; i++)
    for (let j = i; j < P; j++) {
      const both = Math.sqrt(norms[i] * norms[i] + norms[j] * norms[j]);
      rows.push(i === j ? along(i, i, 1) : [...along(i, j, norms[i] / both), ...along(j, i, norms[j] / both)]);
    }
  return sparseRows(rows, P * L);
}
