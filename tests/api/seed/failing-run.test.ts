import { expect, it } from 'vitest';
import { demoPlan } from '../../../api/services/seed/demo-plan.ts';
import { readStockPhantom } from '../../../api/services/seed/stock-phantoms.ts';
import { prepareRun, recomputeDraw } from '../../../solvers/campaign/run.ts';
import { contentHash } from '../../../solvers/core/hash.ts';
import { createProblem, describeProblem, simulate } from '../../../solvers/problems/registry.ts';

it('the run that the demonstration shows as failed does fail, with a reason', async () => {
  const review = demoPlan.reviews.find((candidate) => candidate.giveUp)!;
  const bench = demoPlan.benches.find((candidate) => candidate.key === review.bench)!;
  const { configuration } = demoPlan.solvers.find((candidate) => candidate.key === review.solver)!;
  const { definition } = await readStockPhantom(review.phantom);
  const problem = createProblem(describeProblem(definition));
  const { clean, noiseScale, truthImage, targets } = simulate(definition, undefined, problem);
  const simulated = { clean, noiseScale, truthImage, targets, backgroundImage: new Float64Array(truthImage.length).fill(definition.truth.background) };
  const prepared = prepareRun({ problem, ...configuration });
  const level = bench.ladder[0]!;
  expect(() => recomputeDraw(prepared, simulated, { benchSeed: bench.seed, phantomHash: contentHash(definition), levelIndex: 0, level, drawIndex: 0 })).toThrow(/not positive definite/);
}, 120_000);
