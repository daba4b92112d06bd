import { RandomStream, deriveKey } from '../../../solvers/core/random';
import { getMethod } from '../../../solvers/methods/registry';
import { spectralSystem } from '../../../solvers/methods/spectral-system';
import type { ForwardProblem } from '../../../solvers/core/types';
import { requireClose, timeStage, type Comparison } from './compare';
import type { PeerProcess } from './peer-process';

/** 900 frames through Tikhonov with a fixed alpha: two products and what the library reports of each frame. */
export async function compareBatch(peer: PeerProcess | null, problem: ForwardProblem, clean: Float64Array): Promise<Comparison> {
  const draws = 900;
  const share = 0.01;
  const system = spectralSystem(problem, 'gradient');
  const { rank, left, leftColumns, basis, singularValues: s, unknowns, dataSize } = system;
  const stream = new RandomStream(deriveKey('bench', 'batch'));
  const size = Math.sqrt(clean.reduce((sum, v) => sum + v * v, 0) / dataSize);
  const frames = Array.from({ length: draws }, () => clean.map((v) => v + 0.01 * size * stream.nextNormal()));
  const data = new Float64Array(draws * dataSize);
  frames.forEach((frame, f) => data.set(frame, f * dataSize));
  peer?.hand('batch-data', data);
  const used = new Float64Array(dataSize * rank);
  for (let i = 0; i < dataSize; i++) for (let k = 0; k < rank; k++) used[i * rank + k] = left[i * leftColumns + k];
  peer?.hand('batch-left', used);
  peer?.hand('batch-basis', basis);
  peer?.hand('batch-filter', s.map((v) => v / (v * v + (share * s[0]) ** 2)));
  const reconstructor = getMethod('tikhonov').prepare(problem, { penalty: 'gradient' }, { key: 'fixed', value: share });
  const noise = frames.map(() => ({ norm: 0.01 * size * Math.sqrt(dataSize), level: 0.01 }));
  let squares = 0;
  const times = await timeStage(peer, {
    stage: 'batch', repetitions: 7, options: { data: dataSize, rank, pixels: unknowns, draws },
    ours: {
      batch: () => {
        const background = system.background[0];
        squares = reconstructor.reconstructMany(frames, noise).reduce((sum, { x }) => sum + (x[0] - background) ** 2 + (x[unknowns - 1] - background) ** 2, 0);
      },
    },
  });
  requireClose('batch, sum of squares of two unknowns', squares, times.figures.squares, 1e-6);
  return { name: 'batched linear reconstruction of 900 draws, against numpy', size: `${dataSize} data, rank ${rank}, ${unknowns} unknowns`, ours: times.ours.batch, peer: times.peer?.batch ?? null, aim: 3 };
}
