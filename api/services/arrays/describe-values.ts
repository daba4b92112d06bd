import { norm2 } from '../../../solvers/core/vector';
import type { NumericTable } from '../files/numeric-table.ts';

export function describeValues(values: Float64Array): { min: number; max: number; mean: number } {
  let min = Infinity;
  let max = -Infinity;
  let sum = 0;
  for (const value of values) {
    if (value < min) min = value;
    if (value > max) max = value;
    sum += value / values.length;
  }
  return { min, max, mean: sum };
}

/** Of frames whose first row is the reference: its norm, and the norm of the largest change from it. */
export function describeFrames(table: NumericTable): { min: number; max: number; referenceNorm: number; largestChange: number } {
  const { min, max } = describeValues(table.values);
  const reference = table.values.subarray(0, table.cols);
  const change = new Float64Array(table.cols);
  let largestChange = 0;
  for (let frame = 1; frame < table.rows; frame++) {
    for (let i = 0; i < table.cols; i++) change[i] = table.values[frame * table.cols + i]! - reference[i]!;
    largestChange = Math.max(largestChange, norm2(change));
  }
  return { min, max, referenceNorm: norm2(reference), largestChange };
}
