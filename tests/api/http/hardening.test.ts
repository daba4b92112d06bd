import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { HttpClient } from '../../support/http-client.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.stop());

describe('requests forged by another site', () => {
  const change = (client: HttpClient, headers: Record<string, string>) => {
    const cookie = [...client.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
    return fetch(`${app.url}/api/v1/groups`, {
      method: 'POST',
      body: JSON.stringify({ name: `Forged ${Math.floor(performance.now() * 1000)}` }),
      headers: { 'content-type': 'application/json', cookie, ...headers },
    });
  };

  it.each([
    ['another origin', { origin: 'https://elsewhere.example' }],
    ['another port of this host', { origin: 'http://127.0.0.1:1' }],
    ['an opaque origin', { origin: 'null' }],
    ['a browser that says cross-site', { 'sec-fetch-site': 'cross-site' }],
    ['a browser that says same-site', { 'sec-fetch-site': 'same-site' }],
    ['a cookie without either header', {}],
  ])('are refused: %s', async (_name, headers) => {
    const answer = await change(await app.signInAs('member-demo'), headers);
    expect(answer.status).toBe(403);
    expect(await answer.json()).toMatchObject({ code: 'origin-refused' });
  });

  it('are not what a page of this site sends', async () => {
    const client = await app.signInAs('member-demo');
    const answer = await change(client, { origin: app.url, 'sec-fetch-site': 'same-origin' });
    expect(answer.status).toBe(201);
  });

  it('cannot ride on a bearer token, which needs no origin', async () => {
    const client = await app.tokenFor('member-demo', ['read']);
    const answer = await fetch(`${app.url}/api/v1/account`, { headers: { authorization: `Bearer ${client.bearer}` } });
    expect(answer.status).toBe(200);
  });
});

describe('rate limits', () => {
  it('answer 429 with problem details and when to come back', async () => {
    const limited = await startTestApp({ env: { RATE_LIMIT: '0.005' } });
    try {
      // 2400 a minute times 0.005.
      const statuses: number[] = [];
      for (let i = 0; i < 13; i += 1) statuses.push((await limited.visitor.get('/api/v1/health')).status);
      expect(statuses.slice(0, 12)).toEqual(Array(12).fill(200));
      const over = await limited.visitor.get('/api/v1/health');
      expect(over.status).toBe(429);
      expect(over.body).toMatchObject({ code: 'too-many-requests' });
      expect(over.headers.get('retry-after')).toBe('60');
    } finally {
      await limited.stop();
    }
  });

  it('count guessed tokens', async () => {
    const limited = await startTestApp({ env: { RATE_LIMIT: '0.001' } });
    try {
      const guess = new HttpClient(limited.url, 'hmk_a-guess-that-is-long-enough');
      expect([(await guess.get('/api/v1/account')).status, (await guess.get('/api/v1/account')).status]).toEqual([401, 401]);
      expect((await guess.get('/api/v1/account')).status).toBe(429);
    } finally {
      await limited.stop();
    }
  });

  it('hold sign-in tighter than reading', async () => {
    const limited = await startTestApp({ env: { RATE_LIMIT: '0.1' } });
    try {
      const statuses: number[] = [];
      for (let i = 0; i < 4; i += 1) statuses.push((await limited.visitor.get('/auth/github')).status);
      expect(statuses).toEqual([302, 302, 302, 429]);
      expect((await limited.visitor.get('/api/v1/health')).status).toBe(200);
    } finally {
      await limited.stop();
    }
  });
});

describe('headers', () => {
  it('forbid scripts and styles that are not files of the site, framing and sniffing', async () => {
    const { headers } = await app.visitor.get('/');
    const policy = headers.get('content-security-policy') ?? '';
    expect(policy).toContain("default-src 'self'");
    expect(policy).toContain("script-src 'self'");
    expect(policy, 'the compiled kernels').toContain("script-src 'self' 'wasm-unsafe-eval'");
    expect(policy).not.toMatch(/script-src[^;]*'unsafe|style-src [^;]*unsafe/);
    expect(policy).toContain("frame-ancestors 'none'");
    expect(headers.get('x-content-type-options')).toBe('nosniff');
    expect(headers.get('x-powered-by')).toBeNull();
  });

  it('keep answers of the API out of shared caches', async () => {
    expect((await app.visitor.get('/api/v1/session')).headers.get('cache-control')).toBe('no-store');
  });
});

describe('the log', () => {
  it('holds no secret: cookies, tokens, codes, states, bodies', async () => {
    const client = await app.signInAs('owner-demo');
    const made = await client.post('/api/v1/account/tokens', { name: 'log-test', scopes: ['read'], expiresInDays: 30 });
    const { token } = made.body as { token: string };
    await new HttpClient(app.url, token).get('/api/v1/account');
    await new HttpClient(app.url, `${token}x`).get('/api/v1/account');
    const start = await client.get('/auth/github?login=owner-demo');
    const authorize = new URL(start.headers.get('location') ?? '', app.url);
    const granted = await client.get(`${authorize.pathname}${authorize.search}`);
    const callback = new URL(granted.headers.get('location') ?? '');
    await client.get(`${callback.pathname}${callback.search}`);
    await client.post('/api/v1/invitations/acceptance', { token: 'a-secret-invitation-token' });

    const log = app.log();
    expect(log).toContain('/auth/github/callback');
    for (const secret of [
      token,
      authorize.searchParams.get('state') ?? '?',
      callback.searchParams.get('code') ?? '?',
      decodeURIComponent(client.cookies.get('hadamark.sid') ?? '?').slice(2, 30),
      'a-secret-invitation-token',
      app.deps.env.sessionSecret,
    ]) {
      expect(secret.length).toBeGreaterThan(10);
      expect(log).not.toContain(secret);
    }
  });
});
