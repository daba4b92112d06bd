/** Symmetric test matrices given by their lower triangle, and a seeded source of uniform numbers. */
export interface LowerMatrix {
  readonly n: number;
  readonly colStart: Int32Array;
  readonly rows: Int32Array;
  readonly values: Float64Array;
  readonly coordinates?: Float64Array;
}

/** Uniform numbers in [0, 1) from a 32-bit mixing generator, the same for the same seed. */
export function uniform(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** Pattern from the strictly lower entries of each column; the diagonal is added. */
export function lowerTriangle(n: number, entries: ReadonlyMap<number, ReadonlySet<number>>): { colStart: Int32Array; rows: Int32Array } {
  const colStart = new Int32Array(n + 1);
  const rows: number[] = [];
  for (let j = 0; j < n; j++) {
    rows.push(j);
    for (const i of [...(entries.get(j) ?? [])].filter((i) => i > j).sort((a, b) => a - b)) rows.push(i);
    colStart[j + 1] = rows.length;
  }
  return { colStart, rows: Int32Array.from(rows) };
}

/** Five-point Laplacian plus 0.1 on an nx x ny grid. */
export function laplacianOnGrid(nx: number, ny: number): LowerMatrix & { coordinates: Float64Array } {
  const n = nx * ny;
  const colStart = new Int32Array(n + 1);
  const rows: number[] = [];
  const values: number[] = [];
  const coordinates = new Float64Array(2 * n);
  for (let i = 0; i < ny; i++)
    for (let j = 0; j < nx; j++) {
      const node = i * nx + j;
      coordinates[2 * node] = j;
      coordinates[2 * node + 1] = i;
      rows.push(node);
      values.push(4.1);
      if (j + 1 < nx) {
        rows.push(node + 1);
        values.push(-1);
      }
      if (i + 1 < ny) {
        rows.push(node + nx);
        values.push(-1);
      }
      colStart[node + 1] = rows.length;
    }
  return { n, colStart, rows: Int32Array.from(rows), values: Float64Array.from(values), coordinates };
}

/** Random sparse symmetric matrix, strictly diagonally dominant with margin 0.5. */
export function randomPositiveDefinite(n: number, density: number, seed: number): { dense: number[][]; lower: LowerMatrix } {
  const next = uniform(seed);
  const dense = Array.from({ length: n }, () => new Array<number>(n).fill(0));
  for (let i = 0; i < n; i++)
    for (let j = 0; j < i; j++)
      if (next() < density) {
        const value = 2 * next() - 1;
        dense[i][j] = value;
        dense[j][i] = value;
      }
  for (let i = 0; i < n; i++) dense[i][i] = 0.5 + next() + dense[i].reduce((s, v) => s + Math.abs(v), 0);
  const entries = new Map<number, Set<number>>();
  for (let j = 0; j < n; j++) entries.set(j, new Set(dense.map((row, i) => [row[j], i] as const).filter(([v, i]) => i > j && v !== 0).map(([, i]) => i)));
  const { colStart, rows } = lowerTriangle(n, entries);
  const values = new Float64Array(rows.length);
  for (let j = 0; j < n; j++) for (let k = colStart[j]; k < colStart[j + 1]; k++) values[k] = dense[rows[k]][j];
  return { dense, lower: { n, colStart, rows, values } };
}
