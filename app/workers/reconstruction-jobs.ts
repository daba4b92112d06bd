import { decodeArray } from '../../shared/domain/array-encoding';
import type { Replay } from '../../shared/contracts/runs';
import { axisProblem } from '../../solvers/campaign/axes/axis-case';
import { prepareRun, recomputeDraw, runLevel, type PreparedRun } from '../../solvers/campaign/run';
import { errorAgainstParameter } from '../../solvers/campaign/sensitivity';
import { runHash, type SimulatedPhantom } from '../../solvers/campaign/trial';
import { canonicalJson } from '../../solvers/core/hash';
import type { ForwardProblem } from '../../solvers/core/types';
import { createProblem } from '../../solvers/problems/registry';
import type { Answers, ConfigurationSpec, Job, JobKind, JobProgress, PhantomData, ProblemSpec } from './reconstruction-messages';

/** Set while a job is to end early; looked at between draws. */
export interface JobControl {
  readonly cancelled: () => boolean;
  readonly progress: (progress: JobProgress) => void;
  /** Lets messages in between pieces of work. */
  readonly pause: () => Promise<void>;
  /** Seconds, monotonic. */
  readonly now: () => number;
}
export class Cancelled extends Error {
  override readonly name = 'Cancelled';
}

const kept = 4;
const errorKey = 'relative-l2-error';

/** Problems and prepared configurations of this worker, newest last. */
export class ReconstructionJobs {
  private readonly problems = new Map<string, ForwardProblem>();
  private readonly prepared = new WeakMap<ForwardProblem, Map<string, PreparedRun>>();

  async run(job: Job, control: JobControl): Promise<Answers[JobKind]> {
    if (job.kind === 'recompute') return this.recompute(job.replay, control);
    const begin = control.now();
    const ready = this.prepare(job.problem, job.configuration);
    if (job.kind === 'prepare') return { unknowns: ready.problem.unknowns, dataSize: ready.problem.dataSize, seconds: control.now() - begin };
    const phantom = simulated(ready.problem, job.problem.background, job.phantom);
    const known = job.phantom.truth !== null;
    const benchSeed = job.kind === 'error-against-noise' ? job.seed : job.draw.seed;
    const name = { benchSeed, phantomHash: job.phantom.contentHash };
    if (job.kind === 'reconstruct') {
      const { level, levelIndex, drawIndex } = job.draw;
      const trial = runLevel(ready, phantom, { ...name, level, levelIndex, draws: [drawIndex], now: control.now })[0]!;
      const metrics = known ? Object.fromEntries(Object.entries(trial.metrics).map(([key, m]) => [key, m.value])) : {};
      return { image: trial.image, imageHash: trial.imageHash, metrics, parameter: trial.parameter, iterations: trial.iterations, stop: trial.stop, seconds: trial.seconds };
    }
    if (job.kind === 'error-against-parameter') {
      if (!known) return null;
      const { level, levelIndex, drawIndex } = job.draw;
      const found = errorAgainstParameter(ready.problem, ready.configuration, phantom, { ...name, level, levelIndex, drawIndex }, errorKey, 25);
      return found && { parameterName: found.parameterName, curve: found.parameters.map((parameter, i) => ({ parameter, error: found.errors[i]! })), choice: found.choice, oracle: found.oracle };
    }
    const points: { level: number; error: number | null }[] = [];
    for (const [levelIndex, level] of job.levels.entries()) {
      await control.pause();
      if (control.cancelled()) throw new Cancelled();
      const trials = known ? runLevel(ready, phantom, { ...name, level, levelIndex, draws: Array.from({ length: job.draws }, (_, d) => d) }) : [];
      points.push({ level, error: median(trials.map((t) => t.metrics[errorKey]?.value ?? null)) });
      control.progress({ done: levelIndex + 1, total: job.levels.length, points: [...points] });
    }
    return { points };
  }

  private async recompute(replay: Replay, control: JobControl): Promise<Answers['recompute']> {
    const begin = control.now();
    const stored = new Map(replay.trials.map((t) => [`${t.level} ${t.draw}`, t.imageHash]));
    const trials: { level: number; draw: number; imageHash: string }[] = [];
    let firstDifference: { level: number; draw: number } | null = null;
    let equal = 0;
    for (const [levelIndex, value] of replay.ladder.entries()) {
      const level = replay.axis.key === 'noise' ? value : replay.axis.noise;
      const { ready, phantom } = this.levelOf(replay, levelIndex);
      for (let draw = 0; draw < replay.draws; draw++) {
        await control.pause();
        if (control.cancelled()) throw new Cancelled();
        const { imageHash } = recomputeDraw(ready, phantom, { benchSeed: replay.seed, phantomHash: replay.phantomHash, levelIndex, level, drawIndex: draw });
        trials.push({ level: levelIndex, draw, imageHash });
        if (stored.get(`${levelIndex} ${draw}`) === imageHash) equal++;
        else firstDifference ??= { level: levelIndex, draw };
        control.progress({ done: trials.length, total: replay.ladder.length * replay.draws });
      }
    }
    return { resultHash: runHash(trials.map((t) => t.imageHash)), trials, equal, firstDifference, seconds: control.now() - begin };
  }

  /** On the axis of the noise every level has the same data; on another one its own, and perhaps fewer of them. */
  private levelOf(replay: Replay, level: number): { ready: PreparedRun; phantom: SimulatedPhantom } {
    const { problem: spec, configuration, phantomHash, noiseModel } = replay;
    const own = replay.cases?.[level];
    const ready = own?.rows ? prepareRun({ problem: axisProblem(this.problem(spec), Int32Array.from(own.rows)), noiseModel, ...configuration }) : this.prepare(spec, configuration, noiseModel);
    const data = own ?? replay;
    const phantom = simulated(ready.problem, spec.background, {
      contentHash: phantomHash, clean: decodeArray(data.clean), noiseScale: data.noiseScale, truth: !own && replay.truth ? decodeArray(replay.truth) : null, targets: own ? [] : (replay.targets ?? []),
    });
    return { ready, phantom };
  }

  private prepare(spec: ProblemSpec, configuration: ConfigurationSpec, noiseModel?: string): PreparedRun {
    const problem = this.problem(spec);
    let runs = this.prepared.get(problem);
    if (!runs) this.prepared.set(problem, (runs = new Map()));
    const key = canonicalJson([configuration, noiseModel ?? null]);
    let run = runs.get(key);
    if (!run) {
      run = prepareRun({ problem, noiseModel, ...configuration });
      keepNewest(runs, key, run);
    }
    return run;
  }

  private problem(spec: ProblemSpec): ForwardProblem {
    const key = canonicalJson(spec);
    let problem = this.problems.get(key);
    if (!problem) {
      problem = createProblem(spec);
      keepNewest(this.problems, key, problem);
    }
    return problem;
  }
}

function keepNewest<V>(map: Map<string, V>, key: string, value: V): void {
  map.set(key, value);
  for (const oldest of map.keys()) {
    if (map.size <= kept) break;
    map.delete(oldest);
  }
}

/** Without a truth the background stands in its place: the images are the same, the errors are not read. */
function simulated(problem: ForwardProblem, background: number, data: PhantomData): SimulatedPhantom {
  const backgroundImage = new Float64Array(problem.grid.inside.length).fill(background);
  return { clean: data.clean, noiseScale: data.noiseScale, truthImage: data.truth ?? backgroundImage, backgroundImage, targets: data.targets };
}

function median(values: readonly (number | null)[]): number | null {
  const known = values.filter((v) => v !== null).sort((a, b) => a - b);
  if (known.length === 0) return null;
  const middle = known.length >> 1;
  return known.length % 2 ? known[middle]! : (known[middle - 1]! + known[middle]!) / 2;
}
