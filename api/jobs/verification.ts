import type { Logger } from 'pino';
import type { VerificationCheck, VerificationOutcome } from '../../solvers/verification/check';
import { verificationChecks } from '../../solvers/verification/registry';
import { WorkerFailure, type WorkerPool } from './worker-pool.ts';

/** One check as it came out: figures, or the reason why there are none. */
export type VerificationRecord = { readonly at: Date; readonly seconds: number | null } & ({ readonly outcome: VerificationOutcome } | { readonly outcome: null; readonly reason: string });

/** The instance's own checks. Their results are of this process: the same code computes them once. */
export interface Verifier {
  /** Begins in the background, one check at a time and only while no run is being computed. */
  readonly start: () => void;
  /** Somebody waits: goes on although runs are being computed, still one check at a time. */
  readonly hurry: () => void;
  readonly running: () => boolean;
  readonly checks: readonly VerificationCheck[];
  readonly record: (key: string) => VerificationRecord | undefined;
  readonly stop: () => void;
}

export interface VerifierOptions {
  readonly pool: Pick<WorkerPool, 'run'>;
  /** Resolves once no run is being computed. */
  readonly idle: () => Promise<void>;
  readonly clock: () => Date;
  readonly logger: Logger;
  /** Of one check. */
  readonly timeLimitMs: number;
  readonly checks?: readonly VerificationCheck[];
}

export function makeVerifier({ pool, idle, clock, logger, timeLimitMs, checks = verificationChecks }: VerifierOptions): Verifier {
  const records = new Map<string, VerificationRecord>();
  const ending = new AbortController();
  let working = false;
  let somebodyWaits = (): void => undefined;
  const waitedFor = new Promise<void>((resolve) => (somebodyWaits = resolve));

  const compute = async (key: string): Promise<VerificationRecord | null> => {
    try {
      const answer = await pool.run('verify', { key }, { timeLimitMs, signal: ending.signal });
      return answer.ok ? { at: clock(), seconds: answer.seconds, outcome: answer.outcome } : { at: clock(), seconds: null, outcome: null, reason: answer.message };
    } catch (error) {
      if (ending.signal.aborted) return null;
      logger.error({ err: error, check: key }, 'a verification check failed to run');
      return { at: clock(), seconds: null, outcome: null, reason: error instanceof WorkerFailure ? error.message : 'The server failed while it computed this.' };
    }
  };
  const work = async (): Promise<void> => {
    for (const { key } of checks) {
      if (records.has(key)) continue;
      await Promise.race([idle(), waitedFor]);
      if (ending.signal.aborted) return;
      const record = await compute(key);
      if (!record) return;
      records.set(key, record);
    }
  };
  const start = (): void => {
    if (working || ending.signal.aborted || records.size === checks.length) return;
    working = true;
    work()
      .catch((error: unknown) => logger.error({ err: error }, 'the verification stopped'))
      .finally(() => (working = false));
  };
  return {
    start,
    hurry: () => {
      somebodyWaits();
      start();
    },
    running: () => working,
    checks,
    record: (key) => records.get(key),
    stop: () => ending.abort(),
  };
}
