import { columnCounts, eliminationTree, postorder, transposedStrict, type LowerPattern } from './elimination';
import { graphOfPattern } from './graph';
import { nestedDissection } from './ordering';
import { PanelFactor } from './panel-factor';
import { paddedHeight } from './panel-kernels';
import { panelTargets, permutePattern, relaxedSupernodes, supernodeRows } from './supernodes';

/** What `analyse` reads: lower triangle by columns (diagonal included, rows ascending), and where the nodes lie. */
export interface SymmetricPattern extends LowerPattern {
  /** x, y per unknown; without them the ordering works on the graph alone. */
  readonly coordinates?: Float64Array;
}

/**
 * Everything about a factorisation that depends on the pattern alone. Supernode s covers the columns
 * `first[s] .. first[s + 1])` of the permuted matrix; its panel is a dense block from `panelStart[s]`, column-major, one row
 * per entry of `rowIndex[rowStart[s] .. rowStart[s + 1])` (its own columns first), every column padded with zeros to a
 * multiple of four rows.
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
  readonly panelStart: Int32Array;
  readonly supernodeOf: Int32Array;
  /** The memory of `first`, `rowStart`, `panelStart`, `supernodeOf` and `rowIndex`, one after another. */
  readonly layout: Int32Array;
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
  /**
   * Says that this factor will not be used again, so that its panels need not be saved when another takes their place: worth
   * calling where many factors follow one another.
   */
  release(): void;
}

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
  const starts = relaxedSupernodes(parent, counts);
  const supernodes = starts.length - 1;
  const owner = new Int32Array(n);
  for (let s = 0; s < supernodes; s++) owner.fill(s, starts[s], starts[s + 1]);
  const panelRows = supernodeRows(permuted, starts, owner);
  const layout = new Int32Array(3 * (supernodes + 1) + n + panelRows.rowIndex.length);
  let used = 0;
  const place = (values: Int32Array): Int32Array => {
    layout.set(values, used);
    return layout.subarray(used, (used += values.length));
  };
  const first = place(starts);
  const rowStart = place(panelRows.rowStart);
  const panelStart = place(new Int32Array(supernodes + 1));
  const supernodeOf = place(owner);
  const rowIndex = place(panelRows.rowIndex);
  let multiplyAdds = 0;
  let entries = 0;
  for (let s = 0; s < supernodes; s++) {
    const height = rowStart[s + 1] - rowStart[s];
    const width = first[s + 1] - first[s];
    entries += width * paddedHeight(height);
    if (entries > 0x7fffffff) throw new RangeError('The factor has more than 2^31 - 1 entries.');
    panelStart[s + 1] = entries;
    for (let c = 0; c < width; c++) multiplyAdds += ((height - c) * (height - c + 1)) / 2;
  }
  const shape = { first, rowStart, rowIndex, panelStart, supernodeOf };
  return { n, order, supernodes, ...shape, layout, multiplyAdds, target: panelTargets(pattern, order, shape) };
}

/**
 * A = L L^T by the left-looking supernodal method (Ng and Peyton 1993), in a fixed order of operations.
 * @param values lower triangle in the order of the pattern given to `analyse`
 * @throws RangeError when a pivot is not positive or a length does not fit
 */
export function factorise(analysis: CholeskyAnalysis, values: Float64Array): CholeskyFactor {
  const { target, order } = analysis;
  if (values.length !== target.length) throw new RangeError(`There are ${values.length} matrix values, the pattern has ${target.length}.`);
  const factor = new PanelFactor(analysis);
  const failed = factor.factorise(values);
  if (failed >= 0) throw new RangeError(`The matrix is not positive definite: the pivot of unknown ${order[failed]} is not positive.`);
  return {
    analysis,
    solveMany: (b, k) => factor.solve(b, k, 'both'),
    halfSolveMany: (b, k, half) => factor.solve(b, k, half),
    release: () => factor.release(),
  };
}
