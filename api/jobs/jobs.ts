import type { MikroORM } from '@mikro-orm/sqlite';
import type { Logger } from 'pino';
import { AppError } from '../../shared/errors.ts';
import type { Mailer } from '../mail/mailer.ts';
import { forgetOldPreviews } from '../services/simulations/simulate.ts';
import { makeDispatcher } from './dispatcher.ts';
import { claimRecomputation, requeueRecomputations } from './recomputation-job.ts';
import { makeRunEvents, type RunEvents } from './run-events.ts';
import { claimRun, requeueInterrupted, type JobContext } from './run-job.ts';
import type { Answer, RunInput, SensitivityOutput, SimulateTask, SimulationOutput, TrialOutput } from './tasks.ts';
import { makeVerifier, type Verifier } from './verification.ts';
import { makeWorkerPool, WorkerFailure } from './worker-pool.ts';

/** Work that is done outside the request, and what a request may ask of it. */
export interface Jobs {
  /** Simulates in a worker; calls with the same key share one computation. @throws AppError 'simulation-failed' */
  readonly simulate: (key: string, task: SimulateTask) => Promise<SimulationOutput>;
  /** Computes one draw again. @throws AppError 'conflict' with the reason */
  readonly recomputeDraw: (run: RunInput, level: number, draw: number) => Promise<TrialOutput>;
  /** @throws AppError 'conflict' with the reason */
  readonly sensitivity: (run: RunInput, level: number, draw: number) => Promise<SensitivityOutput>;
  /** Says that a run or a recomputation was queued. Call it after the commit. */
  readonly kick: () => void;
  /** Stops work on a run or a recomputation that was cancelled in the database. */
  readonly drop: (id: string) => void;
  readonly secondsLeft: (runId: string) => number | null;
  readonly events: RunEvents;
  /** The instance's own checks against published values. */
  readonly verification: Verifier;
  readonly workers: number;
  /** Takes up what an earlier server left, then works on the queue. */
  readonly start: () => Promise<void>;
  /** Resolves once the queue is empty. */
  readonly idle: () => Promise<void>;
  readonly stop: () => Promise<void>;
}

export interface JobsOptions {
  readonly orm: MikroORM;
  readonly clock: () => Date;
  readonly logger: Logger;
  readonly mailer: Pick<Mailer, 'kick'>;
  readonly workers: number;
  /** For links in mails. */
  readonly origin: string;
  readonly limits?: Partial<JobLimits>;
  /** Instead of the worker entry; for tests. */
  readonly workerFile?: string;
}
export interface JobLimits {
  /** Of one batch of draws. */
  readonly sliceMs: number;
  /** Processor time of a whole run. */
  readonly jobMs: number;
  /** Of a preview, an image, a sensitivity view. */
  readonly interactiveMs: number;
  /** Of a simulation with its checks. */
  readonly checkedMs: number;
  readonly memoryMb: number;
}
export const defaultLimits: JobLimits = { sliceMs: 120_000, jobMs: 3_600_000, interactiveMs: 60_000, checkedMs: 180_000, memoryMb: 1024 };

export function makeJobs(options: JobsOptions): Jobs {
  const { orm, clock, logger, workers, workerFile } = options;
  const limits = { ...defaultLimits, ...options.limits };
  const events = makeRunEvents();
  const pool = makeWorkerPool({ threads: workers, memoryLimitMb: limits.memoryMb, logger, workerFile });
  // Previews and images have a thread of their own, so that nobody at a form waits for a run.
  const interactive = makeWorkerPool({ threads: 1, memoryLimitMb: limits.memoryMb, logger, workerFile });
  const context: JobContext = { orm, clock, events, origin: options.origin, mailWaits: options.mailer.kick, timeLimitMs: limits.sliceMs, pool };
  const dispatcher = makeDispatcher({
    pool,
    logger,
    sliceLimitMs: limits.sliceMs,
    jobLimitMs: limits.jobMs,
    // A reviewer who waits for a recomputation comes before new runs.
    claim: async () => (await claimRecomputation(context)) ?? (await claimRun(context)),
  });
  const verifier = makeVerifier({ pool, idle: dispatcher.idle, clock, logger, timeLimitMs: limits.checkedMs });
  const simulating = new Map<string, Promise<SimulationOutput>>();
  let open = false;

  const simulateOnce = async (task: SimulateTask): Promise<SimulationOutput> => {
    let answer: Answer<SimulationOutput>;
    try {
      // Checks take as long as several simulations: they share the threads of the runs, and previews go past them.
      answer = await (task.checks ? pool : interactive).run('simulate', task, { timeLimitMs: task.checks ? limits.checkedMs : limits.interactiveMs });
    } catch (error) {
      if (!(error instanceof WorkerFailure)) throw error;
      if (error.kind === 'threw') throw new Error('the simulation failed', { cause: error });
      throw new AppError('simulation-failed', `${error.message} Choose fewer or larger shapes, or a simpler expression.`, [{ path: ['definition'], message: error.message }], { cause: error });
    }
    if (!answer.ok) throw new AppError('simulation-failed', answer.message, [{ path: answer.path, message: answer.message }]);
    return answer;
  };
  const ask = async <T>(work: Promise<Answer<T>>): Promise<{ readonly ok: true } & T> => {
    try {
      const answer = await work;
      if (!answer.ok) throw new AppError('conflict', answer.message);
      return answer;
    } catch (error) {
      if (error instanceof WorkerFailure && error.kind !== 'threw') throw new AppError('conflict', error.message, undefined, { cause: error });
      throw error;
    }
  };

  return {
    simulate: (key, task) => {
      const name = `${key} ${task.checks}`;
      const running = simulating.get(name) ?? simulateOnce(task).finally(() => simulating.delete(name));
      simulating.set(name, running);
      return running;
    },
    recomputeDraw: async (run, level, draw) => {
      const { trials } = await ask(interactive.run('runSlice', { run, level, draws: [draw] }, { timeLimitMs: limits.interactiveMs }));
      const trial = trials[0];
      if (!trial) throw new Error('The worker gave no trial.');
      return trial;
    },
    sensitivity: (run, level, draw) => ask(interactive.run('sensitivity', { run, level, draw }, { timeLimitMs: limits.interactiveMs })),
    kick: () => {
      if (open) dispatcher.kick();
    },
    drop: dispatcher.drop,
    secondsLeft: dispatcher.secondsLeft,
    events,
    // Before the start of the queue a reader's question starts nothing.
    verification: { ...verifier, start: () => open && verifier.start(), hurry: () => open && verifier.hurry() },
    workers,
    start: async () => {
      await requeueInterrupted(context);
      await requeueRecomputations(context);
      await forgetOldPreviews(orm.em.fork(), clock());
      open = true;
      dispatcher.kick();
    },
    idle: dispatcher.idle,
    stop: async () => {
      open = false;
      verifier.stop();
      await dispatcher.stop();
      await Promise.all([pool.close(), interactive.close()]);
    },
  };
}
