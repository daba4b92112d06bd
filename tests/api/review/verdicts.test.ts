import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { AuditEntryEntity } from '../../../api/entities/audit-entry.ts';
import { OutboxMessageEntity } from '../../../api/entities/outbox-message.ts';
import { commentListSchema, commentSchema, reviewCountSchema, reviewQueueSchema, runDetailSchema } from '../../../shared/contracts/runs.ts';
import { recentVerdictsSchema } from '../../../shared/contracts/site.ts';
import type { HttpClient } from '../../support/http-client.ts';
import { makeBench, type MadeBench } from '../../support/registry-fixture.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
let bench: MadeBench;
let reviewer: HttpClient;
let insider: HttpClient;
let developer: HttpClient;
let member: HttpClient;
const runs = (): readonly string[] => bench.entries.flatMap((entry) => entry.runs);
const inspected = ['table', 'images', 'checks', 'provenance'];
const reason = 'The table is right and the worst draws are explained.';

beforeAll(async () => {
  app = await startTestApp();
  bench = await makeBench(app, {
    title: 'Review bench', phantoms: 4, ladder: [0.01, 0.1], draws: 4, trivial: { 'relative-l2-error': 1 },
    entries: [{ solver: 'Reviewed', figures: ({ noise, draw, phantom }) => ({ 'relative-l2-error': 10 * noise * (1 + 0.01 * draw) * (1 + phantom) }) }],
  });
  reviewer = await app.signInAs('reviewer-demo');
  developer = await app.signInAs('developer-demo');
  member = await app.signInAs('member-demo');
  insider = await app.signInAs('reviewing-developer', ['reviewer']);
  await app.group('Elsewhere', { 'owner-demo': ['owner'] });
  const { addMember } = await import('../../../api/services/groups/change-group.ts');
  const { GroupEntity } = await import('../../../api/entities/group.ts');
  const em = app.orm.em.fork();
  const user = await app.account('reviewing-developer');
  const group = await em.findOneOrFail(GroupEntity, { slug: 'holm-reference-methods' });
  const { UserEntity } = await import('../../../api/entities/user.ts');
  await addMember(em, { actor: { id: user.id, handle: user.handle, siteRoles: [], groups: {} }, now: new Date() }, group, await em.findOneOrFail(UserEntity, user.id), ['observer']);
});
afterAll(() => app.stop());

const verdict = (client: HttpClient, run: string, body: object) => client.post(`/api/v1/runs/${run}/verdicts`, { reason, inspected, ...body });

describe('review queue', () => {
  it('lists what waits, the longest wait first, with the readings a reviewer needs', async () => {
    const queue = reviewQueueSchema.parse((await reviewer.get('/api/v1/review')).body);
    expect(queue.runs.map((run) => run.id)).toEqual(runs());
    expect(queue.runs.every((run) => run.mayReview)).toBe(true);
    const [first] = queue.runs;
    // Formula of the fixture: draws 0 to 3 at noise 0.01 on the first phantom; their median lies between the middle two.
    expect(first!.levels[0]!.median).toBeCloseTo(0.1 * 1.015, 12);
    expect(first).toMatchObject({ metric: 'relative-l2-error', trivial: 1, waitsFor: 'reviewer', lastNote: null });
    expect(reviewCountSchema.parse((await reviewer.get('/api/v1/review/count')).body).waiting).toBe(4);
  });

  it('is for reviewers, and a reviewer of the group may look but not review', async () => {
    expect((await app.visitor.get('/api/v1/review')).status).toBe(401);
    expect((await developer.get('/api/v1/review')).status).toBe(403);
    const queue = reviewQueueSchema.parse((await insider.get('/api/v1/review')).body);
    expect(queue.runs.some((run) => run.mayReview)).toBe(false);
    expect(reviewCountSchema.parse((await insider.get('/api/v1/review/count')).body).waiting).toBe(0);
  });
});

describe('verdicts', () => {
  it('refuses everybody who may not', async () => {
    const [run] = runs();
    expect((await verdict(app.visitor, run!, { verdict: 'signed-off' })).status).toBe(401);
    expect((await verdict(member, run!, { verdict: 'signed-off' })).status).toBe(403);
    expect((await verdict(developer, run!, { verdict: 'signed-off' })).status).toBe(403);
    expect((await verdict(insider, run!, { verdict: 'signed-off' })).status).toBe(403);
    expect((await verdict(reviewer, 'RN-999', { verdict: 'signed-off' })).status).toBe(404);
  });

  it('asks for a written reason and for all that is to be inspected', async () => {
    const [run] = runs();
    expect((await verdict(reviewer, run!, { verdict: 'signed-off', reason: 'ok' })).status).toBe(422);
    const half = await verdict(reviewer, run!, { verdict: 'signed-off', inspected: ['table'] });
    expect(half.status).toBe(422);
    expect((half.body as { issues: { path: string[] }[] }).issues[0]!.path).toEqual(['inspected']);
  });

  it('signs off: the run says so, the group gets a letter, the trail an entry', async () => {
    const [run] = runs();
    const answer = await verdict(reviewer, run!, { verdict: 'signed-off' });
    expect(answer.status).toBe(201);
    const shown = runDetailSchema.parse(answer.body);
    expect(shown).toMatchObject({ review: 'signed-off', reservation: null, reviewer: { handle: 'reviewer-demo' }, may: { review: false } });
    expect(shown.verdicts).toHaveLength(1);
    expect(shown.verdicts[0]).toMatchObject({ verdict: 'signed-off', reason, inspected });
    await app.deps.mailer.deliver();
    const em = app.orm.em.fork();
    const letters = await em.find(OutboxMessageEntity, { kind: 'verdict' });
    expect(letters.map((letter) => letter.recipient).sort()).toEqual(['developer-demo@hadamark.example', 'owner-demo@hadamark.example']);
    expect(letters[0]).toMatchObject({ state: 'kept', subject: `${run} was signed off: Reviewed on Review bench phantom 1` });
    expect(letters[0]!.text).toContain(reason);
    expect(letters[0]!.text).toContain(`/runs/${run}`);
    expect(await em.findOneOrFail(AuditEntryEntity, { action: 'run.signed-off', subjectId: run })).toMatchObject({ actorHandle: 'reviewer-demo', detail: reason, before: { review: 'unreviewed' } });
    expect((await verdict(reviewer, run!, { verdict: 'declined' })).status).toBe(409);
    const recent = recentVerdictsSchema.parse((await app.visitor.get('/api/v1/recent-verdicts')).body);
    expect(recent.items[0]).toMatchObject({ run, solver: 'Reviewed', by: { handle: 'reviewer-demo' } });
  });

  it('keeps the words of a reservation on the run', async () => {
    const run = runs()[1]!;
    const words = 'Read it up to a noise of 1 % only.';
    const shown = runDetailSchema.parse((await verdict(reviewer, run, { verdict: 'signed-off-with-reservation', reason: words })).body);
    expect(shown).toMatchObject({ review: 'signed-off-with-reservation', reservation: words });
    const ranking = await app.visitor.get(`/api/v1/benches/${bench.slug}/ranking?noise=0.01`);
    expect((ranking.body as { rows: { reservations: string[] }[] }).rows[0]!.reservations).toEqual([words]);
  });

  it('returns and declines with their consequences', async () => {
    const [, , third, fourth] = runs();
    expect((await verdict(reviewer, third!, { verdict: 'returned' })).body).toMatchObject({ review: 'returned', reservation: null });
    expect((await verdict(reviewer, fourth!, { verdict: 'declined' })).body).toMatchObject({ review: 'declined' });
    const ranking = (await app.visitor.get(`/api/v1/benches/${bench.slug}/ranking?noise=0.01`)).body as { rows: { complete: boolean; rank: number | null; median: number; review: string }[] };
    // The declined run left: three phantoms count, and the row has no rank without the fourth.
    expect(ranking.rows[0]).toMatchObject({ complete: false, rank: null, review: 'returned' });
    const values = [1, 2, 3].flatMap((phantom) => [0, 1, 2, 3].map((draw) => 0.1 * (1 + 0.01 * draw) * phantom)).sort((a, b) => a - b);
    expect(ranking.rows[0]!.median).toBeCloseTo((values[5]! + values[6]!) / 2, 12);
    expect(reviewCountSchema.parse((await reviewer.get('/api/v1/review/count')).body).waiting).toBe(0);
  });
});

describe('taking a run up', () => {
  it('keeps others from starting on it until it is given back', async () => {
    const more = await makeBench(app, {
      title: 'Taken bench', phantoms: 1, ladder: [0.01], draws: 2, entries: [{ solver: 'Taken', figures: () => ({ 'relative-l2-error': 0.5 }) }, { solver: 'Queued', figures: () => ({}), state: 'queued' }],
    });
    const run = more.entries[0]!.runs[0]!;
    const second = await app.signInAs('second-reviewer-demo');
    expect((await reviewer.post(`/api/v1/runs/${run}/review`)).body).toMatchObject({ review: 'in-review', reviewer: { handle: 'reviewer-demo' } });
    expect((await reviewer.post(`/api/v1/runs/${run}/review`)).status).toBe(200);
    expect((await second.post(`/api/v1/runs/${run}/review`)).status).toBe(409);
    expect((await verdict(second, run, { verdict: 'signed-off' })).status).toBe(409);
    expect((await insider.post(`/api/v1/runs/${run}/review`)).status).toBe(403);
    expect((await reviewer.delete(`/api/v1/runs/${run}/review`)).body).toMatchObject({ review: 'unreviewed', reviewer: null });
    expect((await reviewer.delete(`/api/v1/runs/${run}/review`)).status).toBe(409);
    expect((await verdict(second, run, { verdict: 'signed-off' })).status).toBe(201);
    expect((await reviewer.post(`/api/v1/runs/${more.entries[1]!.runs[0]!}/review`)).status).toBe(409);
  });
});

describe('comments', () => {
  it('are answered by a later one of the other side', async () => {
    const more = await makeBench(app, { title: 'Thread bench', phantoms: 1, ladder: [0.01], draws: 2, entries: [{ solver: 'Discussed', figures: () => ({ 'relative-l2-error': 0.5 }) }] });
    const run = more.entries[0]!.runs[0]!;
    const path = `/api/v1/runs/${run}/comments`;
    expect((await app.visitor.post(path, { text: 'Hello' })).status).toBe(401);
    expect((await reviewer.post(path, { text: ' ' })).status).toBe(422);
    await reviewer.post(path, { text: 'Is draw 2 the seed?', anchor: 'level 1, draw 2', question: true });
    await reviewer.post(path, { text: 'I mean the second one.' });
    const open = reviewQueueSchema.parse((await reviewer.get('/api/v1/review')).body).runs.find((row) => row.id === run)!;
    expect(open).toMatchObject({ waitsFor: 'developer', lastNote: { by: { handle: 'reviewer-demo' }, text: 'I mean the second one.' } });
    expect((await app.visitor.get(`/api/v1/runs/${run}`)).body).toMatchObject({ openQuestions: 1 });
    const added = commentSchema.parse((await developer.post(path, { text: 'Yes: it comes back with the same seed.' })).body);
    expect(added).toMatchObject({ by: { handle: 'developer-demo' }, question: false });
    const thread = commentListSchema.parse((await app.visitor.get(path)).body);
    expect(thread.items.map(({ by, question, answered }) => [by.handle, question, answered])).toEqual([['reviewer-demo', true, true], ['reviewer-demo', false, false], ['developer-demo', false, false]]);
    expect(thread.items[0]!.anchor).toBe('level 1, draw 2');
    await app.deps.mailer.deliver();
    const letters = await app.orm.em.fork().find(OutboxMessageEntity, { kind: 'note', subject: { $like: `Question on ${run}%` } });
    expect(letters.map((letter) => letter.recipient).sort()).toEqual(['developer-demo@hadamark.example', 'owner-demo@hadamark.example']);
  });
});
