import { parse } from 'csv-parse/sync';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { AuditEntryEntity } from '../../../api/entities/audit-entry.ts';
import { EntryEntity } from '../../../api/entities/bench.ts';
import { RunEntity } from '../../../api/entities/run.ts';
import { PhantomVersionEntity } from '../../../api/entities/phantom.ts';
import { benchDetailSchema, benchListSchema, citationSchema, costEstimateSchema, type BenchCreate } from '../../../shared/contracts/benches.ts';
import type { HttpClient } from '../../support/http-client.ts';
import { makeBench, makePhantom, type MadeBench } from '../../support/registry-fixture.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
let curator: HttpClient;
let developer: HttpClient;
let stranger: HttpClient;
let phantom: { slug: string; versionId: string };
let made: MadeBench;
const group = 'tarn-soil-physics';
const issuesOf = (body: unknown) => (body as { issues: { path: (string | number)[]; message: string }[] }).issues;
const request = (over: Partial<BenchCreate> = {}): BenchCreate => ({
  group, title: 'Two levels', question: 'Which method is better at two levels?', phantoms: [{ slug: phantom.slug, version: 1 }], ladder: [0.01, 0.1], draws: 3, seed: 7, ...over,
});

beforeAll(async () => {
  app = await startTestApp();
  made = await makeBench(app, {
    title: 'Exported bench', phantoms: 2, ladder: [0.01, 0.1], draws: 4, floor: 0.001, trivial: { 'relative-l2-error': 1 },
    entries: [
      { solver: '=Formula, quoted', figures: ({ noise, draw }) => ({ 'relative-l2-error': noise * (1 + 0.1 * draw) }), review: 'signed-off-with-reservation', reservation: 'Only up to 1 %.' },
      { solver: 'Failed one', figures: () => ({}), state: 'failed' },
    ],
  });
  phantom = await makePhantom(app, { name: 'Lone disc', radius: 0.03, group });
  curator = await app.signInAs('curator-demo');
  developer = await app.signInAs('developer-demo');
  stranger = await app.signInAs('member-demo');
});
afterAll(() => app.stop());

describe('a bench from draft to close', () => {
  it('is drafted by curators of the group, inside the group', async () => {
    expect((await app.visitor.post('/api/v1/benches', request())).status).toBe(401);
    expect((await stranger.post('/api/v1/benches', request())).status).toBe(403);
    const answer = await curator.post('/api/v1/benches', request());
    expect(answer.status, answer.text).toBe(201);
    const bench = benchDetailSchema.parse(answer.body);
    expect(bench).toMatchObject({ slug: 'two-levels', state: 'draft', seed: 7, rankingMetric: 'relative-l2-error', floorPhantom: 'Lone disc', modelErrorFloor: 0.001 });
    expect(bench.may).toEqual({ edit: true, open: true, close: false, enter: false });
    expect((await app.visitor.get('/api/v1/benches/two-levels')).status).toBe(404);
    expect(benchListSchema.parse((await app.visitor.get('/api/v1/benches?q=two')).body).items).toEqual([]);
    expect(benchListSchema.parse((await developer.get('/api/v1/benches?q=two')).body).items.map((item) => item.slug)).toEqual(['two-levels']);
  });

  it('names what is wrong with its terms', async () => {
    const answer = await curator.post('/api/v1/benches', request({ title: 'Wrong', rankingMetric: 'charm', phantoms: [{ slug: phantom.slug, version: 1 }, { slug: phantom.slug, version: 1 }, { slug: 'nowhere', version: 2 }] }));
    expect(answer.status).toBe(422);
    expect(issuesOf(answer.body).map((issue) => issue.path)).toEqual([['rankingMetric'], ['phantoms', 1], ['phantoms', 2]]);
    expect((await curator.post('/api/v1/benches', request({ ladder: [0.1, 0.01] }))).status).toBe(422);
  });

  it('changes while it is a draft, and its hash with it', async () => {
    const before = benchDetailSchema.parse((await curator.get('/api/v1/benches/two-levels')).body);
    const { group: _group, ...terms } = request({ seed: 8 });
    const after = benchDetailSchema.parse((await curator.put('/api/v1/benches/two-levels', terms)).body);
    expect(after.seed).toBe(8);
    expect(after.contentHash).not.toBe(before.contentHash);
    expect((await stranger.put('/api/v1/benches/two-levels', terms)).status).toBe(404);
  });

  it('opens once its phantoms are published', async () => {
    const em = app.orm.em.fork();
    const version = await em.findOneOrFail(PhantomVersionEntity, { id: phantom.versionId });
    version.state = 'withdrawn';
    await em.flush();
    const refused = await curator.post('/api/v1/benches/two-levels/open');
    expect(refused.status).toBe(409);
    expect((refused.body as { detail: string }).detail).toContain("'Lone disc', version 1, is withdrawn");
    version.state = 'published';
    await em.flush();
    expect((await curator.post('/api/v1/benches/two-levels/open')).body).toMatchObject({ state: 'open', may: { edit: false, close: true } });
    expect((await curator.post('/api/v1/benches/two-levels/open')).status).toBe(409);
    expect((await app.visitor.get('/api/v1/benches/two-levels')).status).toBe(200);
    const { group: _group, ...terms } = request();
    expect((await curator.put('/api/v1/benches/two-levels', terms)).status).toBe(409);
  });

  it('takes entries: one run for each phantom, never the same version twice', async () => {
    const solver = made.entries[0]!.solver;
    const path = '/api/v1/benches/two-levels/entries';
    expect((await stranger.post(path, { solver, version: 1 })).status).toBe(403);
    expect((await developer.post(path, { solver, version: 4 })).status).toBe(404);
    const answer = await developer.post(path, { solver, version: 1 });
    expect(answer.status, answer.text).toBe(201);
    const bench = benchDetailSchema.parse(answer.body);
    expect(bench.entries).toHaveLength(1);
    expect(bench.entries[0]!.runs).toMatchObject([{ phantom: phantom.slug, state: 'queued', done: 0, total: 6 }]);
    expect(bench.revision).toBe(2);
    expect((await developer.post(path, { solver, version: 1 })).status).toBe(409);
    const em = app.orm.em.fork();
    expect(await em.count(AuditEntryEntity, { action: 'bench.entered' })).toBe(1);
    expect(await em.count(EntryEntity, { bench: bench.id })).toBe(1);
  });

  it('closes when its runs have ended, and the hash covers the results', async () => {
    const early = await curator.post('/api/v1/benches/two-levels/close');
    expect(early.status).toBe(409);
    const em = app.orm.em.fork();
    const run = await em.findOneOrFail(RunEntity, { entry: { bench: { slug: 'two-levels' } } });
    Object.assign(run, { state: 'finished', resultHash: 'a'.repeat(64), finishedAt: new Date() });
    await em.flush();
    const before = benchDetailSchema.parse((await curator.get('/api/v1/benches/two-levels')).body);
    const closed = benchDetailSchema.parse((await curator.post('/api/v1/benches/two-levels/close')).body);
    expect(closed.state).toBe('closed');
    expect(closed.contentHash).not.toBe(before.contentHash);
    expect(closed.closedAt).not.toBeNull();
    const entry = await developer.post('/api/v1/benches/two-levels/entries', { solver: made.entries[1]!.solver, version: 1 });
    expect(entry.status).toBe(409);
  });
});

describe('cost', () => {
  it('is estimated from runs of the same method', async () => {
    const cost = costEstimateSchema.parse((await app.visitor.get(`/api/v1/benches/${made.slug}/cost?method=tikhonov`)).body);
    // 2 phantoms x 2 levels x 4 draws; the fixture's runs took 0.001 s a reconstruction.
    expect(cost.reconstructions).toBe(16);
    expect(cost.processorSeconds).toBeCloseTo(0.016, 12);
    expect(cost.basis).toContain('on this bench');
    const unknown = costEstimateSchema.parse((await app.visitor.get(`/api/v1/benches/${made.slug}/cost?method=gauss-newton`)).body);
    expect(unknown).toMatchObject({ processorSeconds: null, readyAt: null });
    expect((await app.visitor.get(`/api/v1/benches/${made.slug}/cost?method=magic`)).status).toBe(422);
  });
});

describe('downloads', () => {
  const table = (text: string): Record<string, string>[] => parse(text, { columns: true, comment: '#', relax_column_count: false });

  it('gives the ranking as CSV with what it is of, and the caution', async () => {
    const answer = await app.visitor.get(`/api/v1/benches/${made.slug}/ranking.csv?noise=0.01`);
    expect(answer.status).toBe(200);
    expect(answer.headers.get('content-type')).toContain('text/csv');
    expect(answer.headers.get('content-disposition')).toContain('exported-bench-ranking.csv');
    const comments = answer.text.split('\r\n').filter((line) => line.startsWith('#')).join('\n');
    for (const words of [made.id, 'revision 1', 'content hash', 'Seed 1', 'difference signal', 'not for diagnosis', 'IEC 60601-1', 'Relative L2 error']) expect(comments).toContain(words);
    const rows = table(answer.text);
    expect(rows).toHaveLength(2);
    // A name that a spreadsheet would run as a formula stays text.
    expect(rows[0]).toMatchObject({ solver: "'=Formula, quoted", review: 'signed-off-with-reservation', reservations: 'Only up to 1 %.' });
    expect(Number(rows[0]!['median'])).toBeCloseTo(0.01 * 1.15, 12);
  });

  it('gives the full table as CSV, one row a level and metric', async () => {
    const answer = await app.visitor.get(`/api/v1/benches/${made.slug}/table.csv`);
    const rows = table(answer.text).filter((row) => row['metric'] === 'relative-l2-error');
    expect(rows.map((row) => [row['phantom_version'], row['noise'], row['draws']])).toEqual([['1', '0.01', '4'], ['1', '0.1', '4'], ['1', '0.01', '4'], ['1', '0.1', '4']]);
    expect(Number(rows[1]!['worst'])).toBeCloseTo(0.13, 12);
    expect(rows[0]!['reservation']).toBe('Only up to 1 %.');
    expect(rows[0]!['result_sha256']).toMatch(/^[0-9a-f]{64}$/);
  });

  it('cites it as BibTeX and plain text', async () => {
    const citation = citationSchema.parse((await app.visitor.get('/api/v1/benches/two-levels/citation')).body);
    expect(citation.bibtex).toMatch(/^@misc\{hadamark-bn-\d+-r2,/);
    expect(citation.bibtex).toContain(citation.contentHash);
    expect(citation.plain).toContain('closed');
    expect(citation.caution).toHaveLength(2);
  });
});
