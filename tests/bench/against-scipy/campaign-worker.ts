import { parentPort, workerData } from 'node:worker_threads';
import { defaultLadder } from '../../../shared/domain/ladder';
import type { PhantomDefinition } from '../../../shared/domain/phantom-definition';
import { prepareRun, runLevel, type RunConfiguration } from '../../../solvers/campaign/run';
import type { SimulatedPhantom } from '../../../solvers/campaign/trial';
import { createProblem, describeProblem } from '../../../solvers/problems/registry';

export interface CampaignShare {
  readonly phantoms: readonly { readonly name: string; readonly definition: PhantomDefinition; readonly simulated: SimulatedPhantom }[];
  readonly configurations: readonly RunConfiguration[];
  readonly draws: number;
}

/** Builds the models first; 'go' runs everything and answers with the sum of the relative L2 errors (each at most 1) and the count of trials. */
const { phantoms, configurations, draws } = workerData as CampaignShare;
const problems = phantoms.map(({ definition }) => createProblem(describeProblem(definition)));
const indices = Array.from({ length: draws }, (_, draw) => draw);
parentPort!.postMessage('ready');
parentPort!.on('message', () => {
  let error = 0;
  let similarity = 0;
  let trials = 0;
  phantoms.forEach(({ name, simulated }, p) => {
    // A decomposition is kept with its problem object: a fresh one pays for it again.
    const problem = { ...problems[p] };
    for (const configuration of configurations) {
      const prepared = prepareRun({ problem, ...configuration });
      defaultLadder.forEach((level, levelIndex) => {
        for (const { metrics } of runLevel(prepared, simulated, { benchSeed: 1, phantomHash: name, levelIndex, level, draws: indices })) {
          error += Math.min(1, metrics['relative-l2-error'].value ?? 1);
          similarity += metrics['ssim-score'].value ?? 0;
          trials++;
        }
      });
    }
  });
  parentPort!.postMessage({ error, similarity, trials, peak: process.memoryUsage().rss });
});
