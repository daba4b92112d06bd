import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { AuditEntryEntity } from '../../../api/entities/audit-entry.ts';
import { OutboxMessageEntity } from '../../../api/entities/outbox-message.ts';
import { RecomputationEntity, RunEntity, RunImageEntity, TrialEntity } from '../../../api/entities/run.ts';
import { SimulationEntity } from '../../../api/entities/simulation.ts';
import { UserEntity } from '../../../api/entities/user.ts';
import { progressSchema, runDetailSchema, type Progress } from '../../../shared/contracts/runs.ts';
import { sha256Hex } from '../../../solvers/core/hash.ts';
import type { HttpClient } from '../../support/http-client.ts';
import { discDefinition, makeBench } from '../../support/registry-fixture.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';
import { seeds } from '../support/faulty-worker.ts';

const ladder = [0.001, 0.01, 0.1];
const draws = 6;
let app: TestApp;
let developer: HttpClient;
let made = 0;

beforeAll(async () => {
  app = await startTestApp({
    env: { WORKERS: '2' },
    jobs: { workerFile: path.join(import.meta.dirname, '../support/faulty-worker.ts'), limits: { sliceMs: 10_000, interactiveMs: 5_000, memoryMb: 64 } },
  });
  developer = await app.signInAs('developer-demo');
});
afterAll(() => app.stop());

/** Queued runs on one phantom, one for each seed. */
async function queue(...wanted: number[]): Promise<string[]> {
  const bench = await makeBench(app, {
    title: `Queue ${++made}`, phantoms: 1, ladder, draws, entries: wanted.map((_, i) => ({ solver: `Queue ${made} solver ${i}`, state: 'queued' as const, figures: () => ({}) })),
  });
  const ids = bench.entries.flatMap((entry) => entry.runs);
  const em = app.orm.em.fork();
  for (const [i, id] of ids.entries()) await em.nativeUpdate(RunEntity, { id }, { seed: wanted[i]! });
  return ids;
}
const runOf = (id: string) => app.orm.em.fork().findOneOrFail(RunEntity, { id });
async function until<T>(look: () => Promise<T | undefined | false>, what: string): Promise<T> {
  for (let i = 0; i < 600; i++) {
    const found = await look();
    if (found) return found;
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
  throw new Error(`waited in vain for ${what}`);
}

describe('the queue', () => {
  it('computes every draw once, keeps two images a level and hashes the result', async () => {
    const [id] = await queue(seeds.plain);
    await app.deps.jobs.start();
    await app.deps.jobs.idle();
    const run = await runOf(id!);
    const trials = await app.orm.em.fork().find(TrialEntity, { run: id }, { orderBy: { level: 'asc', draw: 'asc' } });
    expect(trials.map((trial) => [trial.level, trial.draw])).toEqual(ladder.flatMap((_, level) => Array.from({ length: draws }, (_d, draw) => [level, draw])));
    expect(run).toMatchObject({ state: 'finished', review: 'unreviewed', done: 18, total: 18, trivial: { 'relative-l2-error': 1 } });
    // The definition of the run's hash: SHA-256 over the image hashes, one a line.
    expect(run.resultHash).toBe(sha256Hex(trials.map((trial) => trial.imageHash).join('\n')));
    expect(trials[0]).toMatchObject({ metrics: { 'position-error': null }, reasons: { 'position-error': 'No target.' } });
    // Errors of a level are 0.1 (level + 1) + 0.01 {0, 2, 4, 1, 3, 0}: median 0.015 above, between draws 0 .. 5.
    expect(run.levelMedians.map((value) => Number(value?.toFixed(6)))).toEqual([0.115, 0.215, 0.315]);
    const images = await app.orm.em.fork().find(RunImageEntity, { run: id }, { orderBy: { level: 'asc', draw: 'asc' } });
    // The largest error is that of draw 2; draws 1 (0.02) and 3 (0.01) are equally close to the median 0.015, the first is kept.
    expect(images.map((image) => [image.level, image.draw])).toEqual([[0, 1], [0, 2], [1, 1], [1, 2], [2, 1], [2, 2]]);
    // All images of a level are held until it is complete, and bias and variance are taken from them.
    expect(run.levelMoments?.map((moments) => moments?.draws)).toEqual([draws, draws, draws]);
    const em = app.orm.em.fork();
    expect(await em.count(AuditEntryEntity, { action: 'run.finished', subjectId: id })).toBe(1);
    const mails = await em.find(OutboxMessageEntity, { subject: { $like: `${id} is finished%` } });
    expect(mails.map((mail) => mail.recipient)).toContain('developer-demo@hadamark.example');
  });

  it('fails a run that throws, hangs, eats its memory or is refused, with a reason, and finishes the others', async () => {
    const ids = await queue(seeds.throwsAtLevelOne, seeds.hangsAtLevelOne, seeds.eatsMemoryAtLevelOne, seeds.refusesAtLevelOne, seeds.plain, seeds.plain);
    app.deps.jobs.kick();
    await app.deps.jobs.idle();
    const runs = await Promise.all(ids.map(runOf));
    expect(runs.slice(4).map((run) => run.failure)).toEqual([null, null]);
    expect(runs.map((run) => run.state)).toEqual(['failed', 'failed', 'failed', 'failed', 'finished', 'finished']);
    expect(runs[0]!.failure).toMatch(/^At noise level 1 %, draws? 1.*the factorisation broke down/);
    expect(runs[1]!.failure).toMatch(/did not end within 10 s.*fewer iterations/);
    expect(runs[2]!.failure).toMatch(/more than the 64 MB.*less memory/);
    expect(runs[3]!.failure).toMatch(/The data have 3 values, the problem 2/);
    // What was computed before the fault stays.
    expect(await app.orm.em.fork().count(TrialEntity, { run: ids[0], level: 0 })).toBe(draws);
    expect(await app.orm.em.fork().count(AuditEntryEntity, { action: 'run.failed', subjectId: ids[1] })).toBe(1);
  });

  it('goes on with the draws it has when a failed run is queued again', async () => {
    const [id] = await queue(seeds.throwsAtLevelOne);
    app.deps.jobs.kick();
    await app.deps.jobs.idle();
    const before = await app.orm.em.fork().find(TrialEntity, { run: id });
    await app.orm.em.fork().nativeUpdate(RunEntity, { id }, { seed: seeds.plain });
    const answer = await developer.post(`/api/v1/runs/${id}/requeue`);
    expect(answer.status, answer.text).toBe(200);
    await app.deps.jobs.idle();
    expect(await runOf(id!)).toMatchObject({ state: 'finished', failure: null });
    const after = await app.orm.em.fork().find(TrialEntity, { run: id });
    expect(after).toHaveLength(18);
    expect(before.every((trial) => after.some((later) => later.id === trial.id))).toBe(true);
  });

  it('cancels a run at once and leaves the next one to its work', async () => {
    const [slow, next] = await queue(seeds.slow, seeds.plain);
    app.deps.jobs.kick();
    await until(async () => (await runOf(slow!)).done > 0, 'the first batch');
    const answer = await developer.post(`/api/v1/runs/${slow}/cancel`);
    expect(answer.status, answer.text).toBe(200);
    expect(runDetailSchema.parse(answer.body).state).toBe('cancelled');
    await app.deps.jobs.idle();
    const run = await runOf(slow!);
    expect(run.state).toBe('cancelled');
    expect(run.done).toBeLessThan(18);
    expect(await runOf(next!)).toMatchObject({ state: 'finished' });
    expect((await developer.post(`/api/v1/runs/${slow}/cancel`)).status).toBe(409);
    expect((await developer.post(`/api/v1/runs/${next}/cancel`)).status).toBe(409);
    expect((await developer.post(`/api/v1/runs/${next}/requeue`)).status).toBe(409);
  });

  it('tells progress as events, and tells a page that comes late or comes back the state as it is', async () => {
    const [id] = await queue(seeds.slow);
    app.deps.jobs.kick();
    const first = await readEvents(id!, (progress) => progress.done > 0 && progress.state === 'running');
    expect(first.at(-1)).toMatchObject({ state: 'running', total: 18 });
    // The page is closed and opened again.
    const second = await readEvents(id!, (progress) => progress.state === 'finished');
    expect(second[0]!.done).toBeGreaterThan(0);
    expect(second.at(-1)).toMatchObject({ state: 'finished', done: 18, levelsDone: 3, currentLevel: null });
    const late = await readEvents(id!, () => true);
    expect(late[0]).toMatchObject({ state: 'finished', done: 18 });
    expect((await app.visitor.get('/api/v1/queue')).body).toMatchObject({ queued: 0, running: 0, workers: 2 });
  });

  it('compares a recomputation bit for bit', async () => {
    const [same, other] = await queue(seeds.plain, seeds.drifts);
    app.deps.jobs.kick();
    await app.deps.jobs.idle();
    const em = app.orm.em.fork();
    const by = await em.findOneOrFail(UserEntity, { handle: 'developer-demo' });
    for (const run of [same!, other!]) {
      em.create(RecomputationEntity, {
        run: em.getReference(RunEntity, run), requestedBy: by, state: 'queued', total: 18, codeVersion: null, equal: null, resultHash: null, firstDifference: null, failure: null, startedAt: null, finishedAt: null,
      });
    }
    await em.flush();
    app.deps.jobs.kick();
    await app.deps.jobs.idle();
    const found = async (run: string) => app.orm.em.fork().findOneOrFail(RecomputationEntity, { run });
    expect(await found(same!)).toMatchObject({ state: 'finished', equal: true, done: 18, firstDifference: null, resultHash: (await runOf(same!)).resultHash });
    expect(await found(other!)).toMatchObject({ state: 'finished', equal: false, firstDifference: { level: 0, draw: 0 } });
  });

  it('forgets the draws of other code before it goes on, and takes up what a stopped server left', async () => {
    const [id, fresh] = await queue(seeds.plain, seeds.plain);
    const em = app.orm.em.fork();
    // As an earlier server left them: marked as running, one with a draw of older code.
    await em.nativeUpdate(RunEntity, { id: { $in: [id!, fresh!] } }, { state: 'running', attempts: 1 });
    await em.nativeUpdate(RunEntity, { id }, { codeVersion: '0.0.0+old' });
    em.create(TrialEntity, {
      run: em.getReference(RunEntity, id!), level: 0, draw: 0, metrics: {}, reasons: null, supAt: null, parameter: null, iterations: 0, forwardSolves: 0, stop: 'direct', noiseNorm: 1, seconds: null, imageHash: 'old',
    });
    await em.flush();
    await app.deps.jobs.start();
    await app.deps.jobs.idle();
    for (const run of [id!, fresh!]) expect(await runOf(run)).toMatchObject({ state: 'finished', done: 18 });
    expect(await app.orm.em.fork().count(TrialEntity, { run: id, imageHash: 'old' })).toBe(0);
  });
});

describe('at start', () => {
  it('forgets old previews and keeps what a version uses', async () => {
    await queue(seeds.plain);
    const em = app.orm.em.fork();
    const used = await em.findOneOrFail(SimulationEntity, { codeVersion: 'test' }, { populate: ['frame', 'reference', 'clean', 'truthImage'] });
    const copy = (contentHash: string) =>
      em.create(SimulationEntity, {
        contentHash, codeVersion: 'test', summary: used.summary, modelErrorFloor: 1, noiseScale: 1, checks: null, seconds: 1,
        frame: used.frame.$, reference: used.reference.$, clean: used.clean.$, truthImage: used.truthImage.$,
      });
    copy('old preview');
    copy('new preview');
    await em.flush();
    const old = new Date(Date.now() - 40 * 86_400_000);
    await em.nativeUpdate(SimulationEntity, { contentHash: { $in: ['old preview', used.contentHash] } }, { updatedAt: old });
    await app.deps.jobs.start();
    const left = (await app.orm.em.fork().find(SimulationEntity, {})).map((row) => row.contentHash);
    expect(left).not.toContain('old preview');
    expect(left).toEqual(expect.arrayContaining(['new preview', used.contentHash]));
    await app.deps.jobs.idle();
  });
});

describe('a simulation that goes wrong', () => {
  const truth = (expression: string) => ({ ...discDefinition(0.03), truth: { kind: 'expression', background: 1, expression } });
  it('is refused with a reason when it leaves its time, and told as a fault of the server when it throws', async () => {
    const late = await developer.post('/api/v1/simulations', { definition: truth('x') });
    expect(late.status, late.text).toBe(422);
    expect(late.body).toMatchObject({ code: 'simulation-failed', detail: expect.stringMatching(/did not end within 5 s/) as string });
    const broken = await developer.post('/api/v1/simulations', { definition: truth('1 + x') });
    expect(broken.status).toBe(500);
    // The cause goes to the log, not to the reader.
    expect(broken.text).not.toContain('the mesh broke down');
    expect(app.log()).toContain('the mesh broke down');
  });
});

/** Reads the stream until an event satisfies the condition, as a page does. */
async function readEvents(id: string, enough: (progress: Progress) => boolean): Promise<Progress[]> {
  const stop = new AbortController();
  const response = await fetch(`${app.url}/api/v1/runs/${id}/events`, { signal: stop.signal });
  expect(response.headers.get('content-type')).toMatch(/^text\/event-stream/);
  const seen: Progress[] = [];
  let text = '';
  const decoder = new TextDecoder();
  try {
    for await (const chunk of response.body!) {
      text += decoder.decode(chunk, { stream: true });
      for (let end = text.indexOf('\n\n'); end >= 0; end = text.indexOf('\n\n')) {
        const event = text.slice(0, end);
        text = text.slice(end + 2);
        if (!event.includes('event: progress')) continue;
        seen.push(progressSchema.parse(JSON.parse(/^data: (.*)$/m.exec(event)![1]!)));
        if (enough(seen.at(-1)!)) return seen;
      }
    }
  } finally {
    stop.abort();
  }
  return seen;
}
