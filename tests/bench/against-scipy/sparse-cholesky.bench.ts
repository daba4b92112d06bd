import { analyse, factorise } from '../../../solvers/linear-algebra/sparse-cholesky';
import { uniform } from '../../support/sparse-matrices';
import { requireClose, timeStage, type Comparison } from './compare';
import type { PeerProcess } from './peer-process';
import { ringMatrix } from './ring-mesh';

/** Linear elements on a disc of 10,513 nodes: factorisation, 16 solutions, and both with the ordering. */
export async function compareSparseCholesky(peer: PeerProcess | null): Promise<Comparison[]> {
  const m = ringMatrix(72);
  const next = uniform(1);
  const b = Float64Array.from({ length: 16 * m.n }, () => next() - 0.5);
  peer?.hand('cholesky-columns', m.colStart);
  peer?.hand('cholesky-rows', m.rows);
  peer?.hand('cholesky-values', m.values);
  peer?.hand('cholesky-right', b);
  const analysis = analyse(m);
  const factor = factorise(analysis, m.values);
  const x = b.slice();
  const solveAll = (): void => {
    x.set(b);
    factor.solveMany(x, 16);
  };
  const times = await timeStage(peer, {
    stage: 'sparse-cholesky', repetitions: 9,
    ours: {
      factorisation: () => factorise(analysis, m.values).release(),
      solutions: solveAll,
      cold: () => {
        x.set(b);
        const cold = factorise(analyse(m), m.values);
        cold.solveMany(x, 16);
        cold.release();
      },
    },
  });
  solveAll();
  requireClose('sparse Cholesky, sum of squares of the solutions', x.reduce((s, v) => s + v * v, 0), times.figures.squares, 1e-9);
  const size = `${m.n} unknowns, ${analysis.panelStart[analysis.supernodes]} entries here, ${times.figures.entries ?? '-'} in splu`;
  const { ours, peer: theirs } = times;
  return [
    { name: 'sparse Cholesky numeric, analysis cached, against splu', size, ours: ours.factorisation, peer: theirs?.factorisation ?? null, aim: 0.15 },
    { name: 'the same against banded Cholesky after reverse Cuthill-McKee', size: `${times.figures.band ?? '-'} diagonals`, ours: ours.factorisation, peer: theirs?.banded ?? null, aim: 0.45 },
    { name: '16 right-hand sides solved, against splu', size, ours: ours.solutions, peer: theirs?.solutions ?? null, aim: 0.45 },
    { name: 'cold: ordering to 16 solutions, against splu', size, ours: ours.cold, peer: theirs?.cold ?? null, aim: 0.9 },
  ];
}
