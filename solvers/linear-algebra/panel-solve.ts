import { paddedHeight } from './panel-kernels';
import type { CholeskyAnalysis } from './sparse-cholesky';

/**
 * The TypeScript twins of the compiled triangular solutions (../kernels/cholesky.as), for `count` of the eight right-hand
 * sides that lie side by side: x[8 i + r].
 */

/** Right-hand sides solved together. */
export const blockWidth = 8;

/** L y = b in place. Every sum runs over the columns in ascending order from zero. */
export function forwardBlock(analysis: CholeskyAnalysis, panels: Float64Array, x: Float64Array, count: number): void {
  const { supernodes, first, rowStart, rowIndex, panelStart } = analysis;
  let sums = new Float64Array(64);
  for (let s = 0; s < supernodes; s++) {
    const begin = first[s];
    const width = first[s + 1] - begin;
    const top = rowStart[s];
    const height = rowStart[s + 1] - top;
    const stride = paddedHeight(height);
    if (sums.length < height) sums = new Float64Array(2 * height);
    for (let r = 0; r < count; r++) {
      sums.fill(0, 0, height);
      for (let k = 0, column = panelStart[s]; k < width; k++, column += stride) {
        const at = 8 * (begin + k) + r;
        const value = (x[at] - sums[k]) / panels[column + k];
        x[at] = value;
        for (let i = k + 1; i < height; i++) sums[i] += panels[column + i] * value;
      }
      for (let i = width; i < height; i++) x[8 * rowIndex[top + i] + r] -= sums[i];
    }
  }
}

/** L^T x = y in place. Every sum runs over the rows below the diagonal block, ascending, then over those of the block, descending. */
export function backwardBlock(analysis: CholeskyAnalysis, panels: Float64Array, x: Float64Array, count: number): void {
  const { supernodes, first, rowStart, rowIndex, panelStart } = analysis;
  for (let s = supernodes - 1; s >= 0; s--) {
    const begin = first[s];
    const width = first[s + 1] - begin;
    const top = rowStart[s];
    const height = rowStart[s + 1] - top;
    const stride = paddedHeight(height);
    for (let k = width - 1, column = panelStart[s] + k * stride; k >= 0; k--, column -= stride)
      for (let r = 0; r < count; r++) {
        let sum = 0;
        for (let i = width; i < height; i++) sum += panels[column + i] * x[8 * rowIndex[top + i] + r];
        for (let i = width - 1; i > k; i--) sum += panels[column + i] * x[8 * (begin + i) + r];
        const at = 8 * (begin + k) + r;
        x[at] = (x[at] - sum) / panels[column + k];
      }
  }
}
