import fc from 'fast-check';
import { CholeskyDecomposition, Matrix, SingularValueDecomposition } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { denseCholesky } from '../../../solvers/linear-algebra/dense-cholesky';
import { matmul, matmulLeftTransposed, matmulTransposed, transpose } from '../../../solvers/linear-algebra/matrix-product';
import { thinSvd } from '../../../solvers/linear-algebra/thin-svd';
import { randomPositiveDefinite, uniform } from '../../support/sparse-matrices';

function random(count: number, seed: number): Float64Array {
  const next = uniform(seed);
  return Float64Array.from({ length: count }, () => 2 * next() - 1);
}

/** A random matrix of the given rank whose singular values fall by about `decay` powers of ten. */
function decaying(rows: number, cols: number, rank: number, decay: number, seed: number): Float64Array {
  const right = random(rank * cols, seed + 1);
  for (let k = 0; k < rank; k++) for (let j = 0; j < cols; j++) right[k * cols + j] *= Math.pow(10, (-decay * k) / rank);
  return matmul(random(rows * rank, seed), right, rows, rank, cols);
}

const size = fc.integer({ min: 1, max: 12 });
const seeds = fc.integer({ min: 1, max: 1e9 });

describe('dense products', () => {
  it('equal the plain sum in ascending order, bit for bit, for every shape', () => {
    fc.assert(
      fc.property(size, fc.oneof(size, fc.constantFrom(511, 512, 513, 1030)), size, seeds, (rows, inner, cols, seed) => {
        const a = random(rows * inner, seed);
        const b = random(inner * cols, seed + 1);
        const product = matmul(a, b, rows, inner, cols);
        for (let i = 0; i < rows; i++)
          for (let j = 0; j < cols; j++) {
            let s = 0;
            for (let k = 0; k < inner; k++) s += a[i * inner + k] * b[k * cols + j];
            expect(product[i * cols + j]).toBe(s);
          }
        expect(matmulTransposed(a, transpose(b, inner, cols), rows, inner, cols)).toEqual(product);
      }),
    );
  });

  it('refuse lengths that do not fit', () => {
    expect(() => matmul(new Float64Array(3), new Float64Array(4), 2, 2, 2)).toThrow(/first factor/);
    expect(() => matmul(new Float64Array(4), new Float64Array(3), 2, 2, 2)).toThrow(/second factor/);
  });
});

describe('dense Cholesky', () => {
  it('agrees with ml-matrix on diagonally dominant matrices', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 70 }), seeds, (n, seed) => {
        const { dense } = randomPositiveDefinite(n, 0.5, seed);
        const b = random(n, seed + 7);
        const x = b.slice();
        denseCholesky(Float64Array.from(dense.flat()), n).solveMany(x);
        const expected = new CholeskyDecomposition(new Matrix(dense)).solve(Matrix.columnVector(Array.from(b))).to1DArray();
        // Condition number below about 100 n: rounding only.
        for (let i = 0; i < n; i++) expect(x[i]).toBeCloseTo(expected[i], 11);
      }),
      { numRuns: 40 },
    );
  });
  it('refuses an indefinite matrix', () => expect(() => denseCholesky(Float64Array.of(1, 2, 2, 1), 2)).toThrow(/not positive definite/));
});

describe('thin singular value decomposition', () => {
  it.each([
    ['wide, full rank, ten decades', 40, 150, 40, 10],
    ['wide, half rank (rows in pairs by reciprocity)', 60, 200, 30, 6],
    ['tall', 120, 33, 20, 4],
    ['square', 25, 25, 25, 2],
  ])('%s: values of ml-matrix, orthonormal vectors, small residual', (_, rows, cols, rank, decay) => {
    const a = decaying(rows, cols, rank, decay, rows + cols);
    const { u, s, v } = thinSvd(a, rows, cols);
    const r = s.length;
    expect(r).toBeGreaterThanOrEqual(rank);
    const reference = new SingularValueDecomposition(Matrix.from1DArray(rows, cols, a), { autoTranspose: true }).diagonal;
    // Both codes are backward stable: singular values differ by a modest multiple of eps s_1 (Weyl's inequality).
    for (let k = 0; k < r; k++) expect(Math.abs(s[k] - reference[k])).toBeLessThan(1e-13 * s[0]);
    for (let k = r; k < Math.min(rows, cols); k++) expect(reference[k]).toBeLessThan(1e-12 * s[0]);
    const scaled = u.slice();
    for (let i = 0; i < rows; i++) for (let k = 0; k < r; k++) scaled[i * r + k] *= s[k];
    const back = matmulTransposed(scaled, v, rows, r, cols);
    for (let k = 0; k < a.length; k++) expect(Math.abs(back[k] - a[k])).toBeLessThan(1e-13 * s[0]);
    for (const [vectors, count] of [[u, rows], [v, cols]] as const) {
      const t = transpose(vectors, count, r);
      const gram = matmulTransposed(t, t, r, count, r);
      for (let i = 0; i < r; i++) for (let j = 0; j < r; j++) expect(Math.abs(gram[i * r + j] - (i === j ? 1 : 0))).toBeLessThan(1e-12);
    }
  });

  it.each<readonly [string, number, (i: number, j: number) => number, number]>([
    ['the identity', 50, (i, j) => (i === j ? 1 : 0), 50],
    ['equal values in groups, some zero', 50, (i, j) => (i === j ? i % 5 : 0), 40],
    ['a matrix of ones', 60, () => 1, 1],
    ['a bidiagonal matrix with nearly no coupling', 70, (i, j) => (i === j ? 1 : j === i + 1 ? 1e-9 : 0), 70],
    ['second differences', 70, (i, j) => (i === j ? 2 : Math.abs(i - j) === 1 ? -1 : 0), 70],
    ['a Hilbert matrix', 40, (i, j) => 1 / (1 + i + j), 0],
  ])('%s: orthonormal vectors, small residual, values of ml-matrix', (_, n, entry, rank) => {
    const a = Float64Array.from({ length: n * n }, (__, k) => entry(Math.floor(k / n), k % n));
    const { u, s, v } = thinSvd(a, n, n);
    const r = s.length;
    if (rank > 0) expect(r).toBe(rank);
    const reference = new SingularValueDecomposition(Matrix.from1DArray(n, n, a), { autoTranspose: true }).diagonal;
    // Backward stable on both sides; deflation gives up 8 eps s_1 at each of the log2 n joins.
    for (let k = 0; k < r; k++) expect(Math.abs(s[k] - reference[k])).toBeLessThan(1e-13 * s[0]);
    const back = matmulTransposed(u.map((value, k) => value * s[k % r]), v, n, r, n);
    for (let k = 0; k < a.length; k++) expect(Math.abs(back[k] - a[k])).toBeLessThan(1e-13 * s[0]);
    for (const vectors of [u, v]) {
      const gram = matmulLeftTransposed(vectors, vectors, r, n, r);
      for (let i = 0; i < r; i++) for (let j = 0; j < r; j++) expect(Math.abs(gram[i * r + j] - (i === j ? 1 : 0))).toBeLessThan(1e-13);
    }
  });

  it('scales with the matrix, survives extreme scales, and gives rank zero for a zero matrix', () => {
    const a = decaying(6, 9, 6, 1, 4);
    const { s } = thinSvd(a, 6, 9);
    for (const factor of [1e-200, 1e200]) {
      const scaled = thinSvd(a.map((t) => t * factor), 6, 9).s;
      s.forEach((value, k) => expect(Math.abs(scaled[k] / factor - value)).toBeLessThan(1e-13 * s[0]));
    }
    expect(thinSvd(new Float64Array(12), 3, 4).s.length).toBe(0);
    expect(() => thinSvd(Float64Array.of(1, NaN), 1, 2)).toThrow(/not finite/);
  });
});
