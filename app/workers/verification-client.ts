import type { BrowserOutcome, VerificationRequest, VerificationResponse } from './verification-messages';

/** What of a Worker is used; tests give their own. */
export interface VerificationPort {
  postMessage(message: VerificationRequest): void;
  terminate(): void;
  onmessage: ((event: MessageEvent<VerificationResponse>) => void) | null;
  onerror: ((event: ErrorEvent) => void) | null;
}
const startWorker = (): VerificationPort => new Worker(new URL('./verification.worker.ts', import.meta.url), { type: 'module' });

/** The published values computed in a worker of this browser, with the same code as on the server. */
export interface VerificationClient {
  /** @param onBegin called once the worker reaches this check. Rejects with an AbortError once stopped. */
  run(key: string, onBegin?: () => void): Promise<BrowserOutcome>;
  /** Ends what is being computed and what waits; a later run starts a new worker. */
  stop(): void;
}

interface Pending {
  readonly resolve: (outcome: BrowserOutcome) => void;
  readonly reject: (reason: unknown) => void;
  readonly onBegin: (() => void) | undefined;
}

export function createVerificationClient(start: () => VerificationPort = startWorker): VerificationClient {
  const pending = new Map<number, Pending>();
  let worker: VerificationPort | null = null;
  let next = 1;
  const close = (reason: unknown): void => {
    worker?.terminate();
    worker = null;
    for (const entry of pending.values()) entry.reject(reason);
    pending.clear();
  };
  const open = (): VerificationPort => {
    if (worker) return worker;
    worker = start();
    worker.onmessage = ({ data }) => {
      const entry = pending.get(data.id);
      if (!entry) return;
      if (data.state === 'begun') return entry.onBegin?.();
      pending.delete(data.id);
      if (data.state === 'done') entry.resolve(data.outcome);
      else entry.reject(new Error(data.message));
    };
    worker.onerror = (event) => close(new Error(event.message || 'The worker of this browser stopped.'));
    return worker;
  };
  return {
    run: (key, onBegin) =>
      new Promise((resolve, reject) => {
        const id = next++;
        pending.set(id, { resolve, reject, onBegin });
        open().postMessage({ id, key });
      }),
    stop: () => close(new DOMException('It was stopped.', 'AbortError')),
  };
}
