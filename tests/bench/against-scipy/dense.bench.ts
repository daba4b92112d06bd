import { applySparse, applySparseTransposed } from '../../../solvers/core/sparse';
import type { SparseMatrix } from '../../../solvers/core/types';
import { thinSvd } from '../../../solvers/linear-algebra/thin-svd';
import { uniform } from '../../support/sparse-matrices';
import { requireClose, timeStage, type Comparison } from './compare';
import type { PeerProcess } from './peer-process';

const random = (count: number, seed: number): Float64Array => {
  const next = uniform(seed);
  return Float64Array.from({ length: count }, () => next() - 0.5);
};
const squares = (values: Float64Array): number => values.reduce((s, v) => s + v * v, 0);

/** A projection matrix and an image: product and adjoint. */
export async function compareProjection(peer: PeerProcess | null, matrix: SparseMatrix): Promise<Comparison[]> {
  const { rows, cols } = matrix;
  const image = random(cols, 1);
  const data = random(rows, 2);
  peer?.hand('projection-rows', matrix.rowStart);
  peer?.hand('projection-columns', matrix.columns);
  peer?.hand('projection-values', matrix.values);
  peer?.hand('projection-image', image);
  peer?.hand('projection-data', data);
  const forward = new Float64Array(rows);
  const back = new Float64Array(cols);
  const times = await timeStage(peer, {
    stage: 'sparse-product', repetitions: 15, options: { rows, cols },
    ours: { apply: () => applySparse(matrix, image, forward), adjoint: () => applySparseTransposed(matrix, data, back) },
  });
  requireClose('projection', squares(forward), times.figures.apply, 1e-9);
  requireClose('back-projection', squares(back), times.figures.adjoint, 1e-9);
  const size = `${rows} rays, ${cols} pixels, ${matrix.values.length} entries`;
  return [
    { name: 'projection matrix times image, against scipy CSR', size, ours: times.ours.apply, peer: times.peer?.apply ?? null, aim: 1.2 },
    { name: 'its adjoint, against scipy CSR of the transpose', size, ours: times.ours.adjoint, peer: times.peer?.adjoint ?? null, aim: 1.2 },
  ];
}

export async function compareSvd(peer: PeerProcess | null, rows: number, cols: number, aim: number | null, repetitions: number): Promise<Comparison> {
  const a = random(rows * cols, rows);
  peer?.hand('svd-matrix', a);
  let s = new Float64Array(0);
  const times = await timeStage(peer, { stage: 'singular-values', repetitions, options: { rows, cols }, ours: { svd: () => (s = Float64Array.from(thinSvd(a, rows, cols).s)) } });
  requireClose('sum of the singular values', s.reduce((sum, v) => sum + v, 0), times.figures.sum, 1e-11);
  return { name: `SVD of ${rows} x ${cols}, against numpy`, size: 'full rank', ours: times.ours.svd, peer: times.peer?.svd ?? null, aim };
}
