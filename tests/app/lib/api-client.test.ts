import { afterEach, describe, expect, it, vi } from 'vitest';
import { z } from 'zod';
import { api, ApiError, apiUrl } from '../../../app/lib/api-client';

const answer = (status: number, body: unknown) => vi.stubGlobal('fetch', vi.fn(async () => new Response(body === undefined ? null : JSON.stringify(body), { status })));
const caught = async (promise: Promise<unknown>): Promise<ApiError> => {
  const error: unknown = await promise.then(() => undefined, (e: unknown) => e);
  if (!(error instanceof ApiError)) throw new Error('No ApiError was thrown.');
  return error;
};
afterEach(() => vi.unstubAllGlobals());

describe('api client', () => {
  it('parses the answer by its schema', async () => {
    answer(200, { waiting: 7, more: 'ignored' });
    expect(await api.get('/review/count', z.object({ waiting: z.int() }))).toEqual({ waiting: 7 });
  });

  it('turns problem details into an error with issues by path', async () => {
    answer(422, { code: 'validation-failed', title: 'Some fields need a correction', detail: 'Two fields.', requestId: 'r1', issues: [{ path: ['geometry', 'current'], message: 'At most 100 A/m.' }] });
    const error = await caught(api.post('/phantoms', z.unknown(), { json: {} }));
    expect(error).toMatchObject({ status: 422, code: 'validation-failed', message: 'Two fields.', requestId: 'r1' });
    expect(error.issueAt('geometry.current')).toBe('At most 100 A/m.');
    expect(error.issueAt('title')).toBeUndefined();
  });

  it('keeps the row and the column of a rejected file', async () => {
    answer(422, { code: 'file-rejected', title: 'The file cannot be used', detail: 'x', issues: [{ path: ['file'], message: 'Not a number', row: 3, column: 12 }] });
    expect((await caught(api.post('/frames', z.unknown()))).issues[0]).toMatchObject({ row: 3, column: 12 });
  });

  it('says so when the answer is not the one agreed on', async () => {
    answer(200, { waiting: 'many' });
    expect(await caught(api.get('/review/count', z.object({ waiting: z.int() })))).toMatchObject({ code: 'unexpected-answer' });
  });

  it('survives an error page that is no JSON', async () => {
    vi.stubGlobal('fetch', async () => new Response('<html>Bad gateway</html>', { status: 502 }));
    expect(await caught(api.get('/queue', z.unknown()))).toMatchObject({ status: 502, code: 'internal' });
  });

  it('names a lost connection, and lets an abort be an abort', async () => {
    vi.stubGlobal('fetch', async () => { throw new TypeError('failed'); });
    expect(await caught(api.get('/queue', z.unknown()))).toMatchObject({ status: 0, code: 'offline' });
    const controller = new AbortController();
    controller.abort();
    await expect(api.get('/queue', z.unknown(), { signal: controller.signal })).rejects.toThrow(TypeError);
  });

  it('passes the signal and parses an empty answer as null', async () => {
    answer(204, undefined);
    const { signal } = new AbortController();
    expect(await api.delete('/account/tokens/1', z.null(), { signal })).toBeNull();
    expect(vi.mocked(fetch).mock.calls[0]?.[1]).toMatchObject({ method: 'DELETE', signal });
  });

  it('leaves absent values out of an address', () => {
    expect(apiUrl('/benches', { state: 'open', q: undefined, group: '', runs: ['a', 'b'] })).toBe('/api/v1/benches?state=open&runs=a%2Cb');
  });
});
