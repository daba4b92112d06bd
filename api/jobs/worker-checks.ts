import type { CheckResultWire } from '../../shared/contracts/common';
import type { PhantomDefinition } from '../../shared/domain/phantom-definition';
import { runLevel, trivialMetrics } from '../../solvers/campaign/run';
import { secondsPerReconstruction, timeBaseline } from '../../solvers/campaign/timing';
import { checkPhantom } from '../../solvers/checks/check-phantom';
import { checkRun } from '../../solvers/checks/check-run';
import { problemChecks } from '../../solvers/checks/registry';
import type { InversionProblem, SimulatedData } from '../../solvers/problems/problem-family';
import { dataLayout } from '../../solvers/problems/registry';
import type { RunChecksOutput, RunChecksTask, RunInput } from './tasks.ts';
import { preparedOf, problemAt, seedOf, simulatedOf } from './worker-tasks.ts';

/** Every check of a simulated phantom, and of the model that inverts it. */
export function phantomChecks({ definition, problem, simulated }: { readonly definition: PhantomDefinition; readonly problem: InversionProblem; readonly simulated: SimulatedData }): CheckResultWire[] {
  return [...checkPhantom({ definition, problem, simulated, layout: dataLayout(definition), truth: simulated.truth, frame: simulated.frame, reference: simulated.reference }), ...problemChecks.map((check) => check.evaluate(problem))];
}

/** The levels of another axis have data of their own: the checks look at the first one, at its fixed noise. */
function firstLevel(run: RunInput) {
  return { prepared: preparedOf(run, 0), simulated: simulatedOf(run, 0), ladder: [seedOf(run, 0).level] };
}

/** A slow method is timed on few draws. */
const timedSeconds = 0.5;

export function checkFinishedRun(task: RunChecksTask, now: () => number): RunChecksOutput {
  const { run } = task;
  // The middle of the ladder: neither the noise that no rule fights nor the noise that stops it at once.
  const middle = run.ladder.length >> 1;
  const problem = problemAt(run, middle);
  const prepared = preparedOf(run, middle);
  const simulated = simulatedOf(run, middle);
  const options = { ...seedOf(run, middle), draws: Array.from({ length: run.draws }, (_, draw) => draw), now };
  const first = runLevel(prepared, simulated, { ...options, draws: [0] });
  const one = first[0]?.seconds ?? 0;
  const count = Math.min(run.draws, Math.max(1, Math.floor(timedSeconds / Math.max(one, 1e-6))));
  const seconds = secondsPerReconstruction(runLevel(prepared, simulated, { ...options, draws: options.draws.slice(0, count) }));
  const baseline = timeBaseline(problem, simulated, options);
  return {
    checks: checkRun({
      ...(run.axis.key === 'noise' ? { prepared, simulated, ladder: run.ladder } : firstLevel(run)),
      benchSeed: run.seed,
      phantomHash: run.phantomHash,
      draws: run.draws,
      lowestErrors: task.lowestErrors,
      stored: task.stored.filter(({ level }) => run.axis.key === 'noise' || level === 0).map(({ level, draw, imageHash }) => ({ levelIndex: level, drawIndex: draw, imageHash })),
    }),
    trivial: Object.fromEntries(Object.entries(trivialMetrics(problem, simulated)).map(([key, { value }]) => [key, value !== null && Number.isFinite(value) ? value : null])),
    secondsPerReconstruction: seconds,
    timeRatio: seconds !== null && baseline !== null && baseline > 0 ? seconds / baseline : null,
  };
}
