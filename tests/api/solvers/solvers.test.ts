import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { AuditEntryEntity } from '../../../api/entities/audit-entry.ts';
import { solverDetailSchema, solverListSchema, type SolverCreate } from '../../../shared/contracts/solvers.ts';
import type { HttpClient } from '../../support/http-client.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
let developer: HttpClient;
let observer: HttpClient;
let stranger: HttpClient;
let group: string;

const tikhonov = (parameters: Record<string, number | string> = {}): SolverCreate['configuration'] => ({ method: 'tikhonov', parameters, rule: { key: 'gcv' } });
const request = (over: Partial<SolverCreate> = {}): SolverCreate => ({
  group, name: 'Tikhonov, gradient', configuration: tikhonov(), declaration: { notTuned: true, ownMesh: false }, ...over,
});

beforeAll(async () => {
  app = await startTestApp();
  group = (await app.group('Tarn Soil Physics', { 'owner-demo': ['owner'], 'developer-demo': ['developer'], 'observer-demo': ['observer'] })).slug;
  developer = await app.signInAs('developer-demo');
  observer = await app.signInAs('observer-demo');
  stranger = await app.signInAs('member-demo');
});
afterAll(() => app.stop());

const issuesOf = (body: unknown) => (body as { issues: { path: (string | number)[]; message: string }[] }).issues;

describe('solver configurations', () => {
  it('registers one with its defaults filled in, and leaves a trace', async () => {
    const answer = await developer.post('/api/v1/solvers', request());
    expect(answer.status).toBe(201);
    const solver = solverDetailSchema.parse(answer.body);
    expect(answer.headers.get('location')).toBe('/api/v1/solvers/tikhonov-gradient');
    expect(solver).toMatchObject({ slug: 'tikhonov-gradient', methodName: 'Tikhonov regularisation', current: { n: 1, state: 'registered', runs: 0 } });
    // The default of the penalty is part of what was registered, so a later default cannot change it.
    expect(solver.current.configuration.parameters).toHaveProperty('penalty', 'gradient');
    expect(solver.may).toEqual({ edit: true, withdraw: true, newVersion: true, enter: true });
    const trace = await app.orm.em.fork().findOneOrFail(AuditEntryEntity, { action: 'solver.registered', subjectId: solver.id });
    expect(trace).toMatchObject({ actorHandle: 'developer-demo', after: { version: 1, contentHash: solver.current.contentHash } });
  });

  it('refuses the same content in the same group, written out or by default', async () => {
    const answer = await developer.post('/api/v1/solvers', request({ name: 'Another name', configuration: tikhonov({ penalty: 'gradient' }) }));
    expect(answer.status).toBe(409);
    expect(answer.body).toMatchObject({ code: 'duplicate', extra: { slug: 'tikhonov-gradient', version: 1 } });
  });

  it('names the parameter at fault', async () => {
    const answer = await developer.post('/api/v1/solvers', request({ configuration: tikhonov({ penalty: 'cubic', smallestAlpha: -1, speed: 3 }) }));
    expect(answer.status).toBe(422);
    const paths = issuesOf(answer.body).map((issue) => issue.path.join('.'));
    expect(paths).toEqual(expect.arrayContaining(['configuration.parameters.penalty', 'configuration.parameters.smallestAlpha', 'configuration.parameters.speed']));
  });

  it('refuses an unknown method, and a rule that the method does not take', async () => {
    const unknown = await developer.post('/api/v1/solvers', request({ configuration: { method: 'magic', parameters: {}, rule: null } }));
    expect(issuesOf(unknown.body)[0]?.path).toEqual(['configuration', 'method']);
    const rule = await developer.post('/api/v1/solvers', request({ configuration: { method: 'cgls', parameters: {}, rule: { key: 'gcv' } } }));
    expect(rule.status).toBe(422);
    expect(issuesOf(rule.body)[0]).toMatchObject({ path: ['configuration', 'rule', 'key'], message: expect.stringContaining('discrepancy') });
    const range = await developer.post('/api/v1/solvers', request({ configuration: { method: 'truncated-svd', parameters: {}, rule: { key: 'fixed', value: 2.5 } } }));
    expect(issuesOf(range.body)[0]).toMatchObject({ path: ['configuration', 'rule', 'value'], message: 'Index must be a whole number.' });
  });

  it('is for developers and owners of the group only', async () => {
    expect((await app.visitor.post('/api/v1/solvers', request())).status).toBe(401);
    expect((await observer.post('/api/v1/solvers', request())).status).toBe(403);
    expect((await stranger.post('/api/v1/solvers', request())).status).toBe(403);
    expect((await developer.post('/api/v1/solvers', request({ group: 'no-such-group' }))).status).toBe(404);
  });

  it('keeps a draft inside the group until it is registered', async () => {
    const made = await developer.post('/api/v1/solvers', request({ name: 'Secret draft', configuration: tikhonov({ penalty: 'identity' }), register: false }));
    expect(made.body).toMatchObject({ current: { state: 'draft', registeredAt: null } });
    expect((await app.visitor.get('/api/v1/solvers/secret-draft')).status).toBe(404);
    expect((await stranger.get('/api/v1/solvers/secret-draft')).status).toBe(404);
    expect((await observer.get('/api/v1/solvers/secret-draft')).status).toBe(200);
    const listed = solverListSchema.parse((await app.visitor.get('/api/v1/solvers?q=secret')).body);
    expect(listed.items).toEqual([]);
    expect(solverListSchema.parse((await observer.get('/api/v1/solvers?q=secret')).body).items).toHaveLength(1);
    expect((await developer.post('/api/v1/solvers/secret-draft/versions/1/register')).body).toMatchObject({ current: { state: 'registered' } });
    expect((await developer.post('/api/v1/solvers/secret-draft/versions/1/register')).status).toBe(409);
    expect((await app.visitor.get('/api/v1/solvers/secret-draft')).status).toBe(200);
  });

  it('adds a version and leaves the one before as it is', async () => {
    const before = solverDetailSchema.parse((await app.visitor.get('/api/v1/solvers/tikhonov-gradient')).body);
    const body = { configuration: tikhonov({ penalty: 'laplacian' }), declaration: { notTuned: true, ownMesh: false }, whatChanged: 'Laplacian penalty' };
    expect((await stranger.post('/api/v1/solvers/tikhonov-gradient/versions', body)).status).toBe(403);
    const answer = await developer.post('/api/v1/solvers/tikhonov-gradient/versions', body);
    expect(answer.status).toBe(201);
    const solver = solverDetailSchema.parse(answer.body);
    expect(solver.versions.map(({ n, whatChanged }) => [n, whatChanged])).toEqual([[1, ''], [2, 'Laplacian penalty']]);
    expect(solver.versions[0]).toEqual(before.versions[0]);
    expect(solver.current.n).toBe(2);
    expect((await developer.post('/api/v1/solvers/tikhonov-gradient/versions', { ...body, whatChanged: '' })).status).toBe(422);
  });

  it('withdraws a version with a reason that the page shows', async () => {
    const path = '/api/v1/solvers/tikhonov-gradient/versions/2/withdraw';
    expect((await developer.post(path, { reason: 'short' })).status).toBe(422);
    expect((await developer.post('/api/v1/solvers/tikhonov-gradient/versions/9/withdraw', { reason: 'There is no such version.' })).status).toBe(404);
    const answer = await developer.post(path, { reason: 'The penalty was scaled wrongly.' });
    const solver = solverDetailSchema.parse(answer.body);
    expect(solver.versions[1]).toMatchObject({ state: 'withdrawn', withdrawnReason: 'The penalty was scaled wrongly.' });
    expect(solver.current.n).toBe(1);
    expect((await developer.post(path, { reason: 'The penalty was scaled wrongly.' })).status).toBe(409);
  });

  it('lists by method and group, page by page', async () => {
    await developer.post('/api/v1/solvers', request({ name: 'Conjugate gradients', configuration: { method: 'cgls', parameters: {}, rule: { key: 'discrepancy', safetyFactor: 1.1 } } }));
    const byMethod = solverListSchema.parse((await app.visitor.get('/api/v1/solvers?method=cgls')).body);
    expect(byMethod.items.map((solver) => solver.slug)).toEqual(['conjugate-gradients']);
    const seen: string[] = [];
    let cursor: string | null = '';
    while (cursor !== null) {
      const page = solverListSchema.parse((await app.visitor.get(`/api/v1/solvers?group=${group}&limit=1${cursor === '' ? '' : `&cursor=${cursor}`}`)).body);
      seen.push(...page.items.map((solver) => solver.slug));
      cursor = page.nextCursor;
    }
    expect(seen).toEqual(['conjugate-gradients', 'secret-draft', 'tikhonov-gradient']);
    expect((await app.visitor.get('/api/v1/solvers?cursor=nonsense')).status).toBe(400);
  });
});
