import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { makeVerifier, type Verifier } from '../../../api/jobs/verification.ts';
import { WorkerFailure, type WorkerPool } from '../../../api/jobs/worker-pool.ts';
import { makeLogger } from '../../../api/http/request-log.ts';
import { showVerification, verificationCsv } from '../../../api/services/verification/show-verification.ts';
import { verificationSchema } from '../../../shared/contracts/verification.ts';
import { sha256Hex } from '../../../solvers/core/hash.ts';
import { getVerificationCheck, verificationChecks } from '../../../solvers/verification/registry.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

const digest = (key: string): string => sha256Hex(key);
const checks = ['wilcoxon-statistic', 'friedman-f', 'sha-256-abc', 'philox-ones'].map(getVerificationCheck);
const logger = makeLogger('silent', { write: () => undefined });

interface Bench {
  readonly verifier: Verifier;
  readonly asked: string[];
  readonly becomeIdle: () => void;
  readonly settled: () => Promise<void>;
}
/** A verifier over a pool that answers at once with the gap of each check. */
function bench(gaps: Readonly<Record<string, number | Error>>): Bench {
  const asked: string[] = [];
  let becomeIdle = (): void => undefined;
  const idle = new Promise<void>((resolve) => (becomeIdle = resolve));
  const pool = {
    run: async (_name: string, { key }: { key: string }) => {
      asked.push(key);
      const gap = gaps[key] ?? 0;
      if (gap instanceof Error) throw gap;
      return { ok: true, seconds: 0.25, outcome: { measured: gap, gap, digest: digest(key) } };
    },
  } as unknown as Pick<WorkerPool, 'run'>;
  const verifier = makeVerifier({ pool, idle: () => idle, clock: () => new Date(0), logger, timeLimitMs: 1000, checks });
  return { verifier, asked, becomeIdle, settled: () => expect.poll(() => verifier.running()).toBe(false) };
}

describe('the verifier', () => {
  it('waits in the background for the runs, and no longer once somebody asks', async () => {
    const quiet = bench({});
    quiet.verifier.start();
    await new Promise((resolve) => setTimeout(resolve, 20));
    expect(quiet.asked).toEqual([]);
    quiet.becomeIdle();
    await quiet.settled();
    expect(quiet.asked).toEqual(checks.map((check) => check.key));

    const asked = bench({});
    asked.verifier.start();
    expect(showVerification(asked.verifier)).toMatchObject({ running: true, at: null, resultHash: null });
    await asked.settled();
    expect(asked.asked).toEqual(checks.map((check) => check.key));
    // Nothing is computed twice.
    showVerification(asked.verifier);
    expect(asked.asked.length).toBe(checks.length);
  });

  it('states by gap against bound: at it passes, beyond it or without a number it fails, and a check that breaks says why', async () => {
    const { verifier, settled } = bench({ 'friedman-f': 5e-3, 'wilcoxon-statistic': 1, 'sha-256-abc': NaN, 'philox-ones': new WorkerFailure('time', 'It did not end within 1 s.') });
    verifier.hurry();
    await settled();
    const shown = verificationSchema.parse(showVerification(verifier));
    expect(shown.items.map(({ key, state, gap, words }) => [key, state, gap, words])).toEqual([
      ['wilcoxon-statistic', 'fail', 1, null],
      ['friedman-f', 'pass', 5e-3, null],
      ['sha-256-abc', 'fail', null, 'What came out is not a number.'],
      ['philox-ones', 'fail', null, 'It did not end within 1 s.'],
    ]);
    expect(shown.resultHash).toBeNull();
    expect(verificationCsv(verifier, new Date(0))).toContain('friedman-f,F of Iman and Davenport,"worked example, 4 methods over 14 data sets"');
  });

  it('hashes the digests of all checks', async () => {
    const { verifier, settled } = bench({});
    verifier.hurry();
    await settled();
    expect(showVerification(verifier).resultHash).toBe(sha256Hex(checks.map((check) => digest(check.key)).join('\n')));
  });
});

describe('over HTTP', () => {
  let app: TestApp;
  beforeAll(async () => {
    app = await startTestApp({ jobs: { workerFile: path.join(import.meta.dirname, '../support/verifying-worker.ts') } });
  });
  afterAll(() => app.stop());

  it('gives every published value as not run before the queue is open, then its figures from a worker', async () => {
    const first = verificationSchema.parse((await app.visitor.get('/api/v1/verification')).body);
    expect(first.running).toBe(false);
    expect(first.items.map((item) => [item.key, item.state])).toEqual(verificationChecks.map((check) => [check.key, 'not-run']));

    await app.deps.jobs.start();
    const read = async () => verificationSchema.parse((await app.visitor.get('/api/v1/verification')).body);
    await expect.poll(async () => (await read()).running, { timeout: 30_000 }).toBe(false);
    const { items, resultHash } = await read();
    expect(resultHash).toMatch(/^[0-9a-f]{64}$/);
    // FIPS 180-4, Secure Hash Standard: the example 'abc'.
    expect(items.find((item) => item.key === 'sha-256-abc')).toMatchObject({ state: 'pass', measured: 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad', gap: 0 });
    expect(items.every((item) => item.seconds !== null && item.at !== null)).toBe(true);

    const csv = await app.visitor.get('/api/v1/verification.csv');
    expect(csv.status).toBe(200);
    const lines = csv.text.trim().split('\r\n').filter((line) => !line.startsWith('#'));
    expect(lines.length).toBe(verificationChecks.length + 1);
    expect(lines.find((line) => line.includes('complete-electrode-model-z-0.001'))).toContain(',-2.432517,V,');
  });
});
