import { spawn, type ChildProcess } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';

const root = path.resolve(import.meta.dirname, '../..');
const folder = mkdtempSync(path.join(tmpdir(), 'hadamark-process-'));
const started: ChildProcess[] = [];
afterAll(() => {
  for (const child of started) if (child.exitCode === null) child.kill('SIGKILL');
  rmSync(folder, { recursive: true, force: true });
});

/** The server from its sources, as `npm run dev` runs it, without the demonstration data. */
function run(env: Record<string, string>) {
  const child = spawn(process.execPath, ['--import', 'tsx', 'api/main.ts'], {
    cwd: root,
    stdio: ['ignore', 'pipe', 'pipe'],
    env: { PATH: process.env['PATH'] ?? '', NODE_ENV: 'development', SEED_DEMO: '0', LOG_LEVEL: 'warn', WORKERS: '1', DATA_DIR: folder, ...env },
  });
  started.push(child);
  let out = '';
  let err = '';
  child.stdout.on('data', (chunk: Buffer) => (out += chunk.toString()));
  child.stderr.on('data', (chunk: Buffer) => (err += chunk.toString()));
  const ended = new Promise<number | null>((resolve) => child.once('exit', (code) => resolve(code)));
  return { child, ended, out: () => out, err: () => err };
}

describe('the server process', () => {
  it('names every fault of the environment in a line and ends with 1', async () => {
    const server = run({ PORT: 'eighty', LOG_LEVEL: 'loud' });
    expect(await server.ended).toBe(1);
    expect(server.err().trim().split('\n')).toEqual([expect.stringMatching(/^PORT: /), expect.stringMatching(/^LOG_LEVEL: /)]);
  });

  it('refuses to start in production on the local stand-in', async () => {
    const server = run({ NODE_ENV: 'production', PUBLIC_URL: 'https://registry.example', SESSION_SECRET: 'x'.repeat(40) });
    expect(await server.ended).toBe(1);
    expect(server.err()).toMatch(/GITHUB_CLIENT_ID: .*stand-in.*refused in production/);
  });

  it('says which port is taken', async () => {
    const holder = createServer().listen(0, '127.0.0.1');
    await new Promise((resolve) => holder.once('listening', resolve));
    const { port } = holder.address() as AddressInfo;
    const server = run({ PORT: String(port) });
    expect(await server.ended).toBe(1);
    expect(server.err()).toContain(`PORT: cannot listen on 127.0.0.1:${port}`);
    await new Promise((resolve) => holder.close(resolve));
  });

  it.each(['SIGINT', 'SIGTERM'] as const)('ends cleanly on %s', { timeout: 200_000 }, async (signal) => {
    const server = run({ PORT: '0' });
    await expect.poll(() => server.out(), { timeout: 150_000 }).toMatch(/http:\/\/localhost:\d+/);
    const url = /http:\/\/localhost:\d+/.exec(server.out())?.[0] ?? '';
    const answer = await fetch(`${url}/api/v1/health`);
    expect(await answer.json()).toEqual({ status: 'ok', database: 'ok' });
    server.child.kill(signal);
    expect(await server.ended).toBe(0);
    expect(server.err()).toBe('');
  });
});
