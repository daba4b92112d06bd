import { useEffect, useRef, useState } from 'react';
import { createVerificationClient, type VerificationClient } from '../../../workers/verification-client';
import type { BrowserResult } from '../model/verdicts';

export interface BrowserVerification {
  readonly results: ReadonlyMap<string, BrowserResult>;
  /** Checks that wait or are being computed. */
  readonly open: number;
  /** Computes these in their order; those at work already are left out. */
  readonly run: (keys: readonly string[]) => void;
  readonly stop: () => void;
}

/** Computes checks in a worker of this browser, one after the other. Leaving the page ends them. */
export function useBrowserVerification(): BrowserVerification {
  const [results, setResults] = useState<ReadonlyMap<string, BrowserResult>>(new Map());
  const client = useRef<VerificationClient | null>(null);
  const put = (key: string, result: BrowserResult | null): void =>
    setResults((old) => {
      const changed = new Map(old);
      if (result) changed.set(key, result);
      else changed.delete(key);
      return changed;
    });
  useEffect(() => () => client.current?.stop(), []);
  const busy = (result: BrowserResult | undefined): boolean => result?.state === 'waiting' || result?.state === 'running';

  const run = (keys: readonly string[]): void => {
    client.current ??= createVerificationClient();
    for (const key of keys) {
      if (busy(results.get(key))) continue;
      put(key, { state: 'waiting' });
      client.current.run(key, () => put(key, { state: 'running' })).then(
        (outcome) => put(key, { state: 'done', outcome }),
        (reason: unknown) => put(key, reason instanceof DOMException ? null : { state: 'failed', message: reason instanceof Error ? reason.message : String(reason) }),
      );
    }
  };
  return { results, open: [...results.values()].filter(busy).length, run, stop: () => client.current?.stop() };
}
