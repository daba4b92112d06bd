import { prepareRun, runLevel, type PreparedRun } from '../../solvers/campaign/run';
import { errorAgainstParameter, picardData } from '../../solvers/campaign/sensitivity';
import type { SimulatedPhantom, Trial } from '../../solvers/campaign/trial';
import { canonicalJson } from '../../solvers/core/hash';
import type { ForwardProblem, PenaltyKey } from '../../solvers/core/types';
import { axisCase, axisProblem } from '../../solvers/campaign/axes/axis-case';
import type { InversionProblem } from '../../solvers/problems/problem-family';
import { createProblem, dataLayout, describeProblem, simulate } from '../../solvers/problems/registry';
import type { PhantomDefinition } from '../../shared/domain/phantom-definition';
import type { SimulationSummary } from '../entities/simulation.ts';
import { phantomChecks } from './worker-checks.ts';
import type { CaseInput, CaseTask, RunInput, SensitivityOutput, SensitivityTask, SimulateTask, SimulationOutput, SliceOutput, SliceTask, TrialOutput } from './tasks.ts';

type Clock = () => number;

/** The values used last, up to a number. */
class Recent<T> {
  private readonly entries = new Map<string, T>();
  constructor(private readonly size: number) {}
  get(key: string, make: () => T): T {
    const value = this.entries.get(key) ?? make();
    this.entries.delete(key);
    this.entries.set(key, value);
    const oldest = this.entries.keys().next();
    if (this.entries.size > this.size && !oldest.done) this.entries.delete(oldest.value);
    return value;
  }
}

// A problem takes about 20 MB; a prepared run shares the problem and its decompositions.
const problems = new Recent<InversionProblem>(3);
const preparedRuns = new Recent<PreparedRun>(4);
const restricted = new Recent<ForwardProblem>(3);

export function problemOf(definition: PhantomDefinition): InversionProblem {
  const descriptor = describeProblem(definition);
  return problems.get(canonicalJson(descriptor), () => createProblem(descriptor));
}

/** Levels that lose data have a problem each; `level` tells them apart. */
export function problemAt(run: RunInput, level: number): ForwardProblem {
  const rows = run.cases?.[level]?.rows ?? null;
  const problem = problemOf(run.definition);
  return rows ? restricted.get(`${run.key} ${level}`, () => axisProblem(problem, rows)) : problem;
}

export function preparedOf(run: RunInput, level: number): PreparedRun {
  const part = run.cases?.[level]?.rows ? level : null;
  return preparedRuns.get(canonicalJson([run.key, run.configuration, describeProblem(run.definition), part]), () => prepareRun({ problem: problemAt(run, level), noiseModel: run.noiseModel, ...run.configuration }));
}

export const simulatedOf = (run: RunInput, level: number): SimulatedPhantom => ({
  ...(({ clean, noiseScale, truthImage, targets }) => ({ clean, noiseScale, truthImage, targets }))(run.cases?.[level] ?? run),
  backgroundImage: new Float64Array(run.truthImage.length).fill(run.definition.truth.background),
});

export const seedOf = (run: RunInput, level: number) => {
  const delta = run.ladder[level];
  if (delta === undefined) throw new RangeError(`The ladder has no level ${level}.`);
  return { benchSeed: run.seed, phantomHash: run.phantomHash, levelIndex: level, level: run.axis.key === 'noise' ? delta : run.axis.noise };
};

export function simulatePhantom({ definition, arrayValues, checks }: SimulateTask, now: Clock): SimulationOutput {
  const begin = now();
  const problem = problemOf(definition);
  const simulated = simulate(definition, arrayValues ?? undefined, problem);
  const { frame, reference, clean, truthImage } = simulated;
  return {
    summary: summarise(definition, problem, simulated),
    frame,
    reference,
    clean,
    truthImage,
    checks: checks ? phantomChecks({ definition, problem, simulated }) : null,
    seconds: now() - begin,
  };
}

function summarise(definition: PhantomDefinition, problem: InversionProblem, simulated: ReturnType<typeof simulate>): SimulationSummary {
  const { dataKind, noiseReference } = definition;
  const { frame, reference, truthImage, grid } = simulated;
  const layout = dataLayout(definition);
  const patterns = layout.groupNames.length;
  let largestChange = 0;
  for (let i = 0; i < frame.length; i++) largestChange = Math.max(largestChange, Math.abs(frame[i]! - reference[i]!));
  let low = Infinity;
  let high = -Infinity;
  for (const value of truthImage) {
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  const { nx, ny, xMin, xMax, yMin, yMax, bodyRadius, body } = grid;
  return {
    dataKind,
    noiseReference,
    dataUnit: layout.unit,
    patterns,
    // Listed currents may leave other pairs undriven in every pattern: the longest then.
    valuesPerPattern: layout.valueNames.reduce((most, names) => Math.max(most, names.length), 0),
    patternNames: [...layout.groupNames],
    channelNames: layout.valueNames.map((names) => [...names]),
    noiseScale: simulated.noiseScale,
    largestChange,
    grid: { nx, ny, xMin, xMax, yMin, yMax, bodyRadius, body },
    truthRange: [low, high],
    background: definition.truth.background,
    unit: problem.unit,
    targets: simulated.targets.map(({ label, x, y, area, contrast }) => ({ label, x, y, area, contrast })),
    modelErrorFloor: simulated.modelErrorFloor,
    simulation: { unknowns: simulated.unknowns, elements: simulated.elements, kind: simulated.kind },
    inversion: { cells: simulated.cells, nodes: simulated.nodes },
  };
}

/** The data of one level of another axis than the noise. */
export function axisCaseOf({ definition, arrayValues, axis, level }: CaseTask): CaseInput {
  const { simulated, rows } = axisCase(definition, arrayValues ?? undefined, problemOf(definition), axis, level);
  const { clean, truthImage, noiseScale, targets } = simulated;
  return { clean, truthImage, noiseScale, targets, rows };
}

export function runSliceIn({ run, level, draws }: SliceTask, now: Clock): SliceOutput {
  const begin = now();
  const prepared = preparedOf(run, level);
  const ready = now();
  const trials = runLevel(prepared, simulatedOf(run, level), { ...seedOf(run, level), draws, now });
  return { trials: trials.map(toOutput), seconds: now() - ready, prepareSeconds: ready - begin };
}

function toOutput(trial: Trial): TrialOutput {
  const metrics: Record<string, number | null> = {};
  const reasons: Record<string, string> = {};
  for (const [key, { value, reason }] of Object.entries(trial.metrics)) {
    // A value that is not finite cannot be stored: SQLite refuses it and JSON would turn it into null without a reason.
    metrics[key] = value !== null && Number.isFinite(value) ? value : null;
    if (metrics[key] === null) reasons[key] = reason ?? 'The value is not finite.';
  }
  const at = trial.metrics['relative-sup-error']?.at ?? trial.metrics['sup-error']?.at;
  const { levelIndex: level, drawIndex: draw, iterations, forwardSolves, stop, noiseNorm, imageHash, image, parameter } = trial;
  return {
    level, draw, iterations, forwardSolves, stop, noiseNorm, imageHash, image, metrics,
    parameter: parameter !== null && Number.isFinite(parameter) ? parameter : null,
    reasons: Object.keys(reasons).length > 0 ? reasons : null,
    supAt: at ? [at[0], at[1]] : null,
  };
}

export function sensitivityOf({ run, level, draw }: SensitivityTask): SensitivityOutput {
  const problem = problemAt(run, level);
  const simulated = simulatedOf(run, level);
  const at = { ...seedOf(run, level), drawIndex: draw, noiseModel: run.noiseModel };
  const found = errorAgainstParameter(problem, run.configuration, simulated, at);
  if (!found) throw new RangeError('This method has no parameter to vary, or is nonlinear: a grid of nonlinear solves takes too long to show.');
  const penalty = run.configuration.parameters['penalty'];
  const penalties: readonly PenaltyKey[] = ['identity', 'gradient', 'laplacian'];
  const picard = picardData(problem, penalties.find((key) => key === penalty) ?? 'identity', simulated, at);
  return {
    parameterName: found.parameterName,
    parameters: [...found.parameters],
    errors: [...found.errors],
    oracle: found.oracle,
    picard: picard && { ...picard, singularValues: [...picard.singularValues], coefficients: [...picard.coefficients] },
  };
}
