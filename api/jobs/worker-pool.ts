import { existsSync } from 'node:fs';
import path from 'node:path';
import { Piscina } from 'piscina';
import type { Logger } from 'pino';
import type {
  CaseInput, CaseTask,
  Answer, RunChecksOutput, RunChecksTask, SensitivityOutput, SensitivityTask, SimulateTask, SimulationOutput, SliceOutput, SliceTask,
  VerifyOutput, VerifyTask,
} from './tasks.ts';

/** The functions that the worker exports, and what goes in and out of each. */
export interface WorkerFunctions {
  simulate: { task: SimulateTask; output: Answer<SimulationOutput> };
  runSlice: { task: SliceTask; output: Answer<SliceOutput> };
  axisCase: { task: CaseTask; output: Answer<CaseInput> };
  checkRun: { task: RunChecksTask; output: Answer<RunChecksOutput> };
  sensitivity: { task: SensitivityTask; output: Answer<SensitivityOutput> };
  verify: { task: VerifyTask; output: Answer<VerifyOutput> };
}
export type WorkerFunction = keyof WorkerFunctions;

/** Why a worker gave no answer. */
export type WorkerFailureKind = 'threw' | 'time' | 'memory' | 'stopped';
export class WorkerFailure extends Error {
  override readonly name = 'WorkerFailure';
  constructor(readonly kind: WorkerFailureKind, message: string, options?: { cause?: unknown }) {
    super(message, options);
  }
}

export interface WorkerPool {
  readonly threads: number;
  /**
   * @throws WorkerFailure when the worker throws, runs out of `timeLimitMs` or of memory, or is stopped through `signal`.
   * A task that runs too long or is stopped costs its thread, which is replaced; others are not touched.
   */
  readonly run: <F extends WorkerFunction>(name: F, task: WorkerFunctions[F]['task'], options: { readonly timeLimitMs: number; readonly signal?: AbortSignal }) => Promise<WorkerFunctions[F]['output']>;
  readonly close: () => Promise<void>;
}

export interface PoolOptions {
  readonly threads: number;
  readonly memoryLimitMb: number;
  readonly logger: Logger;
  /** Instead of the worker entry; for tests. */
  readonly workerFile?: string;
}

export function makeWorkerPool({ threads, memoryLimitMb, logger, workerFile = workerEntry() }: PoolOptions): WorkerPool {
  const pool = new Piscina({
    filename: workerFile,
    minThreads: 0,
    maxThreads: threads,
    idleTimeout: 60_000,
    concurrentTasksPerWorker: 1,
    resourceLimits: { maxOldGenerationSizeMb: memoryLimitMb },
    // TypeScript sources need a loader of their own in every thread; what the parent was started with does not matter.
    execArgv: workerFile.endsWith('.ts') ? ['--import', typescriptLoader()] : ['--enable-source-maps'],
    workerData: { memoryLimitMb },
  });
  // A thread that dies between tasks is replaced; without a listener the process would end.
  pool.on('error', (error: unknown) => logger.error({ err: error }, 'a worker thread failed'));
  return {
    threads,
    run: async (name, task, { timeLimitMs, signal }) => {
      const deadline = AbortSignal.timeout(timeLimitMs);
      try {
        return (await pool.run(task, { name, signal: signal ? AbortSignal.any([signal, deadline]) : deadline })) as WorkerFunctions[typeof name]['output'];
      } catch (cause) {
        throw asFailure(cause, { timeLimitMs, memoryLimitMb, timedOut: deadline.aborted, stopped: signal?.aborted ?? false });
      }
    },
    close: () => pool.destroy(),
  };
}

function asFailure(cause: unknown, limits: { timeLimitMs: number; memoryLimitMb: number; timedOut: boolean; stopped: boolean }): WorkerFailure {
  if (limits.stopped) return new WorkerFailure('stopped', 'It was stopped.', { cause });
  if (limits.timedOut) return new WorkerFailure('time', `It did not end within ${limits.timeLimitMs / 1000} s.`, { cause });
  const code = typeof cause === 'object' && cause !== null && 'code' in cause ? cause.code : undefined;
  const message = cause instanceof Error ? cause.message : String(cause);
  if (code === 'ERR_WORKER_OUT_OF_MEMORY' || /Array buffer allocation failed|Invalid typed array length|MemoryLimit/.test(message))
    return new WorkerFailure('memory', `It needed more than the ${limits.memoryLimitMb} MB of memory that a worker has.`, { cause });
  return new WorkerFailure('threw', message, { cause });
}

/** `worker.js` beside the bundled server, `worker.ts` beside this file. */
function workerEntry(): string {
  const bundled = path.join(import.meta.dirname, 'worker.js');
  return existsSync(bundled) ? bundled : path.join(import.meta.dirname, 'worker.ts');
}

/** tsx registers itself in the main thread only; a worker has to ask for it. */
function typescriptLoader(): string {
  const api = import.meta.resolve('tsx/esm/api');
  return `data:text/javascript,${encodeURIComponent(`import { register } from ${JSON.stringify(api)}; register();`)}`;
}
