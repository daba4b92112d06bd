import type { Replay } from '../../shared/contracts/runs';
import type { Answers, Job, JobKind, JobProgress, Request, Response } from './reconstruction-messages';

export interface JobOptions {
  /** Ends the job; the promise then rejects with an AbortError. */
  readonly signal?: AbortSignal | undefined;
  readonly onProgress?: (progress: JobProgress) => void;
}

/** The numerics refused the work; the message says what does not fit and is for the reader. */
export class ReconstructionRefused extends Error {
  override readonly name = 'ReconstructionRefused';
}

type JobOf<K extends JobKind> = Omit<Extract<Job, { kind: K }>, 'kind'>;

/** The numerics in a worker of this browser, with the same code as on the server. */
export interface ReconstructionClient {
  /** Builds the problem and factorises; later jobs of the same configuration reuse both. */
  prepare(job: JobOf<'prepare'>, options?: JobOptions): Promise<Answers['prepare']>;
  reconstruct(job: JobOf<'reconstruct'>, options?: JobOptions): Promise<Answers['reconstruct']>;
  errorAgainstNoise(job: JobOf<'error-against-noise'>, options?: JobOptions): Promise<Answers['error-against-noise']>;
  errorAgainstParameter(job: JobOf<'error-against-parameter'>, options?: JobOptions): Promise<Answers['error-against-parameter']>;
  /** Every draw of a finished run again: its hashes, how many equal the stored ones, and the first that does not. */
  recompute(replay: Replay, options?: JobOptions): Promise<Answers['recompute']>;
  dispose(): void;
}

/** What of a Worker is used; tests give their own. */
export interface WorkerPort {
  postMessage(message: Request): void;
  terminate(): void;
  onmessage: ((event: MessageEvent<Response>) => void) | null;
  onerror: ((event: ErrorEvent) => void) | null;
}
const startWorker = (): WorkerPort => new Worker(new URL('./reconstruction.worker.ts', import.meta.url), { type: 'module' });

interface Pending {
  readonly resolve: (answer: Answers[JobKind]) => void;
  readonly reject: (reason: unknown) => void;
  readonly onProgress: ((progress: JobProgress) => void) | undefined;
}

export function createReconstructionClient(start: () => WorkerPort = startWorker): ReconstructionClient {
  const pending = new Map<number, Pending>();
  let worker: WorkerPort | null = null;
  let next = 1;

  const settle = (id: number, how: (entry: Pending) => void): void => {
    const entry = pending.get(id);
    if (!entry) return;
    pending.delete(id);
    how(entry);
  };
  const open = (): WorkerPort => {
    if (worker) return worker;
    worker = start();
    worker.onmessage = ({ data }) => {
      if (data.state === 'progress') pending.get(data.id)?.onProgress?.(data.progress);
      else if (data.state === 'done') settle(data.id, (p) => p.resolve(data.answer));
      else if (data.state === 'cancelled') settle(data.id, (p) => p.reject(new DOMException('The job was cancelled.', 'AbortError')));
      else settle(data.id, (p) => p.reject(data.refusal ? new ReconstructionRefused(data.message) : new Error(data.message)));
    };
    worker.onerror = (event) => {
      const reason = new Error(event.message || 'The worker of this browser stopped.');
      for (const id of [...pending.keys()]) settle(id, (p) => p.reject(reason));
      worker?.terminate();
      worker = null;
    };
    return worker;
  };
  // The answer's kind is the job's kind: the worker answers each job with `Answers` of its own kind.
  const run = <K extends JobKind>(kind: K, job: JobOf<K>, { signal, onProgress }: JobOptions = {}): Promise<Answers[K]> =>
    new Promise<Answers[JobKind]>((resolve, reject) => {
      const aborted = () => new DOMException('The job was cancelled.', 'AbortError');
      if (signal?.aborted) return reject(aborted());
      const id = next++;
      pending.set(id, { resolve, reject, onProgress });
      open().postMessage({ id, job: { kind, ...job } as unknown as Job });
      signal?.addEventListener('abort', () => settle(id, (p) => {
        worker?.postMessage({ id, cancel: true });
        p.reject(aborted());
      }), { once: true });
    }) as Promise<Answers[K]>;

  return {
    prepare: (job, options) => run('prepare', job, options),
    reconstruct: (job, options) => run('reconstruct', job, options),
    errorAgainstNoise: (job, options) => run('error-against-noise', job, options),
    errorAgainstParameter: (job, options) => run('error-against-parameter', job, options),
    recompute: (replay, options) => run('recompute', { replay }, options),
    dispose() {
      for (const id of [...pending.keys()]) settle(id, (p) => p.reject(new DOMException('The worker was closed.', 'AbortError')));
      worker?.terminate();
      worker = null;
    },
  };
}

let shared: ReconstructionClient | null = null;
/** One worker for the page: problems and factorisations are kept across uses. */
export function reconstructionClient(): ReconstructionClient {
  shared ??= createReconstructionClient();
  return shared;
}
