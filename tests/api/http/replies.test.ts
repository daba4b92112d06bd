import { createServer, get, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { Readable } from 'node:stream';
import express, { Router } from 'express';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { z } from 'zod';
import type { Dependencies } from '../../../api/dependencies.ts';
import { defineRawRoute, defineRoute, type Route } from '../../../api/http/define-route.ts';
import { mountRoutes } from '../../../api/http/mount-routes.ts';
import { problemHandler } from '../../../api/http/problem-details.ts';
import { requestLog } from '../../../api/http/request-log.ts';
import { closeEventStreams, type EventStream } from '../../../api/http/server-sent-events.ts';
import { HttpClient } from '../../support/http-client.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

const hash = 'a'.repeat(64);
const streams: EventStream[] = [];
const stopped: string[] = [];
let loads = 0;

/** Routes that use every kind of answer, mounted as the app mounts its own. */
const routes: readonly Route[] = [
  defineRoute({
    method: 'get',
    path: '/version',
    tag: 'test',
    summary: 'Immutable',
    permission: 'public',
    response: z.object({ hash: z.string() }),
    etag: (result) => result.hash,
    handle: () => ({ hash, secret: 'stripped' }),
  }),
  defineRoute({
    method: 'get',
    path: '/outside-its-contract',
    tag: 'test',
    summary: 'Broken',
    permission: 'public',
    response: z.object({ count: z.number().max(1) }),
    handle: () => ({ count: 2 }),
  }),
  defineRoute({
    method: 'post',
    path: '/upload',
    tag: 'test',
    summary: 'Upload',
    permission: 'public',
    file: { field: 'file', maxBytes: 1000, description: 'x' },
    body: z.strictObject({ label: z.string() }),
    response: z.object({ name: z.string(), size: z.int(), label: z.string() }),
    handle: ({ file, body }) => ({ name: file?.name ?? '', size: file?.bytes.length ?? -1, label: body.label }),
  }),
  defineRoute({
    method: 'post',
    path: '/upload-signed-in',
    tag: 'test',
    summary: 'Upload',
    permission: 'array.upload',
    file: { field: 'file', maxBytes: 1000, description: 'x' },
    load: () => {
      loads += 1;
    },
    handle: () => undefined,
  }),
  defineRawRoute({
    method: 'get',
    path: '/table',
    tag: 'test',
    summary: 'Table',
    permission: 'public',
    produces: ['text/csv'],
    handle: () => ({ kind: 'file', contentType: 'text/csv; charset=utf-8', fileName: 'ranking ä.csv', body: 'a,b\r\n', etag: hash }),
  }),
  defineRawRoute({
    method: 'get',
    path: '/bytes',
    tag: 'test',
    summary: 'Bytes',
    permission: 'public',
    produces: ['application/octet-stream'],
    // A view into a larger buffer: only its own bytes may go out.
    handle: () => ({ kind: 'file', contentType: 'application/octet-stream', body: new Uint8Array([0, 1, 2, 3, 4, 5]).subarray(2, 4) }),
  }),
  defineRawRoute({
    method: 'get',
    path: '/flow',
    tag: 'test',
    summary: 'Flow',
    permission: 'public',
    produces: ['text/plain'],
    handle: () => ({ kind: 'file', contentType: 'text/plain', body: Readable.from(['one ', 'two']) }),
  }),
  defineRawRoute({
    method: 'get',
    path: '/progress',
    tag: 'test',
    summary: 'Progress',
    permission: 'public',
    produces: ['text/event-stream'],
    handle: () => ({
      kind: 'events',
      start: (stream) => {
        streams.push(stream);
        stream.send('progress', { done: 1, text: 'two\nlines' }, '7');
        return () => stopped.push('stopped');
      },
    }),
  }),
];

let app: TestApp;
let server: Server;
let client: HttpClient;
beforeAll(async () => {
  app = await startTestApp();
  const deps: Dependencies = app.deps;
  const open = (_req: unknown, _res: unknown, next: () => void): void => next();
  const router = Router();
  mountRoutes(router, routes, deps, { upload: open, simulate: open, 'sign-in': open });
  server = createServer(express().use(requestLog(deps.logger), express.json(), router, problemHandler));
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  client = new HttpClient(`http://127.0.0.1:${(server.address() as AddressInfo).port}`);
});
afterAll(async () => {
  closeEventStreams();
  server.closeAllConnections();
  await new Promise((resolve) => server.close(resolve));
  await app.stop();
});

/** Plain HTTP: fetch adds 'cache-control: no-cache' to a request with a tag, which asks for the whole answer. */
const statusWithTag = (path: string, tag: string): Promise<number | undefined> =>
  new Promise((resolve, reject) => {
    get(`${client.url}${path}`, { headers: { 'if-none-match': tag } }, (answer) => {
      answer.resume();
      resolve(answer.statusCode);
    }).on('error', reject);
  });

describe('answers', () => {
  it('carry a strong tag for immutable things and 304 when the reader has them', async () => {
    const first = await client.get('/version');
    expect(first.body).toEqual({ hash });
    expect(first.headers.get('etag')).toBe(`"${hash}"`);
    expect(await statusWithTag('/version', `"${hash}"`)).toBe(304);
    expect(await statusWithTag('/table', `"${hash}"`)).toBe(304);
    expect(await statusWithTag('/version', '"other"')).toBe(200);
  });

  it('never leave their contract: the reader gets the constant 500', async () => {
    const answer = await client.get('/outside-its-contract');
    expect(answer.body).toMatchObject({ code: 'internal' });
    expect(answer.text).not.toMatch(/answered|ZodError/);
  });

  it('send files under their name, views without their neighbours, and streams whole', async () => {
    const table = await client.get('/table');
    expect(table.headers.get('content-type')).toBe('text/csv; charset=utf-8');
    expect(table.headers.get('content-disposition')).toContain("filename*=UTF-8''ranking%20%C3%A4.csv");
    const bytes = await fetch(`${client.url}/bytes`);
    expect([...new Uint8Array(await bytes.arrayBuffer())]).toEqual([2, 3]);
    expect((await client.get('/flow')).text).toBe('one two');
  });
});

describe('uploads', () => {
  const form = (bytes: number, options: { field?: string; name?: string; label?: string } = {}): FormData => {
    const data = new FormData();
    if (options.label !== '') data.set('label', options.label ?? 'x');
    data.set(options.field ?? 'file', new Blob([new Uint8Array(bytes)]), options.name ?? 'truth.png');
    return data;
  };
  it('are read into memory with their fields and their name in UTF-8', async () => {
    const answer = await client.request('POST', '/upload', { form: form(1000, { name: 'Körper.png' }) });
    expect(answer.body).toEqual({ name: 'Körper.png', size: 1000, label: 'x' });
  });
  it('fail closed: too large, in the wrong field, missing, wrong fields, not multipart', async () => {
    const codeOf = async (data: FormData) => ((await client.request('POST', '/upload', { form: data })).body as { code: string }).code;
    expect(await codeOf(form(1001))).toBe('too-large');
    expect(await codeOf(form(10, { field: 'other' }))).toBe('file-rejected');
    expect(await codeOf(new FormData())).toMatch(/file-rejected|bad-request/);
    expect(await codeOf(form(10, { label: '' }))).toBe('validation-failed');
    expect((await client.post('/upload', { label: 'x' })).body).toMatchObject({ code: 'bad-request' });
  });
  it('are not read, nor is anything loaded, before the sign-in check', async () => {
    expect((await client.request('POST', '/upload-signed-in', { form: form(10) })).status).toBe(401);
    expect(loads).toBe(0);
  });
});

describe('event streams', () => {
  it('send events with ids, end with the reader, and end when the server stops', async () => {
    const stop = new AbortController();
    const response = await fetch(`${client.url}/progress`, { signal: stop.signal });
    expect(response.headers.get('content-type')).toMatch(/^text\/event-stream/);
    expect(response.headers.get('cache-control')).toBe('no-store');
    const reader = response.body?.getReader();
    let text = '';
    while (!text.includes('data:')) text += new TextDecoder().decode((await reader?.read())?.value);
    expect(text).toBe('retry: 2000\n\nid: 7\nevent: progress\ndata: {"done":1,"text":"two\\nlines"}\n\n');
    stop.abort();
    await expect.poll(() => stopped.length).toBe(1);
    // Sending to a reader who left is harmless.
    streams[0]?.send('progress', {});

    const second = await fetch(`${client.url}/progress`);
    closeEventStreams();
    await second.text();
    expect(stopped).toHaveLength(2);
  });
});
