import type { Taps } from './point-spread';

/** The weights that are not zero at offsets -ny .. ny by -nx .. nx, row after row, scaled to unit sum; one in the middle where all are zero. */
export function collectTaps(nx: number, ny: number, weight: (row: number, column: number) => number): Taps {
  const rows: number[] = [];
  const columns: number[] = [];
  const values: number[] = [];
  let sum = 0;
  for (let i = -ny; i <= ny; i++)
    for (let j = -nx; j <= nx; j++) {
      const value = weight(i, j);
      if (value === 0) continue;
      rows.push(i);
      columns.push(j);
      values.push(value);
      sum += value;
    }
  if (values.length === 0) return { rows: Int32Array.of(0), columns: Int32Array.of(0), values: Float64Array.of(1) };
  return { rows: Int32Array.from(rows), columns: Int32Array.from(columns), values: Float64Array.from(values, (value) => value / sum) };
}
