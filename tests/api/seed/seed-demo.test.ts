import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { AuditEntryEntity } from '../../../api/entities/audit-entry.ts';
import { BenchEntity, EntryEntity } from '../../../api/entities/bench.ts';
import { GroupEntity, MembershipEntity } from '../../../api/entities/group.ts';
import { PhantomVersionEntity } from '../../../api/entities/phantom.ts';
import { RunEntity, VerdictEntity } from '../../../api/entities/run.ts';
import { SolverVersionEntity } from '../../../api/entities/solver.ts';
import type { DemoPlan } from '../../../api/services/seed/demo-plan.ts';
import { seedDemo, type Seeding } from '../../../api/services/seed/seed-demo.ts';
import { rankingSchema } from '../../../shared/contracts/benches.ts';
import { recomputationSchema, replaySchema, runDetailSchema, runImageSchema, sensitivitySchema } from '../../../shared/contracts/runs.ts';
import { decodeArray } from '../../../shared/domain/array-encoding.ts';
import { sha256Hex } from '../../../solvers/core/hash.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

/** One phantom, two solvers, two levels, three draws: everything the demonstration does, small. */
const plan: DemoPlan = {
  groups: [
    { slug: 'curators', name: 'Curators', description: '', owner: 'owner-demo', members: [{ handle: 'curator-demo', roles: ['curator'] }] },
    { slug: 'developers', name: 'Developers', description: '', owner: 'owner-demo', members: [{ handle: 'developer-demo', roles: ['developer'] }] },
  ],
  phantoms: [{ folder: 'deep-core', group: 'curators', curator: 'curator-demo', published: { by: 'reviewer-demo', reason: 'The checks pass.' } }],
  solvers: [
    {
      key: 'first', group: 'developers', developer: 'developer-demo', name: 'First', description: '', configuration: { method: 'tikhonov', parameters: { penalty: 'gradient' }, rule: { key: 'discrepancy', safetyFactor: 1.5 } },
      versions: [{ configuration: { method: 'tikhonov', parameters: { penalty: 'gradient' }, rule: { key: 'discrepancy', safetyFactor: 1.05 } }, whatChanged: 'Smaller safety factor' }],
    },
    { key: 'second', group: 'developers', developer: 'developer-demo', name: 'Second', description: '', configuration: { method: 'truncated-svd', parameters: {}, rule: { key: 'gcv' } } },
  ],
  benches: [
    {
      key: 'bench', group: 'curators', curator: 'curator-demo', title: 'Tiny bench', question: 'Does the seed do all it should?', description: '', phantoms: ['deep-core'], ladder: [0.01, 0.1], draws: 3, seed: 1,
      entries: [{ solver: 'first', by: 'developer-demo' }, { solver: 'second', by: 'developer-demo' }],
    },
  ],
  reviews: [
    {
      bench: 'bench', solver: 'first', phantom: 'deep-core', verdict: { by: 'reviewer-demo', verdict: 'signed-off', reason: 'Everything was looked at.' },
      comments: [{ by: 'reviewer-demo', text: 'Is it tuned?', question: true }, { by: 'developer-demo', text: 'No.' }],
    },
  ],
};

let app: TestApp;
const seedOnce = (): Seeding =>
  seedDemo({ orm: app.orm, jobs: app.deps.jobs, clock: app.deps.clock, logger: app.deps.logger, origin: 'http://site.example', plan, accounts: app.deps.standInAccounts, pollMs: 50 });
const counts = async () => {
  const em = app.orm.em.fork();
  return {
    groups: await em.count(GroupEntity), memberships: await em.count(MembershipEntity), phantoms: await em.count(PhantomVersionEntity), solvers: await em.count(SolverVersionEntity),
    benches: await em.count(BenchEntity), entries: await em.count(EntryEntity), runs: await em.count(RunEntity), verdicts: await em.count(VerdictEntity),
  };
};

beforeAll(async () => {
  app = await startTestApp();
  await app.deps.jobs.start();
});
afterAll(() => app.stop());

describe('seeding', () => {
  it('goes on where it was interrupted, runs for real and says when it is complete', async () => {
    // Stopped at once: whatever stands by then must be found again by the next start.
    await seedOnce().stop();
    expect(await app.orm.em.fork().count(AuditEntryEntity, { action: 'site.demo-seeded' })).toBe(0);
    const seeding = seedOnce();
    expect(seeding.running()).toBe(true);
    await seeding.done;
    expect(seeding.running()).toBe(false);
    expect(app.log()).not.toContain('seeding the demonstration failed');
    expect(await counts()).toEqual({ groups: 2, memberships: 4, phantoms: 1, solvers: 3, benches: 1, entries: 2, runs: 2, verdicts: 1 });
    expect(await app.orm.em.fork().count(AuditEntryEntity, { action: 'site.demo-seeded' })).toBe(1);
  }, 240_000);

  it('does nothing at the next start', async () => {
    const before = await counts();
    await seedOnce().done;
    expect(await counts()).toEqual(before);
  });
});

describe('what was computed', () => {
  const runOf = async (name: string): Promise<string> => (await app.orm.em.fork().findOneOrFail(RunEntity, { entry: { solverVersion: { solver: { name } } } })).id;

  it('is reviewed, and ranked', async () => {
    await app.deps.jobs.idle();
    const shown = runDetailSchema.parse((await app.visitor.get(`/api/v1/runs/${await runOf('First')}`)).body);
    expect(shown).toMatchObject({ state: 'finished', review: 'signed-off', openQuestions: 0, solver: { version: 2 } });
    // The background alone scores exactly 1 by the definition of the metric.
    expect(shown.trivial['relative-l2-error']).toBe(1);
    expect(shown.checks.filter((check) => check.state === 'fail')).toEqual([]);
    const ranking = rankingSchema.parse((await app.visitor.get('/api/v1/benches/tiny-bench/ranking?noise=0.01')).body);
    expect(ranking.rows.map((row) => row.complete)).toEqual([true, true]);
    for (const row of ranking.rows) expect(row.median, row.solver.name).toBeGreaterThan(0);
  }, 120_000);

  it('comes back with the same bits: stored, on demand, and by a recomputation', async () => {
    const id = await runOf('First');
    for (const draw of [0, 1, 2]) {
      const image = runImageSchema.parse((await app.visitor.get(`/api/v1/runs/${id}/images?level=1&draw=${draw}`)).body);
      expect(sha256Hex(decodeArray(image.image)), `draw ${draw}, stored ${image.stored}`).toBe(image.imageHash);
      expect(image.truth).not.toBeNull();
    }
    const replay = replaySchema.parse((await app.visitor.get(`/api/v1/runs/${id}/replay`)).body);
    expect(sha256Hex(replay.trials.map((trial) => trial.imageHash).join('\n'))).toBe(replay.resultHash);
    const reviewer = await app.signInAs('reviewer-demo');
    expect((await reviewer.post(`/api/v1/runs/${id}/recomputations`)).status).toBe(202);
    await app.deps.jobs.idle();
    const recomputation = recomputationSchema.parse((await app.visitor.get(`/api/v1/runs/${id}/recomputations`)).body);
    expect(recomputation).toMatchObject({ state: 'finished', equal: true, done: 6, total: 6, firstDifference: null });
    expect(recomputation.resultHash).toBe(replay.resultHash);
  }, 120_000);

  it('shows the error against the parameter', async () => {
    const sensitivity = sensitivitySchema.parse((await app.visitor.get(`/api/v1/runs/${await runOf('First')}/sensitivity?level=0`)).body);
    expect(sensitivity.level).toBe(0.01);
    expect(sensitivity.choices).toHaveLength(3);
    // The oracle is the least of what the curve shows.
    expect(sensitivity.oracle.error).toBeLessThanOrEqual(Math.min(...sensitivity.errors) + 1e-12);
  }, 120_000);
});
