import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { groupPageSchema, invitationListSchema, memberListSchema } from '../../../shared/contracts/group.ts';
import { outboxPageSchema } from '../../../shared/contracts/outbox.ts';
import { sessionSchema } from '../../../shared/contracts/session.ts';
import type { HttpClient } from '../../support/http-client.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

const dayMs = 24 * 60 * 60 * 1000;
let app: TestApp;
let owner: HttpClient;
let member: HttpClient;
let administrator: HttpClient;
beforeAll(async () => {
  app = await startTestApp();
  owner = await app.signInAs('owner-demo');
  member = await app.signInAs('member-demo');
  administrator = await app.signInAs('admin-demo');
});
afterAll(() => app.stop());

/** The newest message to the address, as the administrator reads it in the outbox. */
async function mailTo(address: string): Promise<string> {
  await app.deps.mailer.deliver();
  const page = outboxPageSchema.parse((await administrator.get('/api/v1/admin/outbox')).body);
  expect(page.delivers).toBe(false);
  const message = page.items.find((candidate) => candidate.recipient === address);
  expect(message?.state).toBe('kept');
  return message?.text ?? '';
}
const tokenIn = (text: string): string => /#invitation=([\w-]+)/.exec(text)?.[1] ?? '';

describe('a group', () => {
  it('is made by a member, who owns it, under an address of its own', async () => {
    const made = await owner.post('/api/v1/groups', { name: 'Holm Reference Methods', description: 'Reference solvers.' });
    expect(made.status).toBe(201);
    expect(made.headers.get('location')).toBe('/api/v1/groups/holm-reference-methods');
    expect(made.body).toMatchObject({ slug: 'holm-reference-methods', memberCount: 1, yourRoles: ['owner'] });
    const again = await owner.post('/api/v1/groups', { name: 'Holm Reference Methods' });
    expect(again.body).toMatchObject({ slug: 'holm-reference-methods-2' });
    const taken = await owner.post('/api/v1/groups', { name: 'Other', slug: 'holm-reference-methods' });
    expect(taken.status).toBe(409);
    expect(taken.body).toMatchObject({ code: 'duplicate', issues: [{ path: ['slug'] }] });
  });

  it('shows members to members only, and never an address', async () => {
    const { slug } = await app.group('Members only', { 'owner-demo': ['owner'], 'developer-demo': ['developer', 'observer'] });
    const answer = await owner.get(`/api/v1/groups/${slug}/members`);
    const list = memberListSchema.parse(answer.body);
    expect(list.items.map(({ handle, roles, you }) => [handle, roles, you])).toEqual([
      ['developer-demo', ['developer', 'observer'], false],
      ['owner-demo', ['owner'], true],
    ]);
    expect(answer.text).not.toContain('@');
    expect((await member.get(`/api/v1/groups/${slug}/members`)).status).toBe(403);
    expect((await app.visitor.get(`/api/v1/groups/${slug}`)).body).toMatchObject({ memberCount: 2, yourRoles: [] });
  });

  it('keeps an owner: the last one can neither be demoted, removed, leave nor close the account', async () => {
    const { slug } = await app.group('One owner', { 'owner-demo': ['owner'], 'developer-demo': ['developer'] });
    const base = `/api/v1/groups/${slug}`;
    expect((await owner.put(`${base}/members/owner-demo`, { roles: ['curator'] })).body).toMatchObject({ code: 'conflict' });
    expect((await owner.delete(`${base}/members/owner-demo`)).status).toBe(409);
    expect((await owner.delete(`${base}/membership`)).status).toBe(409);
    expect((await owner.delete('/api/v1/account', { handle: 'owner-demo' })).status).toBe(409);
    expect((await owner.put(`${base}/members/developer-demo`, { roles: [] })).status).toBe(422);
    expect((await owner.put(`${base}/members/developer-demo`, { roles: ['owner', 'developer'] })).status).toBe(200);
    // With a second owner the first may go.
    expect((await owner.put(`${base}/members/owner-demo`, { roles: ['curator'] })).status).toBe(200);
    expect((await owner.patch(base, { name: 'Renamed' })).status).toBe(403);
    expect((await owner.put(`${base}/members/nobody-here`, { roles: ['owner'] })).status).toBe(403);
  });

  it('changes a session at once when roles change', async () => {
    const { slug, id } = await app.group('Roles now', { 'owner-demo': ['owner'], 'member-demo': ['observer'] });
    await owner.put(`/api/v1/groups/${slug}/members/member-demo`, { roles: ['curator'] });
    const session = sessionSchema.parse((await member.get('/api/v1/session')).body);
    expect(session.account?.groups.find((group) => group.id === id)?.roles).toEqual(['curator']);
  });

  it('is listed in pages that do not overlap', async () => {
    for (let i = 0; i < 5; i += 1) await app.group(`Paged ${i}`, { 'owner-demo': ['owner'] });
    const seen: string[] = [];
    let cursor: string | null = '';
    while (cursor !== null) {
      const page: { items: { slug: string }[]; nextCursor: string | null } = groupPageSchema.parse(
        (await app.visitor.get(`/api/v1/groups?limit=2${cursor === '' ? '' : `&cursor=${cursor}`}`)).body,
      );
      seen.push(...page.items.map((group) => group.slug));
      cursor = page.nextCursor;
    }
    expect(new Set(seen).size).toBe(seen.length);
    expect(seen.filter((slug) => slug.startsWith('paged-'))).toHaveLength(5);
    const found = groupPageSchema.parse((await app.visitor.get('/api/v1/groups?q=paged')).body);
    expect(found.items).toHaveLength(5);
  });
});

describe('an invitation', () => {
  it('goes by e-mail, is accepted once, and leaves a trace', async () => {
    const { slug } = await app.group('Inviting', { 'owner-demo': ['owner'] });
    const sent = await owner.post(`/api/v1/groups/${slug}/invitations`, { email: 'New@Group.Example', roles: ['developer', 'observer'] });
    expect(sent.status).toBe(201);
    expect(sent.text).not.toMatch(/token/i);
    const token = tokenIn(await mailTo('new@group.example'));
    expect(token).toMatch(/^[\w-]{32}$/);
    expect((await app.visitor.post('/api/v1/invitations/preview', { token })).body).toMatchObject({
      group: { slug, name: 'Inviting' },
      roles: ['developer', 'observer'],
      invitedBy: { handle: 'owner-demo' },
      state: 'open',
    });
    expect((await member.post('/api/v1/invitations/acceptance', { token })).status).toBe(200);
    expect((await member.get(`/api/v1/groups/${slug}`)).body).toMatchObject({ memberCount: 2, yourRoles: ['developer', 'observer'] });
    const twice = await (await app.signInAs('curator-demo')).post('/api/v1/invitations/acceptance', { token });
    expect(twice.status).toBe(409);
    const trail = await administrator.get('/api/v1/admin/audit?action=group.member-added&actor=member-demo');
    expect(trail.body).toMatchObject({ items: [{ actor: 'member-demo', after: { roles: ['developer', 'observer'] } }] });
  });

  it('stops working when it is revoked, sent again or 14 days old', async () => {
    const { slug } = await app.group('Stopping', { 'owner-demo': ['owner'] });
    const invitations = `/api/v1/groups/${slug}/invitations`;
    const invite = async (email: string) => {
      const { id } = (await owner.post(invitations, { email, roles: ['observer'] })).body as { id: string };
      return { id, token: tokenIn(await mailTo(email)) };
    };
    const accept = async (token: string) => (await member.post('/api/v1/invitations/acceptance', { token })).status;

    const revoked = await invite('revoked@group.example');
    expect((await owner.delete(`${invitations}/${revoked.id}`)).status).toBe(204);
    expect(await accept(revoked.token)).toBe(409);

    const resent = await invite('resent@group.example');
    expect((await owner.post(`${invitations}/${resent.id}/sending`)).status).toBe(200);
    expect(await accept(resent.token)).toBe(404);
    const fresh = tokenIn(await mailTo('resent@group.example'));
    expect(fresh).not.toBe(resent.token);

    const old = await invite('old@group.example');
    app.advance(14 * dayMs + 1000);
    // Sessions last as long, so they are over too.
    owner = await app.signInAs('owner-demo');
    member = await app.signInAs('member-demo');
    expect(await accept(old.token)).toBe(409);
    const list = invitationListSchema.parse((await owner.get(invitations)).body);
    expect(list.items.find(({ email }) => email === 'old@group.example')?.state).toBe('expired');
  });

  it('refuses an address without a dot after the @, with the field named', async () => {
    const { slug } = await app.group('Addresses', { 'owner-demo': ['owner'] });
    const answer = await owner.post(`/api/v1/groups/${slug}/invitations`, { email: 'developer-19@birchwater', roles: ['developer'] });
    expect(answer.status).toBe(422);
    expect(answer.body).toMatchObject({ issues: [{ path: ['email'] }] });
  });
});
