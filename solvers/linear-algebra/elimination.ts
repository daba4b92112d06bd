/** Symbolic tools of sparse Cholesky factorisation: elimination tree, postorder, column counts. */

/** Lower triangle by columns, rows ascending, diagonal first in each column. */
export interface LowerPattern {
  readonly n: number;
  readonly colStart: Int32Array;
  readonly rows: Int32Array;
}

/** The strict upper triangle by columns (row indices of column j below j), ascending. */
export function transposedStrict(pattern: LowerPattern): { start: Int32Array; index: Int32Array } {
  const { n, colStart, rows } = pattern;
  const start = new Int32Array(n + 1);
  for (let j = 0; j < n; j++) for (let k = colStart[j]; k < colStart[j + 1]; k++) if (rows[k] !== j) start[rows[k] + 1]++;
  for (let i = 0; i < n; i++) start[i + 1] += start[i];
  const next = start.slice(0, n);
  const index = new Int32Array(start[n]);
  for (let j = 0; j < n; j++) for (let k = colStart[j]; k < colStart[j + 1]; k++) if (rows[k] !== j) index[next[rows[k]]++] = j;
  return { start, index };
}

/** Elimination tree, parents or -1 (Liu 1986, with path compression). */
export function eliminationTree(n: number, upper: { start: Int32Array; index: Int32Array }): Int32Array {
  const parent = new Int32Array(n).fill(-1);
  const ancestor = new Int32Array(n).fill(-1);
  for (let j = 0; j < n; j++)
    for (let k = upper.start[j]; k < upper.start[j + 1]; k++) {
      let i = upper.index[k];
      while (i !== -1 && i < j) {
        const next = ancestor[i];
        ancestor[i] = j;
        if (next === -1) parent[i] = j;
        i = next;
      }
    }
  return parent;
}

/** Postorder of a forest: `order[k]` = node at position k; children keep their relative order. */
export function postorder(parent: Int32Array): Int32Array {
  const n = parent.length;
  const head = new Int32Array(n).fill(-1);
  const next = new Int32Array(n).fill(-1);
  const order = new Int32Array(n);
  const stack = new Int32Array(n);
  for (let j = n - 1; j >= 0; j--)
    if (parent[j] !== -1) {
      next[j] = head[parent[j]];
      head[parent[j]] = j;
    }
  let k = 0;
  for (let root = 0; root < n; root++) {
    if (parent[root] !== -1) continue;
    let top = 0;
    stack[0] = root;
    while (top >= 0) {
      const node = stack[top];
      const child = head[node];
      if (child === -1) {
        top--;
        order[k++] = node;
      } else {
        head[node] = next[child];
        stack[++top] = child;
      }
    }
  }
  return order;
}

/**
 * Entries of each column of the factor, diagonal included, for a matrix already in postorder (Gilbert, Ng and Peyton 1994:
 * skeleton entries and least common ancestors; nearly linear in the entries of the matrix).
 */
export function columnCounts(pattern: LowerPattern, parent: Int32Array): Int32Array {
  const { n, colStart, rows } = pattern;
  const count = new Int32Array(n);
  const first = new Int32Array(n).fill(-1);
  const maxFirst = new Int32Array(n).fill(-1);
  const previousLeaf = new Int32Array(n).fill(-1);
  const ancestor = new Int32Array(n);
  for (let k = 0; k < n; k++) {
    let j = k;
    count[j] = first[j] === -1 ? 1 : 0;
    while (j !== -1 && first[j] === -1) {
      first[j] = k;
      j = parent[j];
    }
    ancestor[k] = k;
  }
  for (let j = 0; j < n; j++) {
    if (parent[j] !== -1) count[parent[j]]--;
    for (let k = colStart[j]; k < colStart[j + 1]; k++) {
      const i = rows[k];
      if (i <= j || first[j] <= maxFirst[i]) continue;
      maxFirst[i] = first[j];
      const previous = previousLeaf[i];
      previousLeaf[i] = j;
      count[j]++;
      if (previous !== -1) {
        let q = previous;
        while (q !== ancestor[q]) q = ancestor[q];
        for (let s = previous; s !== q; ) {
          const up = ancestor[s];
          ancestor[s] = q;
          s = up;
        }
        count[q]--;
      }
    }
    if (parent[j] !== -1) ancestor[j] = parent[j];
  }
  for (let j = 0; j < n; j++) if (parent[j] !== -1) count[parent[j]] += count[j];
  return count;
}
