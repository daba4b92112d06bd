/** Undirected graph without loops: the neighbours of `i` are `neighbours[start[i] .. start[i + 1])`. */
export interface Graph {
  readonly n: number;
  readonly start: Int32Array;
  readonly neighbours: Int32Array;
}

/** Graph of a symmetric pattern given by its lower triangle, column by column. */
export function graphOfPattern(n: number, colStart: Int32Array, rows: Int32Array): Graph {
  const start = new Int32Array(n + 1);
  for (let j = 0; j < n; j++)
    for (let k = colStart[j]; k < colStart[j + 1]; k++) {
      const i = rows[k];
      if (i !== j) {
        start[i + 1]++;
        start[j + 1]++;
      }
    }
  for (let i = 0; i < n; i++) start[i + 1] += start[i];
  const next = start.slice(0, n);
  const neighbours = new Int32Array(start[n]);
  for (let j = 0; j < n; j++)
    for (let k = colStart[j]; k < colStart[j + 1]; k++) {
      const i = rows[k];
      if (i !== j) {
        neighbours[next[i]++] = j;
        neighbours[next[j]++] = i;
      }
    }
  return { n, start, neighbours };
}
