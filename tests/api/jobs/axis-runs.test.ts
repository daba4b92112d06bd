import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { AxisCaseEntity } from '../../../api/entities/bench.ts';
import { seedDemo } from '../../../api/services/seed/seed-demo.ts';
import { readStockPhantom } from '../../../api/services/seed/stock-phantoms.ts';
import { benchDetailSchema, benchListSchema, seriesSchema, type BenchCreate } from '../../../shared/contracts/benches.ts';
import { recomputationSchema, replaySchema, runDetailSchema, runImageSchema } from '../../../shared/contracts/runs.ts';
import { decodeArray } from '../../../shared/domain/array-encoding.ts';
import type { AxisSetting } from '../../../shared/domain/axes.ts';
import { axisCase, axisProblem } from '../../../solvers/campaign/axes/axis-case.ts';
import { prepareRun, recomputeDraw } from '../../../solvers/campaign/run.ts';
import { contentHash, sha256Hex } from '../../../solvers/core/hash.ts';
import { createProblem, describeProblem } from '../../../solvers/problems/registry.ts';
import type { HttpClient } from '../../support/http-client.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

/** A picture of 32 pixels a side: the smallest stock phantom that has a contrast. Every result comes from a real worker. */
const folder = 'lamps-in-the-dark';
const configuration = { method: 'cgls', parameters: { penalty: 'identity', largestIteration: 8 }, rule: { key: 'discrepancy' as const, safetyFactor: 1.05 } };
const draws = 2;
let app: TestApp;
let curator: HttpClient;
let developer: HttpClient;
let slug: string;

const request = (title: string, axis: AxisSetting, ladder: number[]): BenchCreate => ({ group: 'curators', title, question: 'What does the other axis do to a picture?', phantoms: [{ slug, version: 1 }], axis, ladder, draws, seed: 5 });
const issuesOf = (body: unknown) => (body as { issues: { path: (string | number)[]; message: string }[] }).issues;

/** A bench of one entry, opened and computed; its only run. */
async function computed(title: string, axis: AxisSetting, ladder: number[]): Promise<string> {
  const made = await curator.post('/api/v1/benches', request(title, axis, ladder));
  expect(made.status, made.text).toBe(201);
  const bench = benchDetailSchema.parse(made.body);
  expect(bench.axis).toEqual(axis);
  expect((await curator.post(`/api/v1/benches/${bench.slug}/open`)).status).toBe(200);
  const entered = await developer.post(`/api/v1/benches/${bench.slug}/entries`, { solver: 'gradients', version: 1 });
  expect(entered.status, entered.text).toBe(201);
  await app.deps.jobs.idle();
  const { entries } = benchDetailSchema.parse((await app.visitor.get(`/api/v1/benches/${bench.slug}`)).body);
  return entries[0]!.runs[0]!.run;
}

beforeAll(async () => {
  app = await startTestApp();
  await app.deps.jobs.start();
  await seedDemo({
    orm: app.orm, jobs: app.deps.jobs, clock: app.deps.clock, logger: app.deps.logger, origin: 'http://site.example', accounts: app.deps.standInAccounts, pollMs: 50,
    plan: {
      groups: [
        { slug: 'curators', name: 'Curators', description: '', owner: 'owner-demo', members: [{ handle: 'curator-demo', roles: ['curator'] }] },
        { slug: 'developers', name: 'Developers', description: '', owner: 'owner-demo', members: [{ handle: 'developer-demo', roles: ['developer'] }] },
      ],
      phantoms: [{ folder, group: 'curators', curator: 'curator-demo', published: { by: 'reviewer-demo', reason: 'The checks pass.' } }],
      solvers: [{ key: 'g', group: 'developers', developer: 'developer-demo', name: 'Gradients', description: '', configuration }],
      benches: [], reviews: [],
    },
  }).done;
  curator = await app.signInAs('curator-demo');
  developer = await app.signInAs('developer-demo');
  slug = ((await app.visitor.get('/api/v1/phantoms')).body as { items: { slug: string }[] }).items[0]!.slug;
}, 120_000);
afterAll(() => app.stop());

describe('a bench on another axis than the noise', () => {
  it('is refused at the field: a level outside the axis, an axis of another family, a noise that is none', async () => {
    const level = await curator.post('/api/v1/benches', request('Wrong level', { key: 'contrast', noise: 0.01 }, [0.5, 10.5]));
    expect(level.status).toBe(422);
    expect(issuesOf(level.body)[0]!.path[0]).toBe('ladder');
    const share = await curator.post('/api/v1/benches', request('Wrong share', { key: 'missing-channels', noise: 0.01 }, [0.5, 0.95]));
    expect(issuesOf(share.body)).toMatchObject([{ path: ['ladder'], message: expect.stringContaining('0.9') as string }]);
    const family = await curator.post('/api/v1/benches', request('Wrong family', { key: 'electrode-displacement', noise: 0.01 }, [0.01, 0.1]));
    expect(family.status).toBe(422);
    expect(issuesOf(family.body)).toMatchObject([{ path: ['axis', 'key'], message: expect.stringContaining('Misplaced electrodes') as string }]);
    const noise = await curator.post('/api/v1/benches', request('Wrong noise', { key: 'contrast', noise: 2 }, [0.5, 1]));
    expect(issuesOf(noise.body)[0]!.path).toEqual(['axis', 'noise']);
  });

  it.each([
    { title: 'Contrast', axis: { key: 'contrast', noise: 0.02 } as AxisSetting, ladder: [0.5, 2] },
    { title: 'Missing channels', axis: { key: 'missing-channels', noise: 0.02 } as AxisSetting, ladder: [0.2, 0.5] },
  ])('$title: each level has its own data and truth, and every bit comes back', async ({ title, axis, ladder }) => {
    const id = await computed(title, axis, ladder);
    const run = runDetailSchema.parse((await app.visitor.get(`/api/v1/runs/${id}`)).body);
    expect(run.progress.failure).toBeNull();
    expect(run).toMatchObject({ state: 'finished', axis, ladder });
    expect(run.table['relative-l2-error']?.map((row) => row.level)).toEqual(ladder);
    const words = run.provenance.find((row) => row.detail.includes('another axis'));
    expect(words?.detail).toContain(`2 % at 2 levels of another axis: ${title.toLowerCase()}`);

    // The same level computed here, from the definition alone.
    const { definition } = await readStockPhantom(folder);
    const problem = createProblem(describeProblem(definition));
    const own = axisCase(definition, undefined, problem, axis.key, ladder[1]!);
    const prepared = prepareRun({ problem: axisProblem(problem, own.rows), ...configuration });
    const trial = recomputeDraw(prepared, own.simulated, { benchSeed: 5, phantomHash: contentHash(definition), levelIndex: 1, level: 0.02, drawIndex: 1 });
    const image = runImageSchema.parse((await app.visitor.get(`/api/v1/runs/${id}/images?level=1&draw=1`)).body);
    expect(image.imageHash).toBe(trial.imageHash);
    expect(sha256Hex(decodeArray(image.truth!))).toBe(sha256Hex(own.simulated.truthImage));

    const replay = replaySchema.parse((await app.visitor.get(`/api/v1/runs/${id}/replay`)).body);
    expect(replay.axis).toEqual(axis);
    expect(replay.cases?.map(({ rows }) => rows?.length ?? null)).toEqual(axis.key === 'contrast' ? [null, null] : [819, 512]);
    expect(sha256Hex(decodeArray(replay.cases![1]!.clean))).toBe(sha256Hex(own.simulated.clean));
    expect(sha256Hex(replay.trials.map(({ imageHash }) => imageHash).join('\n'))).toBe(run.resultHash);

    const reviewer = await app.signInAs('reviewer-demo');
    expect((await reviewer.post(`/api/v1/runs/${id}/recomputations`)).status).toBe(202);
    await app.deps.jobs.idle();
    expect(recomputationSchema.parse((await app.visitor.get(`/api/v1/runs/${id}/recomputations`)).body)).toMatchObject({ state: 'finished', equal: true, total: 4 });
    // Simulated once for the phantom, also by the recomputation.
    expect(await app.orm.em.fork().count(AxisCaseEntity, { bench: { title } })).toBe(2);
    const bench = run.bench.slug;
    expect(seriesSchema.parse((await app.visitor.get(`/api/v1/benches/${bench}/series`)).body)).toMatchObject({ axis, ladder });
    expect(benchListSchema.parse((await app.visitor.get('/api/v1/benches')).body).items.find((item) => item.slug === bench)?.axis).toEqual(axis);
    const table = (await app.visitor.get(`/api/v1/runs/${id}/table.csv`)).text;
    expect(table.split('\n')[0]).not.toMatch(/^noise/);
  }, 120_000);

  it('a contrast has no exponent, and the sheet says why', async () => {
    const list = benchListSchema.parse((await app.visitor.get('/api/v1/benches?q=contrast')).body);
    const { entries } = benchDetailSchema.parse((await app.visitor.get(`/api/v1/benches/${list.items[0]!.slug}`)).body);
    const run = runDetailSchema.parse((await app.visitor.get(`/api/v1/runs/${entries[0]!.runs[0]!.run}`)).body);
    const sheet = run.sheets['relative-l2-error'];
    expect(sheet).toMatchObject({ model: 'none', exponent: null, floor: null });
    expect(sheet?.reason?.length).toBeGreaterThan(20);
  });
});
