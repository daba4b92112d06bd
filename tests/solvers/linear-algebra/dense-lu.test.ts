import { LuDecomposition, Matrix } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { solveAugmented } from '../../../solvers/linear-algebra/dense-lu';
import { uniform } from '../../support/sparse-matrices';

/** [A B] with entries in -1 .. 1; zero diagonal, so that rows must change places. */
function system(n: number, columns: number): { a: Float64Array; cols: number } {
  const random = uniform(n);
  const cols = n + columns;
  const a = Float64Array.from({ length: n * cols }, () => 2 * random() - 1);
  for (let i = 0; i < n; i++) a[i * cols + i] = 0;
  return { a, cols };
}

describe('dense elimination', () => {
  // Blocks hold 64 columns: sizes below, at, just above and well above.
  it.each([[1, 1], [2, 3], [63, 1], [64, 5], [65, 2], [200, 16]])('solves %i equations with %i right-hand sides as ml-matrix does', (n, columns) => {
    const { a, cols } = system(n, columns);
    if (n === 1) a[0] = 3;
    const rows = Array.from({ length: n }, (_, i) => Array.from(a.subarray(i * cols, (i + 1) * cols)));
    const expected = new LuDecomposition(new Matrix(rows.map((row) => row.slice(0, n)))).solve(new Matrix(rows.map((row) => row.slice(n))));
    solveAugmented(a, n, cols);
    let gap = 0;
    let largest = 0;
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < columns; j++) {
        gap = Math.max(gap, Math.abs(a[i * cols + n + j] - expected.get(i, j)));
        largest = Math.max(largest, Math.abs(expected.get(i, j)));
      }
    }
    // Rounding times the condition of a random matrix of this size, below 1e4.
    expect(gap / largest).toBeLessThan(1e-11);
  });

  it('leaves a system without right-hand sides alone and refuses a singular one and a wrong length', () => {
    expect(() => solveAugmented(Float64Array.of(1, 2, 2, 4), 2, 2)).toThrow(/singular/);
    expect(() => solveAugmented(Float64Array.of(NaN, 1, 1, 1), 2, 2)).toThrow(RangeError);
    expect(() => solveAugmented(new Float64Array(5), 2, 3)).toThrow(/5 values/);
  });
});
