import type { CheckResultWire } from '../../shared/contracts/common';
import type { PhantomDefinition } from '../../shared/domain/phantom-definition';
import { runLevel, trivialMetrics } from '../../solvers/campaign/run';
import { secondsPerReconstruction, timeBaseline } from '../../solvers/campaign/timing';
import { checkPhantom } from '../../solvers/checks/check-phantom';
import { checkRun } from '../../solvers/checks/check-run';
import { problemChecks } from '../../solvers/checks/registry';
import type { InversionProblem, SimulatedData } from '../../solvers/problems/problem-family';
import { dataLayout } from '../../solvers/problems/registry';
import type { RunChecksOutput, RunChecksTask } from './tasks.ts';
import { preparedOf, problemOf, seedOf, simulatedOf } from './worker-tasks.ts';

/** Every check of a simulated phantom, and of the model that inverts it. */
export function phantomChecks({ definition, problem, simulated }: { readonly definition: PhantomDefinition; readonly problem: InversionProblem; readonly simulated: SimulatedData }): CheckResultWire[] {
  return [...checkPhantom({ definition, problem, simulated, layout: dataLayout(definition), truth: simulated.truth, frame: simulated.frame, reference: simulated.reference }), ...problemChecks.map((check) => check.evaluate(problem))];
}

/** A slow method is timed on few draws. */
const timedSeconds = 0.5;

export function checkFinishedRun(task: RunChecksTask, now: () => number): RunChecksOutput {
  const { run } = task;
  const problem = problemOf(run.definition);
  const prepared = preparedOf(run);
  const simulated = simulatedOf(run);
  // The middle of the ladder: neither the noise that no rule fights nor the noise that stops it at once.
  const options = { ...seedOf(run, run.ladder.length >> 1), draws: Array.from({ length: run.draws }, (_, draw) => draw), now };
  const first = runLevel(prepared, simulated, { ...options, draws: [0] });
  const one = first[0]?.seconds ?? 0;
  const count = Math.min(run.draws, Math.max(1, Math.floor(timedSeconds / Math.max(one, 1e-6))));
  const seconds = secondsPerReconstruction(runLevel(prepared, simulated, { ...options, draws: options.draws.slice(0, count) }));
  const baseline = timeBaseline(problem, simulated, options);
  return {
    checks: checkRun({
      prepared,
      simulated,
      benchSeed: run.seed,
      phantomHash: run.phantomHash,
      ladder: run.ladder,
      draws: run.draws,
      lowestErrors: task.lowestErrors,
      stored: task.stored.map(({ level, draw, imageHash }) => ({ levelIndex: level, drawIndex: draw, imageHash })),
    }),
    trivial: Object.fromEntries(Object.entries(trivialMetrics(problem, simulated)).map(([key, { value }]) => [key, value !== null && Number.isFinite(value) ? value : null])),
    secondsPerReconstruction: seconds,
    timeRatio: seconds !== null && baseline !== null && baseline > 0 ? seconds / baseline : null,
  };
}
