import { recomputeDraw, runLevel } from '../campaign/run';
import { judge, type Check } from './check';
import { commonPractice } from './phantom-check';
import type { RunCheckContext } from './run-check';

const batch = 3;

/** Images of a batch against those of single calls, compared bit by bit. */
export const batchEqualsSingleCheck: Check<RunCheckContext> = {
  key: 'batch-equals-single',
  name: 'Batch equals single',
  unit: 'pixels',
  bound: 0,
  comparison: 'equal',
  formula: '\\#\\{\\text{pixels whose bits differ}\\}',
  summary: 'A draw reconstructed in a batch has the bits of the same draw reconstructed alone, so that it can be recomputed alone.',
  source: commonPractice,
  evaluate({ prepared, simulated, benchSeed, phantomHash, ladder, draws }) {
    const levelIndex = ladder.length >> 1;
    const seed = { benchSeed, phantomHash, levelIndex, level: ladder[levelIndex] };
    const indices = Array.from({ length: Math.min(batch, draws) }, (_, i) => i);
    let different = 0;
    for (const trial of runLevel(prepared, simulated, { ...seed, draws: indices })) {
      const alone = recomputeDraw(prepared, simulated, { ...seed, drawIndex: trial.drawIndex });
      if (alone.imageHash === trial.imageHash) continue;
      for (let k = 0; k < alone.image.length; k++) if (!Object.is(alone.image[k], trial.image[k])) different++;
    }
    return judge(this, different, `Pixels that differ between a batch of ${indices.length} draws and single calls.`);
  },
};
