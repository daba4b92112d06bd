import { columnCounts, eliminationTree, postorder, transposedStrict, type LowerPattern } from './elimination';
import { graphOfPattern } from './graph';
import { nestedDissection } from './ordering';
import { factorDiagonalRows, subtractProduct } from './panel-kernels';
import { backwardBlock, blockWidth, forwardBlock } from './panel-solve';

/** What `analyse` reads: lower triangle by columns (diagonal included, rows ascending), and where the nodes lie. */
export interface SymmetricPattern extends LowerPattern {
  /** x, y per unknown; without them the ordering works on the graph alone. */
  readonly coordinates?: Float64Array;
}

/**
 * Everything about a factorisation that depends on the pattern alone. Supernode s covers the columns
 * `first[s] .. first[s + 1])` of the permuted matrix; its panel is a dense block, row-major, one row per entry of
 * `rowIndex[rowStart[s] .. rowStart[s + 1])` (its own columns first), `width` values a row, from `panelStart[s]`.
 */
export interface CholeskyAnalysis {
  readonly n: number;
  /** `order[k]` = unknown eliminated at step k. */
  readonly order: Int32Array;
  readonly supernodes: number;
  readonly first: Int32Array;
  readonly rowStart: Int32Array;
  readonly rowIndex: Int32Array;
  /** Positions in the panel storage, length supernodes + 1. */
  readonly panelStart: Float64Array;
  readonly supernodeOf: Int32Array;
  /** Panel position of each value of the input pattern. */
  readonly target: Int32Array;
  /** Multiply-add operations of the numeric factorisation, explicit zeros included. */
  readonly multiplyAdds: number;
}

export interface CholeskyFactor {
  readonly analysis: CholeskyAnalysis;
  /**
   * Solves A X = B in place. `b` holds k right-hand sides one after another (n values each). A right-hand side gets the
   * same bits alone and in any batch.
   */
  solveMany(b: Float64Array, k: number): void;
  /**
   * Half of a solve, with A = (P^T L)(P^T L)^T: 'forward' overwrites each b by (P^T L)^{-1} b, 'backward' by
   * (P^T L)^{-T} b, so that a method can change to the coordinates in which A is the identity.
   */
  halfSolveMany(b: Float64Array, k: number, half: 'forward' | 'backward'): void;
}

/** Merges a child into its parent when the explicit zeros stay below these shares (Ashcraft and Grimes 1989). */
const relaxation = [
  { width: 8, share: 1 },
  { width: 24, share: 0.25 },
  { width: 64, share: 0.1 },
  { width: Infinity, share: 0.04 },
];

/**
 * Ordering, elimination tree, supernodes and storage of the factor of a symmetric positive definite matrix.
 * @throws RangeError when the pattern is not a lower triangle with a full diagonal and ascending rows
 */
export function analyse(pattern: SymmetricPattern): CholeskyAnalysis {
  const { n, colStart, rows, coordinates } = pattern;
  if (colStart.length !== n + 1) throw new RangeError(`The pattern has ${colStart.length} column starts, not n + 1 = ${n + 1}.`);
  if (coordinates && coordinates.length !== 2 * n) throw new RangeError(`There are ${coordinates.length} coordinates, not 2 n = ${2 * n}.`);
  for (let j = 0; j < n; j++) {
    if (colStart[j] >= colStart[j + 1] || rows[colStart[j]] !== j) throw new RangeError(`Column ${j} does not start with its diagonal entry.`);
    for (let k = colStart[j] + 1; k < colStart[j + 1]; k++)
      if (rows[k] <= rows[k - 1] || rows[k] >= n) throw new RangeError(`Column ${j} does not list ascending rows below ${n}.`);
  }
  const dissected = nestedDissection(graphOfPattern(n, colStart, rows), coordinates);
  const draft = permutePattern(pattern, dissected);
  const draftParent = eliminationTree(n, transposedStrict(draft));
  const post = postorder(draftParent);
  const order = new Int32Array(n);
  for (let k = 0; k < n; k++) order[k] = dissected[post[k]];
  const permuted = permutePattern(pattern, order);
  const parent = eliminationTree(n, transposedStrict(permuted));
  const counts = columnCounts(permuted, parent);
  const first = relaxedSupernodes(parent, counts);
  const supernodes = first.length - 1;
  const supernodeOf = new Int32Array(n);
  for (let s = 0; s < supernodes; s++) for (let j = first[s]; j < first[s + 1]; j++) supernodeOf[j] = s;
  const { rowStart, rowIndex } = supernodeRows(permuted, first, supernodeOf);
  const panelStart = new Float64Array(supernodes + 1);
  let multiplyAdds = 0;
  for (let s = 0; s < supernodes; s++) {
    const height = rowStart[s + 1] - rowStart[s];
    const width = first[s + 1] - first[s];
    panelStart[s + 1] = panelStart[s] + height * width;
    for (let c = 0; c < width; c++) multiplyAdds += ((height - c) * (height - c + 1)) / 2;
  }
  return { n, order, supernodes, first, rowStart, rowIndex, panelStart, supernodeOf, multiplyAdds, target: panelTargets(pattern, order, { first, rowStart, rowIndex, panelStart, supernodeOf }) };
}

function permutePattern(pattern: LowerPattern, order: Int32Array): LowerPattern {
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

function relaxedSupernodes(parent: Int32Array, counts: Int32Array): Int32Array {
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

function supernodeRows(pattern: LowerPattern, first: Int32Array, supernodeOf: Int32Array): { rowStart: Int32Array; rowIndex: Int32Array } {
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

function panelTargets(
  pattern: LowerPattern, order: Int32Array,
  layout: Pick<CholeskyAnalysis, 'first' | 'rowStart' | 'rowIndex' | 'panelStart' | 'supernodeOf'>,
): Int32Array {
  const { n, colStart, rows } = pattern;
  const { first, rowStart, rowIndex, panelStart, supernodeOf } = layout;
  if (panelStart[panelStart.length - 1] > 0x7fffffff) throw new RangeError('The factor has more than 2^31 - 1 entries.');
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
      target[k] = panelStart[s] + at * width + (column - first[s]);
    }
  return target;
}

/**
 * A = L L^T by the left-looking supernodal method (Ng and Peyton 1993), in a fixed order of operations.
 * @param values lower triangle in the order of the pattern given to `analyse`
 * @throws RangeError when a pivot is not positive or a length does not fit
 */
export function factorise(analysis: CholeskyAnalysis, values: Float64Array): CholeskyFactor {
  const { n, supernodes, first, rowStart, rowIndex, panelStart, supernodeOf, target, order } = analysis;
  if (values.length !== target.length) throw new RangeError(`There are ${values.length} matrix values, the pattern has ${target.length}.`);
  const panels = new Float64Array(panelStart[supernodes]);
  for (let k = 0; k < target.length; k++) panels[target[k]] = values[k];
  const localRow = new Int32Array(n);
  // Supernodes whose next untouched row lies in s are chained from head[s]; `reached` is that row's place in rowIndex.
  const head = new Int32Array(supernodes).fill(-1);
  const next = new Int32Array(supernodes).fill(-1);
  const reached = new Int32Array(supernodes);
  for (let s = 0; s < supernodes; s++) {
    const begin = first[s];
    const end = first[s + 1];
    const width = end - begin;
    const top = rowStart[s];
    const height = rowStart[s + 1] - top;
    for (let k = 0; k < height; k++) localRow[rowIndex[top + k]] = k;
    let descendant = head[s];
    while (descendant !== -1) {
      const following = next[descendant];
      const from = reached[descendant];
      const stop = rowStart[descendant + 1];
      let to = from;
      while (to < stop && rowIndex[to] < end) to++;
      const inner = first[descendant + 1] - first[descendant];
      const source = panelStart[descendant] + (from - rowStart[descendant]) * inner;
      subtractProduct(panels, source, inner, stop - from, to - from, rowIndex, from, localRow, begin, panelStart[s], width);
      if (to < stop) {
        reached[descendant] = to;
        const owner = supernodeOf[rowIndex[to]];
        next[descendant] = head[owner];
        head[owner] = descendant;
      }
      descendant = following;
    }
    const failed = factorDiagonalRows(panels, panelStart[s], width, height);
    if (failed >= 0) throw new RangeError(`The matrix is not positive definite: the pivot of unknown ${order[begin + failed]} is not positive.`);
    if (height > width) {
      reached[s] = top + width;
      const owner = supernodeOf[rowIndex[top + width]];
      next[s] = head[owner];
      head[owner] = s;
    }
  }
  return {
    analysis,
    solveMany: (b, k) => solveMany(analysis, panels, b, k, 'both'),
    halfSolveMany: (b, k, half) => solveMany(analysis, panels, b, k, half),
  };
}

function solveMany(analysis: CholeskyAnalysis, panels: Float64Array, b: Float64Array, k: number, half: 'both' | 'forward' | 'backward'): void {
  const { n, order } = analysis;
  if (b.length !== n * k) throw new RangeError(`The right-hand sides have ${b.length} values, not n k = ${n} x ${k}.`);
  const x = new Float64Array(n * blockWidth);
  for (let from = 0; from < k; from += blockWidth) {
    const count = Math.min(blockWidth, k - from);
    if (count < blockWidth) x.fill(0);
    for (let r = 0; r < count; r++) {
      const offset = (from + r) * n;
      // The factor's own coordinates are the permuted ones; half a solve reads or leaves the vector there.
      if (half === 'backward') for (let i = 0; i < n; i++) x[i * blockWidth + r] = b[offset + i];
      else for (let i = 0; i < n; i++) x[i * blockWidth + r] = b[offset + order[i]];
    }
    if (half !== 'backward') forwardBlock(analysis, panels, x);
    if (half !== 'forward') backwardBlock(analysis, panels, x);
    for (let r = 0; r < count; r++) {
      const offset = (from + r) * n;
      if (half === 'forward') for (let i = 0; i < n; i++) b[offset + i] = x[i * blockWidth + r];
      else for (let i = 0; i < n; i++) b[offset + order[i]] = x[i * blockWidth + r];
    }
  }
}
