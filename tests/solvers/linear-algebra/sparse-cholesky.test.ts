import fc from 'fast-check';
import { lup, lusolve, matrix, sparse, type Matrix as MathSparse } from 'mathjs';
import { CholeskyDecomposition, Matrix } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { graphOfPattern } from '../../../solvers/linear-algebra/graph';
import { nestedDissection } from '../../../solvers/linear-algebra/ordering';
import { analyse, factorise } from '../../../solvers/linear-algebra/sparse-cholesky';
import { laplacianOnGrid, lowerTriangle, randomPositiveDefinite, uniform } from '../../support/sparse-matrices';

/** ||b - A x|| / (||A|| ||x|| + ||b||) with A given by its lower triangle. */
function backwardError(m: { n: number; colStart: Int32Array; rows: Int32Array; values: Float64Array }, x: Float64Array, b: Float64Array): number {
  const r = b.slice();
  let largest = 0;
  for (let j = 0; j < m.n; j++)
    for (let k = m.colStart[j]; k < m.colStart[j + 1]; k++) {
      const i = m.rows[k];
      largest = Math.max(largest, Math.abs(m.values[k]));
      r[i] -= m.values[k] * x[j];
      if (i !== j) r[j] -= m.values[k] * x[i];
    }
  const norm = (v: Float64Array) => Math.sqrt(v.reduce((s, t) => s + t * t, 0));
  return norm(r) / (largest * norm(x) + norm(b));
}

describe('sparse Cholesky', () => {
  it('solves random positive definite systems like a dense factorisation (ml-matrix)', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 40 }), fc.double({ min: 0, max: 0.6, noNaN: true }), fc.integer({ min: 1, max: 1e9 }), (n, density, seed) => {
        const { dense, lower } = randomPositiveDefinite(n, density, seed);
        const factor = factorise(analyse(lower), lower.values);
        const next = uniform(seed + 1);
        const b = Float64Array.from({ length: n }, () => next() - 0.5);
        const x = b.slice();
        factor.solveMany(x, 1);
        const expected = new CholeskyDecomposition(new Matrix(dense)).solve(Matrix.columnVector(Array.from(b))).to1DArray();
        // The matrices are diagonally dominant with margin 0.5, so the condition number is below about 100 n: rounding
        // of both codes stays below 1e-11 of the largest value.
        const largest = Math.max(...expected.map(Math.abs));
        for (let i = 0; i < n; i++) expect(Math.abs(x[i] - expected[i])).toBeLessThanOrEqual(1e-11 * largest);
      }),
      { numRuns: 60 },
    );
  });

  it('agrees with the sparse LU factorisation of mathjs on a Laplacian', () => {
    const m = laplacianOnGrid(9, 7);
    const full = sparse(matrix('sparse')) as MathSparse;
    full.resize([m.n, m.n], 0);
    for (let j = 0; j < m.n; j++)
      for (let k = m.colStart[j]; k < m.colStart[j + 1]; k++) {
        full.set([m.rows[k], j], m.values[k]);
        full.set([j, m.rows[k]], m.values[k]);
      }
    const next = uniform(5);
    const b = Float64Array.from({ length: m.n }, next);
    const expected = (lusolve(lup(full), Array.from(b).map((v) => [v])) as MathSparse).valueOf() as number[][];
    const x = b.slice();
    factorise(analyse(m), m.values).solveMany(x, 1);
    // Condition number below 100 for this grid: rounding only.
    for (let i = 0; i < m.n; i++) expect(x[i]).toBeCloseTo(expected[i][0], 12);
  });

  it.each([true, false])('leaves a residual of rounding size on a 20,000-unknown Laplacian (coordinates %s)', (withCoordinates) => {
    const m = laplacianOnGrid(160, 125);
    const analysis = analyse(withCoordinates ? m : { ...m, coordinates: undefined });
    const next = uniform(11);
    const b = Float64Array.from({ length: m.n }, () => next() - 0.5);
    const x = b.slice();
    factorise(analysis, m.values).solveMany(x, 1);
    // Backward stability of Cholesky (Higham 2002, theorem 10.4): a modest multiple of the unit roundoff.
    expect(backwardError(m, x, b)).toBeLessThan(1e-14);
    // Nested dissection of a planar grid fills O(n log n) (George 1973): 31 n log2 n / 4 is the leading term for a square
    // grid; banded elimination would need 125 n = 2.5 million entries.
    expect(analysis.panelStart[analysis.supernodes]).toBeLessThan(m.n * 60);
  });

  it('gives one right-hand side the same bits alone and in a batch', () => {
    const m = laplacianOnGrid(30, 20);
    const factor = factorise(analyse(m), m.values);
    const next = uniform(3);
    const k = 11;
    const b = Float64Array.from({ length: m.n * k }, () => next() - 0.5);
    const together = b.slice();
    factor.solveMany(together, k);
    for (let r = 0; r < k; r++) {
      const alone = b.slice(r * m.n, (r + 1) * m.n);
      factor.solveMany(alone, 1);
      expect(alone).toEqual(together.slice(r * m.n, (r + 1) * m.n));
    }
  });

  it('orders every unknown exactly once, also for disconnected and edgeless graphs', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 400 }), fc.integer({ min: 0, max: 900 }), fc.integer({ min: 1, max: 1e9 }), fc.boolean(), (n, edges, seed, geometric) => {
        const next = uniform(seed);
        const entries = new Map<number, Set<number>>();
        for (let e = 0; e < edges && n > 0; e++) {
          const a = Math.floor(next() * n);
          const b = Math.floor(next() * n);
          const low = Math.min(a, b);
          entries.set(low, (entries.get(low) ?? new Set()).add(Math.max(a, b)));
        }
        const { colStart, rows } = lowerTriangle(n, entries);
        const coordinates = geometric ? Float64Array.from({ length: 2 * n }, () => Math.floor(next() * 4)) : undefined;
        const order = nestedDissection(graphOfPattern(n, colStart, rows), coordinates);
        expect(Array.from(order).sort((a, b) => a - b)).toEqual(Array.from({ length: n }, (_, i) => i));
      }),
      { numRuns: 80 },
    );
  });

  it('refuses what is not positive definite or does not fit, and says which', () => {
    const m = laplacianOnGrid(6, 6);
    const analysis = analyse(m);
    const indefinite = m.values.slice();
    indefinite[m.colStart[10]] = -1;
    expect(() => factorise(analysis, indefinite)).toThrow(/not positive definite/);
    const undefinedValue = m.values.slice();
    undefinedValue[3] = NaN;
    expect(() => factorise(analysis, undefinedValue)).toThrow(RangeError);
    expect(() => factorise(analysis, m.values.slice(1))).toThrow(/matrix values/);
    expect(() => factorise(analysis, m.values).solveMany(new Float64Array(7), 1)).toThrow(/right-hand sides/);
    expect(() => analyse({ n: 2, colStart: Int32Array.of(0, 1, 2), rows: Int32Array.of(1, 1) })).toThrow(/diagonal/);
  });
});
