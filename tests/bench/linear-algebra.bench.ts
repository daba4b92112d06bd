/** Times of the linear-algebra kernels: medians over repetitions, in ms. `npm run bench` prints them. */
import { matmul } from '../../solvers/linear-algebra/matrix-product';
import { analyse, factorise } from '../../solvers/linear-algebra/sparse-cholesky';
import { thinSvd } from '../../solvers/linear-algebra/thin-svd';
import { laplacianOnGrid, uniform } from '../support/sparse-matrices';

/** Median of `repetitions` timed calls after one that warms up, ms. */
export function medianMs(repetitions: number, call: () => unknown): number {
  call();
  const times: number[] = [];
  for (let k = 0; k < repetitions; k++) {
    const start = performance.now();
    call();
    times.push(performance.now() - start);
  }
  times.sort((a, b) => a - b);
  return times[times.length >> 1];
}

export interface BenchRow {
  readonly name: string;
  readonly milliseconds: number;
  /** What was done, for the table. */
  readonly size: string;
}

/** Analysis, factorisation and solution of a five-point Laplacian. */
export function timeSparseCholesky(side = 220): BenchRow[] {
  const m = laplacianOnGrid(side, side);
  const analysis = analyse(m);
  const factor = factorise(analysis, m.values);
  const next = uniform(1);
  const b = Float64Array.from({ length: 16 * m.n }, next);
  const size = `${m.n} unknowns, ${analysis.panelStart[analysis.supernodes]} entries in the factor`;
  return [
    { name: 'sparse Cholesky: analysis', milliseconds: medianMs(5, () => analyse(m)), size },
    { name: 'sparse Cholesky: factorisation', milliseconds: medianMs(5, () => factorise(analysis, m.values)), size },
    { name: 'sparse Cholesky: 16 solutions', milliseconds: medianMs(5, () => factor.solveMany(b.slice(), 16)), size },
  ];
}

/** Thin SVD of a 208 x 1600 matrix of rank 104 (16 electrodes, adjacent, reciprocity) and a square product. */
export function timeDense(): BenchRow[] {
  const next = uniform(2);
  const [rows, cols, rank] = [208, 1600, 104];
  const left = Float64Array.from({ length: rows * rank }, () => next() - 0.5);
  const right = Float64Array.from({ length: rank * cols }, (_, k) => (next() - 0.5) * Math.pow(10, (-6 * Math.floor(k / cols)) / rank));
  const a = matmul(left, right, rows, rank, cols);
  const n = 500;
  const square = Float64Array.from({ length: n * n }, next);
  return [
    { name: 'thin SVD', milliseconds: medianMs(3, () => thinSvd(a, rows, cols)), size: `${rows} x ${cols}, rank ${rank}` },
    { name: 'matrix product', milliseconds: medianMs(5, () => matmul(square, square, n, n, n)), size: `${n} x ${n} x ${n}` },
  ];
}
