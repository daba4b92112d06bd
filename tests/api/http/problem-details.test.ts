import { NotFoundError, UniqueConstraintViolationException } from '@mikro-orm/core';
import { MulterError } from 'multer';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { z } from 'zod';
import { toAppError } from '../../../api/http/problem-details.ts';
import { problemSchema } from '../../../shared/contracts/problem.ts';
import { AppError, errorTable, type ErrorCode } from '../../../shared/errors.ts';
import type { Answer, HttpClient } from '../../support/http-client.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
let member: HttpClient;
beforeAll(async () => {
  app = await startTestApp();
  member = await app.signInAs('member-demo');
});
afterAll(() => app.stop());

function problemOf(answer: Answer) {
  expect(answer.headers.get('content-type')).toMatch(/^application\/problem\+json/);
  const problem = problemSchema.parse(answer.body);
  expect(problem.status).toBe(answer.status);
  expect(problem.requestId).toBe(answer.headers.get('x-request-id'));
  expect(problem.title).toBe(errorTable[problem.code].title);
  return problem;
}

describe('problem details over HTTP', () => {
  it('names each faulty field of a body by its path', async () => {
    const problem = problemOf(await member.post('/api/v1/groups', { name: 'ab', slug: 'Not A Slug', extra: 1 }));
    expect(problem.code).toBe('validation-failed');
    const places = problem.issues?.map((issue) => issue.path.join('.')) ?? [];
    expect(places).toEqual(expect.arrayContaining(['name', 'slug']));
    // The unknown key is refused too: requests are strict.
    expect(problem.issues?.some((issue) => issue.message.includes('extra'))).toBe(true);
  });

  it.each(['?limit=', '?limit=0', '?limit=201', '?limit=1e3', '?unknown=1', '?cursor=a&cursor=b'])('refuses the query %s', async (query) => {
    expect(problemOf(await member.get(`/api/v1/groups${query}`)).code).toBe('validation-failed');
  });

  it('refuses a cursor that no list gave', async () => {
    expect(problemOf(await member.get('/api/v1/groups?cursor=zzz')).code).toBe('bad-request');
  });

  it('answers broken JSON, a body too large and an unknown address', async () => {
    const broken = await fetch(`${app.url}/api/v1/groups`, {
      method: 'POST',
      body: '{"name":',
      headers: { 'content-type': 'application/json', authorization: 'Bearer none' },
    });
    expect(broken.status).toBe(401);
    const cookie = [...member.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
    const asMember = { 'content-type': 'application/json', origin: app.url, cookie };
    const again = await fetch(`${app.url}/api/v1/groups`, { method: 'POST', body: '{"name":', headers: asMember });
    expect(problemSchema.parse(await again.json())).toMatchObject({ code: 'bad-request', status: 400 });
    const large = await fetch(`${app.url}/api/v1/groups`, { method: 'POST', body: JSON.stringify({ name: 'x'.repeat(1_100_000) }), headers: asMember });
    expect(problemSchema.parse(await large.json())).toMatchObject({ code: 'too-large', status: 413 });
    expect(problemOf(await member.get('/api/v1/nothing/here')).code).toBe('not-found');
    expect(problemOf(await member.get('/api/nothing')).code).toBe('not-found');
    expect(problemOf(await member.get('/api/v1/groups/%E0%A4%A')).code).toBe('bad-request');
  });

  it('asks a visitor to sign in and names the scheme', async () => {
    const answer = await app.visitor.post('/api/v1/groups', { name: 'A group' });
    expect(problemOf(answer).code).toBe('not-signed-in');
    expect(answer.headers.get('www-authenticate')).toMatch(/^Bearer/);
  });

  it('does not repeat the query in the problem', async () => {
    expect(problemOf(await member.get('/api/v1/groups?cursor=secret-thing')).instance).toBe('/api/v1/groups');
  });

  it('gives a constant body for a fault of the server, and writes its cause down', async () => {
    const failing = await startTestApp({
      dependencies: {
        rng: () => {
          throw new Error('the dice fell off the table');
        },
      },
    });
    try {
      // The stand-in needs the generator as well, so the account comes by a token made beforehand.
      const client = await failing.tokenFor('owner-demo');
      await failing.group('A group', { 'owner-demo': ['owner'] });
      const answer = await client.get('/api/v1/health');
      expect(answer.status).toBe(200);
      const start = await failing.visitor.get('/auth/github?login=member-demo');
      const broken = await failing.visitor.get(new URL(start.headers.get('location') ?? '', failing.url).href);
      const problem = problemOf(broken);
      expect(problem).toMatchObject({ code: 'internal', status: 500 });
      expect(broken.text).not.toContain('dice');
      expect(failing.log()).toContain('the dice fell off the table');
      expect(failing.log()).toContain(problem.requestId);
    } finally {
      await failing.stop();
    }
  });
});

describe('what each error becomes', () => {
  const cases: [string, unknown, ErrorCode][] = [
    ...Object.keys(errorTable).map((code): [string, unknown, ErrorCode] => [`AppError ${code}`, new AppError(code as ErrorCode, 'x'), code as ErrorCode]),
    ['ZodError', z.strictObject({ a: z.string() }).safeParse({}).error, 'validation-failed'],
    ['Multer: too large', new MulterError('LIMIT_FILE_SIZE', 'file'), 'too-large'],
    ['Multer: unexpected file', new MulterError('LIMIT_UNEXPECTED_FILE', 'other'), 'file-rejected'],
    ['Multer: too many parts', new MulterError('LIMIT_PART_COUNT'), 'bad-request'],
    ['ORM: not found', new NotFoundError('x'), 'not-found'],
    ['ORM: unique', new UniqueConstraintViolationException(new Error('UNIQUE constraint failed')), 'duplicate'],
    ['body parser', Object.assign(new Error('x'), { status: 400 }), 'bad-request'],
    ['body parser: too large', Object.assign(new Error('x'), { status: 413 }), 'too-large'],
    ['anything else', new Error('secret text'), 'internal'],
    ['not even an error', 'text', 'internal'],
  ];
  it.each(cases)('%s', (_name, error, code) => {
    expect(toAppError(error).code).toBe(code);
  });
  it('keeps the text of an unknown error out of the answer', () => {
    expect(toAppError(new Error('secret text')).detail).not.toContain('secret');
  });
});
