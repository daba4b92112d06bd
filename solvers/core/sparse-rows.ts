import type { SparseMatrix } from './types';

/** Four rows at a time, each with a sum of its own: the additions of one row wait for one another. */
export function multiplyRows({ rows, rowStart, columns, values }: SparseMatrix, x: Float64Array, out: Float64Array): void {
  let i = 0;
  for (; i + 3 < rows; i += 4) {
    let k0 = rowStart[i], k1 = rowStart[i + 1], k2 = rowStart[i + 2], k3 = rowStart[i + 3];
    const e0 = k1, e1 = k2, e2 = k3, e3 = rowStart[i + 4];
    const common = Math.min(e0 - k0, e1 - k1, e2 - k2, e3 - k3);
    let s0 = 0, s1 = 0, s2 = 0, s3 = 0;
    for (const end = k0 + common; k0 < end; k0++, k1++, k2++, k3++) {
      s0 += values[k0] * x[columns[k0]];
      s1 += values[k1] * x[columns[k1]];
      s2 += values[k2] * x[columns[k2]];
      s3 += values[k3] * x[columns[k3]];
    }
    for (; k0 < e0; k0++) s0 += values[k0] * x[columns[k0]];
    for (; k1 < e1; k1++) s1 += values[k1] * x[columns[k1]];
    for (; k2 < e2; k2++) s2 += values[k2] * x[columns[k2]];
    for (; k3 < e3; k3++) s3 += values[k3] * x[columns[k3]];
    out[i] = s0;
    out[i + 1] = s1;
    out[i + 2] = s2;
    out[i + 3] = s3;
  }
  for (; i < rows; i++) {
    let sum = 0;
    for (let k = rowStart[i]; k < rowStart[i + 1]; k++) sum += values[k] * x[columns[k]];
    out[i] = sum;
  }
}

/** A^T by rows, each in the order of the rows of A. */
export function transposeSparse({ rows, cols, rowStart, columns, values }: SparseMatrix): SparseMatrix {
  const start = new Int32Array(cols + 1);
  for (let k = 0; k < columns.length; k++) start[columns[k] + 1]++;
  for (let j = 0; j < cols; j++) start[j + 1] += start[j];
  const next = start.slice(0, cols);
  const rowOf = new Int32Array(columns.length);
  const moved = new Float64Array(columns.length);
  for (let i = 0; i < rows; i++)
    for (let k = rowStart[i]; k < rowStart[i + 1]; k++) {
      const at = next[columns[k]]++;
      rowOf[at] = i;
      moved[at] = values[k];
    }
  return { rows: cols, cols: rows, rowStart: start, columns: rowOf, values: moved };
}
