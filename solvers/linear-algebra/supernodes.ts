import type { LowerPattern } from './elimination';
import { paddedHeight } from './panel-kernels';
import type { CholeskyAnalysis } from './sparse-cholesky';

/** Merges a child into its parent when the explicit zeros stay below these shares (Ashcraft and Grimes 1989). */
const relaxation = [
  { width: 8, share: 1 },
  { width: 24, share: 0.25 },
  { width: 64, share: 0.1 },
  { width: Infinity, share: 0.04 },
];

/** The pattern of P A P^T, rows ascending. */
export function permutePattern(pattern: LowerPattern, order: Int32Array): LowerPattern {
  const { n, colStart, rows } = pattern;
  const position = new Int32Array(n);
  for (let k = 0; k < n; k++) position[order[k]] = k;
  // Two transpositions sort the rows of each column in linear time.
  const byRow = new Int32Array(n + 1);
  const nonzeros = colStart[n];
  for (let j = 0; j < n; j++) for (let k = colStart[j]; k < colStart[j + 1]; k++) byRow[Math.max(position[j], position[rows[k]]) + 1]++;
  for (let i = 0; i < n; i++) byRow[i + 1] += byRow[i];
  const nextRow = byRow.slice(0, n);
  const rowColumns = new Int32Array(nonzeros);
  const newStart = new Int32Array(n + 1);
  for (let j = 0; j < n; j++)
    for (let k = colStart[j]; k < colStart[j + 1]; k++) {
      const a = position[j];
      const b = position[rows[k]];
      const low = a < b ? a : b;
      rowColumns[nextRow[a < b ? b : a]++] = low;
      newStart[low + 1]++;
    }
  for (let i = 0; i < n; i++) newStart[i + 1] += newStart[i];
  const nextColumn = newStart.slice(0, n);
  const newRows = new Int32Array(nonzeros);
  for (let i = 0; i < n; i++) for (let k = byRow[i]; k < byRow[i + 1]; k++) newRows[nextColumn[rowColumns[k]]++] = i;
  return { n, colStart: newStart, rows: newRows };
}

/** First columns of the supernodes, and n. */
export function relaxedSupernodes(parent: Int32Array, counts: Int32Array): Int32Array {
  const n = parent.length;
  const starts: number[] = [];
  for (let j = 0; j < n; j++)
    if (j === 0 || parent[j - 1] !== j || counts[j - 1] !== counts[j] + 1) starts.push(j);
  const fundamental = starts.length;
  starts.push(n);
  // Walk down from the last supernode; a supernode may join the one that follows it when that is its parent.
  const mergedIntoNext = new Uint8Array(fundamental);
  const width = new Int32Array(fundamental);
  const height = new Int32Array(fundamental);
  const zeros = new Float64Array(fundamental);
  for (let s = 0; s < fundamental; s++) {
    width[s] = starts[s + 1] - starts[s];
    height[s] = counts[starts[s]];
  }
  let owner = fundamental - 1;
  for (let s = fundamental - 2; s >= 0; s--) {
    const last = starts[s + 1] - 1;
    const up = parent[last];
    // `owner` is the merged supernode that begins at starts[s + 1].
    if (up >= starts[s + 1] && up < starts[s + 1] + width[owner]) {
      const mergedWidth = width[s] + width[owner];
      const mergedHeight = width[s] + height[owner];
      const size = mergedWidth * mergedHeight - (mergedWidth * (mergedWidth - 1)) / 2;
      const added = width[s] * (mergedHeight - height[s]);
      const total = zeros[s] + zeros[owner] + added;
      const share = total / size;
      let allowed = added === 0;
      for (const rule of relaxation)
        if (mergedWidth <= rule.width) {
          allowed ||= share < rule.share;
          break;
        }
      if (allowed) {
        mergedIntoNext[s] = 1;
        width[s] = mergedWidth;
        height[s] = mergedHeight;
        zeros[s] = total;
      }
    }
    owner = s;
  }
  const first: number[] = [];
  for (let s = 0; s < fundamental; s++) if (s === 0 || !mergedIntoNext[s - 1]) first.push(starts[s]);
  first.push(n);
  return Int32Array.from(first);
}

/** Rows of each supernode's panel, ascending, its own columns first. */
export function supernodeRows(pattern: LowerPattern, first: Int32Array, supernodeOf: Int32Array): { rowStart: Int32Array; rowIndex: Int32Array } {
  const { n, colStart, rows } = pattern;
  const supernodes = first.length - 1;
  const rowStart = new Int32Array(supernodes + 1);
  const seen = new Int32Array(n).fill(-1);
  const firstChild = new Int32Array(supernodes).fill(-1);
  const nextChild = new Int32Array(supernodes).fill(-1);
  let capacity = Math.max(16, rows.length * 2);
  let rowIndex = new Int32Array(capacity);
  let used = 0;
  for (let s = 0; s < supernodes; s++) {
    rowStart[s] = used;
    const begin = first[s];
    const end = first[s + 1];
    if (used + n > capacity) {
      capacity = Math.max(capacity * 2, used + n);
      const grown = new Int32Array(capacity);
      grown.set(rowIndex.subarray(0, used));
      rowIndex = grown;
    }
    for (let j = begin; j < end; j++) {
      seen[j] = s;
      rowIndex[used++] = j;
    }
    const below = used;
    for (let j = begin; j < end; j++)
      for (let k = colStart[j]; k < colStart[j + 1]; k++) {
        const i = rows[k];
        if (seen[i] !== s) {
          seen[i] = s;
          rowIndex[used++] = i;
        }
      }
    for (let child = firstChild[s]; child !== -1; child = nextChild[child])
      for (let k = rowStart[child] + first[child + 1] - first[child]; k < rowStart[child + 1]; k++) {
        const i = rowIndex[k];
        if (seen[i] !== s) {
          seen[i] = s;
          rowIndex[used++] = i;
        }
      }
    rowIndex.subarray(below, used).sort();
    rowStart[s + 1] = used;
    if (below < used) {
      const up = supernodeOf[rowIndex[below]];
      nextChild[s] = firstChild[up];
      firstChild[up] = s;
    }
  }
  return { rowStart, rowIndex: rowIndex.slice(0, used) };
}

/** Panel position of each value of the pattern. */
export function panelTargets(
  pattern: LowerPattern, order: Int32Array,
  layout: Pick<CholeskyAnalysis, 'first' | 'rowStart' | 'rowIndex' | 'panelStart' | 'supernodeOf'>,
): Int32Array {
  const { n, colStart, rows } = pattern;
  const { first, rowStart, rowIndex, panelStart, supernodeOf } = layout;
  const position = new Int32Array(n);
  for (let k = 0; k < n; k++) position[order[k]] = k;
  const target = new Int32Array(rows.length);
  for (let j = 0; j < n; j++)
    for (let k = colStart[j]; k < colStart[j + 1]; k++) {
      const a = position[j];
      const b = position[rows[k]];
      const column = a < b ? a : b;
      const row = a < b ? b : a;
      const s = supernodeOf[column];
      const width = first[s + 1] - first[s];
      let at: number;
      if (row < first[s + 1]) at = row - first[s];
      else {
        let low = rowStart[s] + width;
        let high = rowStart[s + 1] - 1;
        while (low < high) {
          const middle = (low + high) >> 1;
          if (rowIndex[middle] < row) low = middle + 1;
          else high = middle;
        }
        at = low - rowStart[s];
      }
      target[k] = panelStart[s] + (column - first[s]) * paddedHeight(rowStart[s + 1] - rowStart[s]) + at;
    }
  return target;
}
