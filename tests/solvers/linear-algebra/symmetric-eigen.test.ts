import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { symmetricEigen } from '../../../solvers/linear-algebra/symmetric-eigen';

function symmetric(n: number, seed: number): Float64Array {
  const a = new Float64Array(n * n);
  let state = seed;
  for (let i = 0; i < n; i++)
    for (let j = i; j < n; j++) {
      state = (state * 16807) % 2147483647;
      a[i * n + j] = a[j * n + i] = state / 2147483647 - 0.5;
    }
  return a;
}

describe('symmetricEigen', () => {
  it.each([1, 2, 7, 31])('of size %d: eigenvalues of ml-matrix, orthonormal vectors, A = V^T D V', (n) => {
    const a = symmetric(n, 7 * n);
    const { values, vectors } = symmetricEigen(a, n);
    const expected = new EigenvalueDecomposition(Matrix.from1DArray(n, n, a), { assumeSymmetric: true }).realEigenvalues.sort((x, y) => x - y);
    // Rounding of n rotations.
    values.forEach((value, k) => expect(Math.abs(value - expected[k])).toBeLessThan(1e-13 * n));
    for (let i = 0; i < n; i++)
      for (let j = 0; j < n; j++) {
        let product = 0;
        let again = 0;
        for (let k = 0; k < n; k++) {
          product += vectors[i * n + k] * vectors[j * n + k];
          again += values[k] * vectors[k * n + i] * vectors[k * n + j];
        }
        expect(Math.abs(product - (i === j ? 1 : 0))).toBeLessThan(1e-13);
        expect(Math.abs(again - a[i * n + j])).toBeLessThan(1e-13 * n);
      }
  });
  it('keeps small eigenvalues of a graded matrix to their own digits', () => {
    // Scaled diagonally dominant: Jacobi is accurate relative to each (Barlow and Demmel 1990, from memory).
    const a = Float64Array.of(1, 1e-6, 0, 1e-6, 1e-8, 1e-15, 0, 1e-15, 1e-18);
    const { values } = symmetricEigen(a, 3);
    expect(Math.abs(values[2] - 1)).toBeLessThan(1e-11);
    // 1e-8 less the Schur complement 1e-12, and 1e-18 less 1e-30 / 9.999e-9.
    expect(Math.abs(values[1] / 9.999e-9 - 1)).toBeLessThan(1e-7);
    expect(values[0]).toBeGreaterThan(0);
  });
  it('has nothing to do for zero and for a diagonal', () => {
    expect([...symmetricEigen(new Float64Array(9), 3).values]).toEqual([0, 0, 0]);
    expect([...symmetricEigen(Float64Array.of(3, 0, 0, -1), 2).values]).toEqual([-1, 3]);
  });
  it('refuses other shapes and values that are not finite', () => {
    expect(() => symmetricEigen(new Float64Array(5), 2)).toThrow(/5 values/);
    expect(() => symmetricEigen(Float64Array.of(1, NaN, NaN, 1), 2)).toThrow(/row 0, column 1/);
  });
});
