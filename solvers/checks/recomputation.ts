import { recomputeDraw } from '../campaign/run';
import { judge, notApplicable, type Check } from './check';
import { commonPractice } from './phantom-check';
import type { RunCheckContext } from './run-check';

/** Stored image hashes against those of draws computed again, each alone. */
export const recomputationCheck: Check<RunCheckContext> = {
  key: 'recomputation',
  name: 'Recomputation equals stored bits',
  unit: 'draws',
  bound: 0,
  comparison: 'equal',
  formula: '\\#\\{\\text{draws whose image hash differs}\\}',
  summary: 'A few stored draws computed again from the seed have the same SHA-256 of their image.',
  source: commonPractice,
  evaluate({ prepared, simulated, benchSeed, phantomHash, ladder, stored }) {
    if (stored.length === 0) return notApplicable(this, 'No stored draw was given.');
    let different = 0;
    for (const { levelIndex, drawIndex, imageHash } of stored)
      if (recomputeDraw(prepared, simulated, { benchSeed, phantomHash, levelIndex, level: ladder[levelIndex], drawIndex }).imageHash !== imageHash) different++;
    return judge(this, different, `Draws that differ of ${stored.length} computed again.`);
  },
};
