import type { CholeskyAnalysis } from './sparse-cholesky';

/** Right-hand sides solved together; the values of one unknown lie side by side. */
export const blockWidth = 8;

/** L y = b on interleaved right-hand sides, in place. */
export function forwardBlock(analysis: CholeskyAnalysis, panels: Float64Array, x: Float64Array): void {
  const { supernodes, first, rowStart, rowIndex, panelStart } = analysis;
  for (let s = 0; s < supernodes; s++) {
    const begin = first[s];
    const width = first[s + 1] - begin;
    const top = rowStart[s];
    const height = rowStart[s + 1] - top;
    const base = begin * 8;
    let row = panelStart[s];
    for (let i = 0; i < height; i++, row += width) {
      const inner = i < width ? i : width;
      let s0 = 0, s1 = 0, s2 = 0, s3 = 0, s4 = 0, s5 = 0, s6 = 0, s7 = 0;
      let at = base;
      for (let k = row; k < row + inner; k++, at += 8) {
        const l = panels[k];
        s0 += l * x[at];
        s1 += l * x[at + 1];
        s2 += l * x[at + 2];
        s3 += l * x[at + 3];
        s4 += l * x[at + 4];
        s5 += l * x[at + 5];
        s6 += l * x[at + 6];
        s7 += l * x[at + 7];
      }
      const out = rowIndex[top + i] * 8;
      if (i < width) {
        const pivot = panels[row + i];
        x[out] = (x[out] - s0) / pivot;
        x[out + 1] = (x[out + 1] - s1) / pivot;
        x[out + 2] = (x[out + 2] - s2) / pivot;
        x[out + 3] = (x[out + 3] - s3) / pivot;
        x[out + 4] = (x[out + 4] - s4) / pivot;
        x[out + 5] = (x[out + 5] - s5) / pivot;
        x[out + 6] = (x[out + 6] - s6) / pivot;
        x[out + 7] = (x[out + 7] - s7) / pivot;
      } else {
        x[out] -= s0;
        x[out + 1] -= s1;
        x[out + 2] -= s2;
        x[out + 3] -= s3;
        x[out + 4] -= s4;
        x[out + 5] -= s5;
        x[out + 6] -= s6;
        x[out + 7] -= s7;
      }
    }
  }
}

/** L^T x = y on interleaved right-hand sides, in place. */
export function backwardBlock(analysis: CholeskyAnalysis, panels: Float64Array, x: Float64Array): void {
  const { supernodes, first, rowStart, rowIndex, panelStart } = analysis;
  for (let s = supernodes - 1; s >= 0; s--) {
    const begin = first[s];
    const width = first[s + 1] - begin;
    const top = rowStart[s];
    const height = rowStart[s + 1] - top;
    const base = begin * 8;
    let row = panelStart[s] + (height - 1) * width;
    for (let i = height - 1; i >= 0; i--, row -= width) {
      const from = rowIndex[top + i] * 8;
      let x0 = x[from], x1 = x[from + 1], x2 = x[from + 2], x3 = x[from + 3];
      let x4 = x[from + 4], x5 = x[from + 5], x6 = x[from + 6], x7 = x[from + 7];
      let inner = width;
      if (i < width) {
        inner = i;
        const pivot = panels[row + i];
        x0 /= pivot;
        x1 /= pivot;
        x2 /= pivot;
        x3 /= pivot;
        x4 /= pivot;
        x5 /= pivot;
        x6 /= pivot;
        x7 /= pivot;
        x[from] = x0;
        x[from + 1] = x1;
        x[from + 2] = x2;
        x[from + 3] = x3;
        x[from + 4] = x4;
        x[from + 5] = x5;
        x[from + 6] = x6;
        x[from + 7] = x7;
      }
      let at = base;
      for (let k = row; k < row + inner; k++, at += 8) {
        const l = panels[k];
        x[at] -= l * x0;
        x[at + 1] -= l * x1;
        x[at + 2] -= l * x2;
        x[at + 3] -= l * x3;
        x[at + 4] -= l * x4;
        x[at + 5] -= l * x5;
        x[at + 6] -= l * x6;
        x[at + 7] -= l * x7;
      }
    }
  }
}
