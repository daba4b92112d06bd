import { deriveDrawKey } from '../core/random';
import type { CheckResult } from '../core/types';
import { methodChecks, problemChecks, runChecks } from './registry';
import type { RunCheckContext } from './run-check';

/**
 * Every check of a finished run: of the model that inverts, of the method, of the run. Cost: about ten reconstructions, five
 * derivatives, and all noise draws of the run.
 */
export function checkRun(context: RunCheckContext): CheckResult[] {
  const { prepared, simulated, benchSeed, phantomHash, ladder } = context;
  const levelIndex = ladder.length >> 1;
  const level = ladder[levelIndex];
  const { data, noiseNorm } = prepared.noiseModel.draw(simulated.clean, level, simulated.noiseScale, deriveDrawKey(benchSeed, phantomHash, levelIndex, 0));
  const method = { problem: prepared.problem, method: prepared.method, reconstructor: prepared.reconstructor, data, noise: { norm: noiseNorm, level } };
  return [
    ...problemChecks.map((check) => check.evaluate(prepared.problem)),
    ...methodChecks.map((check) => check.evaluate(method)),
    ...runChecks.map((check) => check.evaluate(context)),
  ];
}
