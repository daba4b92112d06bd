import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createApp } from '../../../api/app.ts';
import { readEnv } from '../../../api/env.ts';
import { SessionEntity } from '../../../api/entities/session.ts';
import { localPath } from '../../../api/sign-in/local-path.ts';
import { localStandIn } from '../../../api/sign-in/local-stand-in.ts';
import { sessionSchema } from '../../../shared/contracts/session.ts';
import { HttpClient } from '../../support/http-client.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.stop());

const sessionOf = async (client: HttpClient) => sessionSchema.parse((await client.get('/api/v1/session')).body);

describe('sign-in through the local stand-in', () => {
  it('goes over the OAuth redirects of the provider and comes back to the page it left', async () => {
    const client = new HttpClient(app.url);
    const start = await client.get('/auth/github?returnTo=/benches%3Fnoise%3D0.01');
    expect(start.status).toBe(302);
    const authorize = new URL(start.headers.get('location') ?? '', app.url);
    expect(authorize.pathname).toBe('/local-github/login/oauth/authorize');
    expect(Object.fromEntries(authorize.searchParams)).toMatchObject({ response_type: 'code', scope: 'user:email', redirect_uri: `${app.url}/auth/github/callback` });
    expect(authorize.searchParams.get('state')).toMatch(/^.{20,}$/);

    const page = await client.get(`${authorize.pathname}${authorize.search}`);
    expect(page.text).toContain('Local stand-in: this machine only');
    expect(page.headers.get('content-security-policy')).toContain("script-src 'self'");
    expect(page.text).not.toMatch(/<script|<style|style=/);
    const href = /href="([^"]+)" aria-label="Sign in as curator-demo"/.exec(page.text)?.[1]?.replaceAll('&amp;', '&') ?? '';
    const chosen = await client.get(href);
    expect(chosen.status).toBe(302);
    const done = await client.get(chosen.headers.get('location') ?? '');
    expect(done.status).toBe(303);
    expect(done.headers.get('location')).toBe('/benches?noise=0.01');
    expect((await sessionOf(client)).account).toMatchObject({ handle: 'curator-demo', siteRoles: ['member'] });
  });

  it('gives site roles to the accounts that stand for them', async () => {
    expect((await sessionOf(await app.signInAs('reviewer-demo'))).account?.siteRoles).toEqual(['member', 'reviewer']);
    expect((await sessionOf(await app.signInAs('admin-demo'))).account?.siteRoles).toEqual(['member', 'administrator']);
  });

  it('renews the session id at sign-in, so that an id known before opens nothing', async () => {
    const client = new HttpClient(app.url);
    await client.get('/auth/github?login=member-demo');
    const before = client.cookies.get('hadamark.sid');
    expect(before).toBeDefined();
    await client.get('/auth/github?login=member-demo', { follow: true });
    expect(client.cookies.get('hadamark.sid')).not.toBe(before);
    const fixed = new HttpClient(app.url);
    fixed.cookies.set('hadamark.sid', before ?? '');
    expect((await sessionOf(fixed)).account).toBeNull();
  });

  it('sets a cookie that scripts cannot read and other sites do not send', async () => {
    const answer = await new HttpClient(app.url).get('/auth/github');
    expect(answer.headers.get('set-cookie')).toMatch(/HttpOnly; SameSite=Lax/);
  });

  it('gives no cookie to a visitor who only reads', async () => {
    const client = new HttpClient(app.url);
    await client.get('/api/v1/session');
    expect(client.cookies.size).toBe(0);
  });

  it('refuses a callback whose state this browser did not start', async () => {
    const attacker = new HttpClient(app.url);
    const start = await attacker.get('/auth/github?login=member-demo');
    const granted = await attacker.get(start.headers.get('location') ?? '');
    const victim = new HttpClient(app.url);
    await victim.get('/auth/github?login=member-demo');
    const back = await victim.get(granted.headers.get('location') ?? '');
    expect(back.headers.get('location')).toBe('/sign-in?failed=expired&returnTo=%2F');
    expect((await sessionOf(victim)).account).toBeNull();
  });

  it('says so when the reader refuses at the provider', async () => {
    const client = new HttpClient(app.url);
    await client.get('/auth/github?returnTo=/runs/RN-001');
    const back = await client.get('/auth/github/callback?error=access_denied&error_description=No');
    expect(back.headers.get('location')).toBe('/sign-in?failed=denied&returnTo=%2Fruns%2FRN-001');
  });

  it('takes a code once only', async () => {
    const client = new HttpClient(app.url);
    const start = await client.get('/auth/github?login=member-demo');
    const granted = await client.get(start.headers.get('location') ?? '');
    const callback = new URL(granted.headers.get('location') ?? '');
    const swap = async () => {
      const answer = await fetch(`${app.url}/local-github/login/oauth/access_token`, {
        method: 'POST',
        body: new URLSearchParams({ code: callback.searchParams.get('code') ?? '', client_id: 'local-stand-in', client_secret: 'wrong', redirect_uri: `${app.url}/auth/github/callback` }),
      });
      return (await answer.json()) as object;
    };
    expect(await swap()).toMatchObject({ error: 'bad_verification_code' });
    // Spent by the failed attempt: the right secret does not get it any more.
    const back = await client.get(`${callback.pathname}${callback.search}`);
    expect(back.headers.get('location')).toContain('/sign-in?failed=unavailable');
  });

  it('refuses another site as the place to send the code', async () => {
    const answer = await app.visitor.get('/local-github/login/oauth/authorize?client_id=local-stand-in&redirect_uri=http://elsewhere.example/&state=x');
    expect(answer.status).toBe(400);
  });

  it('signs out and forgets the session', async () => {
    const client = await app.signInAs('member-demo');
    const cookie = client.cookies.get('hadamark.sid') ?? '';
    expect((await client.delete('/api/v1/session')).status).toBe(204);
    expect(client.cookies.size).toBe(0);
    const again = new HttpClient(app.url);
    again.cookies.set('hadamark.sid', cookie);
    expect((await sessionOf(again)).account).toBeNull();
  });

  it('stores session ids hashed', async () => {
    const client = await app.signInAs('member-demo');
    const sid = decodeURIComponent(client.cookies.get('hadamark.sid') ?? '').replace(/^s:/, '').split('.')[0] ?? '';
    const rows = await app.orm.em.fork().find(SessionEntity, {});
    expect(rows.length).toBeGreaterThan(0);
    expect(JSON.stringify(rows.map(({ id, data }) => [id, data]))).not.toContain(sid);
  });
});

describe('the stand-in in production', () => {
  const production = {
    NODE_ENV: 'production',
    PUBLIC_URL: 'https://registry.example',
    SESSION_SECRET: 'a'.repeat(40),
    GITHUB_CLIENT_ID: 'id',
    GITHUB_CLIENT_SECRET: 'secret',
  };

  it('is refused by the environment, by the app and by itself', () => {
    expect(() => readEnv({ ...production, GITHUB_CLIENT_ID: '' })).toThrow(/GITHUB_CLIENT_ID.*stand-in.*refused in production/);
    const env = { ...app.deps.env, nodeEnv: 'production' as const };
    expect(() => createApp({ ...app.deps, env })).toThrow(/refused in production/);
    expect(() => localStandIn({ ...app.deps, env })).toThrow(/refused in production/);
  });

  it('does not exist when GitHub is set up', async () => {
    const github = await startTestApp({ env: { GITHUB_CLIENT_ID: 'id', GITHUB_CLIENT_SECRET: 'secret' } });
    try {
      expect((await github.visitor.get('/local-github/login/oauth/authorize?client_id=local-stand-in')).status).toBe(404);
      const session = sessionSchema.parse((await github.visitor.get('/api/v1/session')).body);
      expect(session.signIn.standIn).toBeNull();
      const start = await github.visitor.get('/auth/github');
      const to = new URL(start.headers.get('location') ?? '');
      expect(`${to.origin}${to.pathname}`).toBe('https://github.com/login/oauth/authorize');
      expect(to.searchParams.get('client_id')).toBe('id');
    } finally {
      await github.stop();
    }
  });

  it('asks for secure cookies', async () => {
    const secure = await startTestApp({ env: production });
    try {
      const answer = await secure.visitor.get('/auth/github', { headers: { 'x-forwarded-proto': 'https' } });
      expect(answer.headers.get('set-cookie')).toMatch(/HttpOnly; Secure; SameSite=Lax/);
      expect(answer.headers.get('strict-transport-security')).toContain('max-age=31536000');
    } finally {
      await secure.stop();
    }
  });
});

describe('the path to come back to', () => {
  it.each([
    ['/runs/RN-001?draw=3#cut', '/runs/RN-001?draw=3#cut'],
    ['//elsewhere.example', '/'],
    ['/\\elsewhere.example', '/'],
    ['https://elsewhere.example/', '/'],
    ['/a/..//elsewhere.example', '/'],
    ['javascript:alert(1)', '/'],
    ['/auth/github', '/'],
    ['/api/v1/session', '/'],
    ['/a\r\nSet-Cookie: x=1', '/'],
    [['/a'], '/'],
    [undefined, '/'],
  ])('%j becomes %s', (given, expected) => {
    expect(localPath(given)).toBe(expected);
  });
});
