import type { PenaltyKey, SparseMatrix } from '../../core/types';

/** Rows of equal entries along a line of n cells: row i holds `pattern` from column i on. */
function bandRows(n: number, pattern: readonly number[]): SparseMatrix {
  const width = pattern.length;
  const rows = n - width + 1;
  const rowStart = new Int32Array(rows + 1);
  const columns = new Int32Array(rows * width);
  const values = new Float64Array(rows * width);
  for (let i = 0; i < rows; i++) {
    rowStart[i + 1] = (i + 1) * width;
    for (let k = 0; k < width; k++) {
      columns[i * width + k] = i + k;
      values[i * width + k] = pattern[k];
    }
  }
  return { rows, cols: n, rowStart, columns, values };
}

/**
 * Penalties on n equal cells of length h. The ends are free: the gradient does not see a constant and the Laplacian (second differences
 * at the inner cells) no straight line, so that neither pulls a solution to a value or slope of its own at the ends.
 */
export function linePenalty(kind: PenaltyKey, n: number, h: number): SparseMatrix {
  if (kind === 'identity') return bandRows(n, [Math.sqrt(h)]);
  if (kind === 'gradient') return bandRows(n, [-1 / Math.sqrt(h), 1 / Math.sqrt(h)]);
  const scale = 1 / (h * Math.sqrt(h));
  return bandRows(n, [scale, -2 * scale, scale]);
}

/** Jumps between neighbouring cells; on a line each counts once. */
export function lineJumps(n: number): { matrix: SparseMatrix; lengths: Float64Array } {
  return { matrix: bandRows(n, [-1, 1]), lengths: new Float64Array(n - 1).fill(1) };
}
