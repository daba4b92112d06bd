import { Cancelled, ReconstructionJobs } from './reconstruction-jobs';
import type { Request, Response } from './reconstruction-messages';

/** Jobs one after the other; a cancel comes in between two pieces of work. */
const jobs = new ReconstructionJobs();
const cancelled = new Set<number>();
const send = (response: Response): void => self.postMessage(response);
let queue: Promise<void> = Promise.resolve();

// A message channel comes back sooner than a timer, which browsers hold for 4 ms.
const { port1, port2 } = new MessageChannel();
const waiting: (() => void)[] = [];
port2.onmessage = () => waiting.shift()?.();
const pause = (): Promise<void> =>
  new Promise((resolve) => {
    waiting.push(resolve);
    port1.postMessage(null);
  });

async function work(id: number, job: Extract<Request, { job: unknown }>['job']): Promise<void> {
  await pause();
  if (cancelled.delete(id)) return send({ id, state: 'cancelled' });
  try {
    const answer = await jobs.run(job, { cancelled: () => cancelled.has(id), progress: (progress) => send({ id, state: 'progress', progress }), pause, now: () => performance.now() / 1000 });
    send({ id, state: 'done', answer });
  } catch (cause) {
    if (cause instanceof Cancelled) send({ id, state: 'cancelled' });
    else send({ id, state: 'failed', message: cause instanceof Error ? cause.message : String(cause), refusal: cause instanceof RangeError });
  } finally {
    cancelled.delete(id);
  }
}

self.onmessage = ({ data }: MessageEvent<Request>) => {
  if ('cancel' in data) cancelled.add(data.id);
  else queue = queue.then(() => work(data.id, data.job));
};
