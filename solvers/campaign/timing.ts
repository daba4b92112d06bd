import type { ForwardProblem } from '../core/types';
import { getMethod } from '../methods/registry';
import { prepareRun, runLevel, type RunLevelOptions } from './run';
import type { SimulatedPhantom, Trial } from './trial';

/** Median of the seconds per reconstruction of some trials; null where none was timed. */
export function secondsPerReconstruction(trials: readonly Trial[]): number | null {
  const seconds = trials.flatMap((trial) => (trial.seconds === null ? [] : [trial.seconds])).sort((a, b) => a - b);
  if (seconds.length === 0) return null;
  const middle = seconds.length >> 1;
  return seconds.length % 2 === 1 ? seconds[middle] : 0.5 * (seconds[middle - 1] + seconds[middle]);
}

/**
 * The yardstick of cost: truncated SVD at the discrepancy, timed by `runLevel` on the same data in the same worker. The first batch
 * warms the code up and is not counted.
 * @returns null where truncated SVD does not serve the problem
 */
export function timeBaseline(problem: ForwardProblem, simulated: SimulatedPhantom, options: RunLevelOptions & { readonly now: () => number }): number | null {
  if (getMethod('truncated-svd').unfit?.(problem)) return null;
  const prepared = prepareRun({ problem, method: 'truncated-svd', parameters: {}, rule: { key: 'discrepancy', safetyFactor: 1.05 } });
  runLevel(prepared, simulated, options);
  return secondsPerReconstruction(runLevel(prepared, simulated, options));
}
