import type { LowerMatrix } from '../../support/sparse-matrices';

/** Lower triangle by columns, rows ascending, of a symmetric matrix given by entries that are added up. */
export function graphMatrix(n: number, entries: readonly (readonly [row: number, column: number, value: number])[], coordinates: Float64Array): LowerMatrix & { coordinates: Float64Array } {
  const columns = Array.from({ length: n }, () => new Map<number, number>());
  for (const [a, b, value] of entries) {
    const column = columns[Math.min(a, b)];
    const row = Math.max(a, b);
    column.set(row, (column.get(row) ?? 0) + value);
  }
  const colStart = new Int32Array(n + 1);
  const rows: number[] = [];
  const values: number[] = [];
  columns.forEach((column, j) => {
    for (const [row, value] of [...column].sort(([a], [b]) => a - b)) {
      rows.push(row);
      values.push(value);
    }
    colStart[j + 1] = rows.length;
  });
  return { n, colStart, rows: Int32Array.from(rows), values: Float64Array.from(values), coordinates };
}
