import { spawnSync } from 'node:child_process';
import { join } from 'node:path';
import fc from 'fast-check';
import { afterEach, describe, expect, it } from 'vitest';
import { sha256Hex } from '../../../solvers/core/hash';
import { applySparse, applySparseTransposed } from '../../../solvers/core/sparse';
import { kernels, useCompiledKernels } from '../../../solvers/kernels/kernel-memory';
import { denseCholesky } from '../../../solvers/linear-algebra/dense-cholesky';
import { matmul, matmulLeftTransposed, matmulTransposed, transpose } from '../../../solvers/linear-algebra/matrix-product';
import { analyse, factorise } from '../../../solvers/linear-algebra/sparse-cholesky';
import { thinSvd } from '../../../solvers/linear-algebra/thin-svd';
import type { QuadraticMesh } from '../../../solvers/mesh/quadratic-mesh';
import { elementsByCell, pairSensitivities } from '../../../solvers/problems/electrical-impedance/sensitivity';
import { structuralSimilarity } from '../../../solvers/metrics/structural-similarity';
import { discGrid } from '../../support/synthetic-problem';
import { laplacianOnGrid, randomPositiveDefinite, uniform } from '../../support/sparse-matrices';

/* A compiled kernel and its TypeScript twin give the same bits (this project's own contract, no outside source). */

afterEach(() => useCompiledKernels(true));

const random = (count: number, seed: number): Float64Array => {
  const next = uniform(seed);
  return Float64Array.from({ length: count }, () => 2 * next() - 1);
};

/** What `compute` gives by the compiled kernels and by their twins. */
function both<T>(compute: () => T): readonly [compiled: T, twin: T] {
  useCompiledKernels(true);
  const compiled = compute();
  useCompiledKernels(false);
  const twin = compute();
  useCompiledKernels(true);
  return [compiled, twin];
}

const seeds = fc.integer({ min: 1, max: 1e9 });

describe('compiled kernels', () => {
  it('are compiled without waiting in this engine', () => expect(kernels()).not.toBeNull());

  it('are what their sources give: the committed binary equals a rebuild', () => {
    const check = spawnSync(process.execPath, [join(import.meta.dirname, '../../../.ci/kernels.mjs'), '--check'], { encoding: 'utf8' });
    expect(check.stderr).toBe('');
    expect(check.status).toBe(0);
  });

  it('give the bits of their twins: products of every shape', () => {
    const size = fc.oneof(fc.integer({ min: 3, max: 9 }), fc.integer({ min: 90, max: 105 }));
    fc.assert(
      fc.property(size, fc.oneof(fc.integer({ min: 100, max: 140 }), fc.constantFrom(255, 256, 257, 520)), size, seeds, (rows, inner, cols, seed) => {
        const a = random(rows * inner, seed);
        const b = random(inner * cols, seed + 1);
        const [compiled, twin] = both(() => matmul(a, b, rows, inner, cols));
        expect(compiled).toEqual(twin);
        expect(matmulTransposed(a, transpose(b, inner, cols), rows, inner, cols)).toEqual(twin);
        expect(matmulLeftTransposed(transpose(a, rows, inner), b, rows, inner, cols)).toEqual(twin);
      }),
      { numRuns: 30 },
    );
  });

  it('give the bits of their twins: sparse factors and solutions, whole and by halves', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 60 }), fc.double({ min: 0, max: 0.5, noNaN: true }), fc.integer({ min: 1, max: 11 }), seeds, (n, density, k, seed) => {
        const { lower } = randomPositiveDefinite(n, density, seed);
        const analysis = analyse(lower);
        const b = random(n * k, seed + 1);
        for (const half of ['both', 'forward', 'backward'] as const) {
          const [compiled, twin] = both(() => {
            const x = b.slice();
            const factor = factorise(analysis, lower.values);
            if (half === 'both') factor.solveMany(x, k);
            else factor.halfSolveMany(x, k, half);
            return x;
          });
          expect(compiled).toEqual(twin);
        }
      }),
      { numRuns: 40 },
    );
    const m = laplacianOnGrid(70, 60);
    const b = random(2 * m.n, 5);
    const [compiled, twin] = both(() => {
      const x = b.slice();
      factorise(analyse(m), m.values).solveMany(x, 2);
      return x;
    });
    expect(compiled).toEqual(twin);
  });

  it('give the bits of their twins: dense factors', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 90 }), seeds, (n, seed) => {
        const { dense } = randomPositiveDefinite(n, 0.7, seed);
        const b = random(n, seed + 1);
        const [compiled, twin] = both(() => {
          const x = b.slice();
          denseCholesky(Float64Array.from(dense.flat()), n).solveMany(x);
          return x;
        });
        expect(compiled).toEqual(twin);
      }),
      { numRuns: 30 },
    );
  });

  it('give the bits of their twins: singular value decompositions', () => {
    for (const [rows, cols] of [[1, 4], [35, 35], [70, 131], [90, 41]]) {
      const a = random(rows * cols, rows);
      const [compiled, twin] = both(() => thinSvd(a, rows, cols));
      expect(compiled).toEqual(twin);
    }
  });

  it('give the bits of their twins: hashes and structural similarity', () => {
    for (const length of [1, 1023, 1024, 4099]) {
      const [compiled, twin] = both(() => sha256Hex(random(length, length)));
      expect(compiled).toBe(twin);
    }
    for (const pixels of [11, 24, 31]) {
      const grid = discGrid(pixels);
      const count = grid.inside.length;
      const [compiled, twin] = both(() => structuralSimilarity(random(count, 1), random(count, 2), grid, 1));
      expect(compiled).toBe(twin);
    }
  });

  it('give the bits of their twins: large sparse products, again and again, and after the transpose is kept', () => {
    const [rows, cols, perRow] = [503, 400, 201];
    const next = uniform(9);
    const columns = new Int32Array(rows * perRow);
    for (let i = 0; i < rows; i++) {
      const first = Math.floor(next() * (cols - perRow));
      for (let k = 0; k < perRow; k++) columns[i * perRow + k] = first + k;
    }
    const matrix = { rows, cols, rowStart: Int32Array.from({ length: rows + 1 }, (_, i) => i * perRow), columns, values: random(rows * perRow, 3) };
    const x = random(cols, 4);
    const y = random(rows, 5);
    const products = (): Float64Array[] => Array.from({ length: 6 }, () => {
      const forward = new Float64Array(rows);
      const back = new Float64Array(cols);
      applySparse(matrix, x, forward);
      applySparseTransposed(matrix, y, back);
      return Float64Array.of(...forward, ...back);
    });
    const [compiled, twin] = both(products);
    const plain = new Float64Array(rows + cols);
    for (let i = 0; i < rows; i++)
      for (let k = i * perRow; k < (i + 1) * perRow; k++) {
        plain[i] += matrix.values[k] * x[columns[k]];
        plain[rows + columns[k]] += matrix.values[k] * y[i];
      }
    for (const product of [...compiled, ...twin]) expect(product).toEqual(plain);
  });

  it.each([8, 10, 13])('give the bits of their twins: sensitivities of pairs of %i fields', (fields) => {
    const elements = 7;
    const mesh = { elements: Int32Array.from({ length: 6 * elements }, (_, i) => (i * 5) % 17) } as unknown as QuadraticMesh;
    const groups = elementsByCell(Int32Array.of(0, 2, 0, 1, 2, 2, 0), 4);
    const [compiled, twin] = both(() => pairSensitivities(mesh, random(21 * elements, 1), groups, random(17 * fields, 2), fields));
    expect(compiled).toEqual(twin);
  });

  it('keep a factor through the work of others, and through a change to the twins', () => {
    const m = laplacianOnGrid(40, 30);
    const other = laplacianOnGrid(25, 50);
    const b = random(m.n, 1);
    const solve = (factor: ReturnType<typeof factorise>): Float64Array => {
      const x = b.slice();
      factor.solveMany(x, 1);
      return x;
    };
    const factor = factorise(analyse(m), m.values);
    const first = solve(factor);
    const second = factorise(analyse(other), other.values);
    expect(solve(factor)).toEqual(first);
    second.solveMany(random(other.n, 2), 1);
    matmul(random(250_000, 3), random(250_000, 4), 500, 500, 500);
    expect(solve(factor)).toEqual(first);
    useCompiledKernels(false);
    expect(solve(factor)).toEqual(first);
    useCompiledKernels(true);
    expect(solve(factor)).toEqual(first);
  });

  it('refuse an indefinite matrix as their twins do', () => {
    const m = laplacianOnGrid(12, 12);
    const values = m.values.slice();
    values[m.colStart[100]] = -1;
    const message = (): string => {
      try {
        factorise(analyse(m), values);
        return '';
      } catch (error) {
        return (error as Error).message;
      }
    };
    const [compiled, twin] = both(message);
    expect(compiled).toMatch(/unknown 100/);
    expect(twin).toBe(compiled);
  });
});
