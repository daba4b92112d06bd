import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ApiTokenEntity } from '../../../api/entities/api-token.ts';
import { tokenListSchema } from '../../../shared/contracts/token.ts';
import { HttpClient } from '../../support/http-client.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

const dayMs = 24 * 60 * 60 * 1000;
let app: TestApp;
let holder: HttpClient;
beforeAll(async () => {
  app = await startTestApp();
  holder = await app.signInAs('developer-demo');
});
afterAll(() => app.stop());

const make = async (body: object = {}) => {
  const answer = await holder.post('/api/v1/account/tokens', { name: 'night-bench', scopes: ['read'], expiresInDays: 30, ...body });
  expect(answer.status).toBe(201);
  return answer.body as { id: string; token: string; prefix: string };
};

describe('a bearer token', () => {
  it('is shown once and stored as a hash', async () => {
    const { token, prefix, id } = await make();
    expect(token).toMatch(/^hmk_[\w-]{32}$/);
    expect(token.startsWith(prefix)).toBe(true);
    const list = await holder.get('/api/v1/account/tokens');
    expect(list.text).not.toContain(token);
    const row = await app.orm.em.fork().findOneOrFail(ApiTokenEntity, { id });
    expect(JSON.stringify({ ...row })).not.toContain(token);
    expect(row.tokenHash).toMatch(/^[0-9a-f]{64}$/);
  });

  it('says when it was last used', async () => {
    const { token, id } = await make();
    const used = async () => tokenListSchema.parse((await holder.get('/api/v1/account/tokens')).body).items.find((item) => item.id === id)?.lastUsedAt;
    expect(await used()).toBeNull();
    await new HttpClient(app.url, token).get('/api/v1/account');
    expect(await used()).not.toBeNull();
  });

  it('acts for its holder within its scopes, and manages nothing', async () => {
    const client = new HttpClient(app.url, (await make()).token);
    expect((await client.get('/api/v1/account')).body).toMatchObject({ handle: 'developer-demo' });
    expect((await client.get('/api/v1/session')).body).toMatchObject({ via: 'token', account: { handle: 'developer-demo' } });
    expect((await client.post('/api/v1/account/tokens', { name: 'more', scopes: ['read'], expiresInDays: 30 })).status).toBe(403);
    expect((await client.post('/api/v1/groups', { name: 'By a token' })).status).toBe(403);
    const other = new HttpClient(app.url, (await make({ scopes: ['write:runs'] })).token);
    expect((await other.get('/api/v1/account')).status).toBe(403);
  });

  it('stops at once when it is revoked, when it expires, and when it is wrong', async () => {
    const { token, id } = await make();
    const client = new HttpClient(app.url, token);
    expect((await client.get('/api/v1/account')).status).toBe(200);
    expect((await (await app.signInAs('curator-demo')).delete(`/api/v1/account/tokens/${id}`)).status).toBe(404);
    expect((await holder.delete(`/api/v1/account/tokens/${id}`)).status).toBe(204);
    expect((await client.get('/api/v1/account')).status).toBe(401);
    // Refused even where nobody need sign in: a script should learn that its token is dead.
    expect((await client.get('/api/v1/health')).status).toBe(401);
    expect((await new HttpClient(app.url, `${token}x`).get('/api/v1/account')).status).toBe(401);
    const short = new HttpClient(app.url, (await make()).token);
    app.advance(30 * dayMs + 1000);
    expect((await short.get('/api/v1/account')).status).toBe(401);
    holder = await app.signInAs('developer-demo');
  });

  it('is refused without a scope, with an unknown one and with another life', async () => {
    for (const body of [{ scopes: [] }, { scopes: ['everything'] }, { scopes: ['read', 'read'] }, { expiresInDays: 1000 }, { name: ' ' }]) {
      const answer = await holder.post('/api/v1/account/tokens', { name: 'x', scopes: ['read'], expiresInDays: 30, ...body });
      expect(answer.status, JSON.stringify(body)).toBe(422);
    }
  });
});
