import type { Logger } from 'pino';
import { failureReason, type Job } from './job.ts';
import type { Slice } from './slice-schedule.ts';
import { WorkerFailure, type WorkerPool } from './worker-pool.ts';

interface ActiveJob {
  readonly job: Job;
  readonly stop: AbortController;
  inFlight: number;
  /** Seconds of worker time so far. */
  spent: number;
  state: 'computing' | 'finishing' | 'ended';
}

export interface DispatcherOptions {
  readonly pool: WorkerPool;
  /** Takes the next job from the database; null when none waits. */
  readonly claim: () => Promise<Job | null>;
  readonly logger: Logger;
  /** Of one batch. */
  readonly sliceLimitMs: number;
  /** Worker time of a whole job. */
  readonly jobLimitMs: number;
}

export interface Dispatcher {
  /** Looks whether there is work. */
  readonly kick: () => void;
  /** Stops work on a job at once; its row is the caller's. */
  readonly drop: (id: string) => void;
  readonly secondsLeft: (id: string) => number | null;
  /** Resolves once nothing is in flight and nothing waits. */
  readonly idle: () => Promise<void>;
  readonly stop: () => Promise<void>;
}

/** Shares the worker threads among jobs: every job in work has a thread, a long one gets idle threads as well. */
export function makeDispatcher(options: DispatcherOptions): Dispatcher {
  const { pool, claim, logger } = options;
  const active = new Map<string, ActiveJob>();
  const waiters: (() => void)[] = [];
  let busy = 0;
  let stopped = false;
  let pumping = false;
  let again = false;

  const kick = (): void => {
    again = true;
    if (pumping || stopped) return;
    pumping = true;
    void (async () => {
      try {
        while (again && !stopped) {
          again = false;
          while (busy < pool.threads && !stopped) {
            const next = await pick();
            if (!next) break;
            start(next);
          }
        }
      } catch (error) {
        logger.error({ err: error }, 'the queue cannot be read');
      } finally {
        pumping = false;
        if (again && !stopped) kick();
        settle();
      }
    })();
  };

  const settle = (): void => {
    if (busy > 0 || active.size > 0 || pumping) return;
    for (const done of waiters.splice(0)) done();
  };

  const hasWork = (entry: ActiveJob): boolean => entry.state === 'computing' && !entry.job.schedule.empty;

  const pick = async (): Promise<ActiveJob | undefined> => {
    const idle = [...active.values()].find((entry) => entry.inFlight === 0 && hasWork(entry));
    if (idle) return idle;
    if (active.size < pool.threads) {
      const job = await claim();
      if (job) {
        const entry: ActiveJob = { job, stop: new AbortController(), inFlight: 0, spent: 0, state: 'computing' };
        active.set(job.id, entry);
        return entry;
      }
    }
    return [...active.values()].filter((entry) => hasWork(entry) && entry.job.schedule.worthSharing).sort((a, b) => a.inFlight - b.inFlight)[0];
  };

  const start = (entry: ActiveJob): void => {
    const slice = entry.job.schedule.next();
    busy++;
    entry.inFlight++;
    if (!slice) entry.state = 'finishing';
    const work = slice ? computeSlice(entry, slice) : finish(entry);
    work
      .catch((error: unknown) => end(entry, error, slice))
      .catch((error: unknown) => logger.error({ err: error, job: entry.job.id }, 'a failure could not be written down'))
      .finally(() => {
        busy--;
        entry.inFlight--;
        if (entry.state === 'computing' && entry.job.schedule.empty && entry.inFlight === 0 && !entry.stop.signal.aborted && !stopped) {
          // The thread that was just freed does the rest.
          start(entry);
        }
        if (entry.state === 'ended' && entry.inFlight === 0) active.delete(entry.job.id);
        kick();
      });
  };

  const computeSlice = async (entry: ActiveJob, slice: Slice): Promise<void> => {
    const { job, stop } = entry;
    const answer = await pool.run('runSlice', { run: job.input, level: slice.level, draws: slice.draws }, { timeLimitMs: options.sliceLimitMs, signal: stop.signal });
    if (!answer.ok) throw new WorkerFailure('threw', answer.message);
    job.schedule.finished(slice, answer.seconds);
    entry.spent += answer.seconds + answer.prepareSeconds;
    if (entry.state !== 'computing' || stop.signal.aborted) return;
    if (!(await job.store(answer))) {
      release(entry);
      return;
    }
    if (entry.spent * 1000 > options.jobLimitMs && !job.schedule.empty)
      throw new WorkerFailure('time', `The run took more than its ${Math.round(options.jobLimitMs / 60_000)} min of processor time.`);
  };

  const finish = async (entry: ActiveJob): Promise<void> => {
    await entry.job.finish(pool, entry.stop.signal);
    entry.state = 'ended';
  };

  const release = (entry: ActiveJob): void => {
    entry.state = 'ended';
    entry.job.schedule.clear();
    entry.stop.abort();
  };

  const end = async (entry: ActiveJob, error: unknown, slice: Slice | undefined): Promise<void> => {
    if (entry.state === 'ended') return;
    // A stop of the server or of the job is no failure: the row says what comes next.
    if (stopped || entry.stop.signal.aborted) {
      release(entry);
      return;
    }
    release(entry);
    const { job } = entry;
    if (error instanceof WorkerFailure) {
      logger.warn({ job: job.id, kind: error.kind, reason: error.message }, 'a job failed');
      await job.fail(failureReason(error, job.input.ladder, slice, job.input.axis));
    } else {
      logger.error({ err: error, job: job.id }, 'a job failed');
      await job.fail('The server failed while it worked on this. The fault was written down; queue it again, and tell an administrator if it comes back.');
    }
  };

  return {
    kick,
    drop: (id) => {
      const entry = active.get(id);
      if (entry) release(entry);
      if (entry?.inFlight === 0) active.delete(id);
      kick();
    },
    secondsLeft: (id) => active.get(id)?.job.schedule.secondsLeft ?? null,
    idle: () =>
      new Promise((resolve) => {
        waiters.push(resolve);
        kick();
      }),
    stop: async () => {
      stopped = true;
      for (const entry of active.values()) entry.stop.abort();
      while (busy > 0 || pumping) await new Promise((resolve) => setTimeout(resolve, 10));
      for (const done of waiters.splice(0)) done();
    },
  };
}
