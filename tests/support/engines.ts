import { spawn, type ChildProcess } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { build } from 'esbuild';

const root = resolve(import.meta.dirname, '../..');

/** One file of an entry with all that it imports. */
export async function bundleEntry(entry: string, platform: 'node' | 'browser'): Promise<string> {
  const { outputFiles } = await build({
    absWorkingDir: root, entryPoints: [entry], bundle: true, write: false, platform, format: platform === 'node' ? 'cjs' : 'iife', target: platform === 'node' ? 'node20' : 'es2022', logLevel: 'silent',
  });
  return outputFiles[0]!.text;
}

export interface ResultServer {
  readonly url: string;
  /** What a page posted; rejects when it posts an error. */
  readonly result: Promise<unknown>;
  close(): void;
}

/** Serves one page that starts the worker and posts back what it answers. */
export async function serveWorker(workerSource: string): Promise<ResultServer> {
  let settle: { done: (value: unknown) => void; fail: (error: Error) => void };
  const result = new Promise<unknown>((done, fail) => (settle = { done, fail }));
  const page = `<!doctype html><meta charset="utf-8"><title>Golden set</title><script>
    const send = (body) => fetch('/result', { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) });
    const worker = new Worker('/worker.js');
    worker.onmessage = (event) => send({ value: event.data });
    worker.onerror = (event) => send({ error: event.message + ' at ' + event.lineno });
  </script>`;
  const server: Server = createServer((request, response) => {
    const answer = (type: string, body: string): void => {
      response.writeHead(200, { 'content-type': type });
      response.end(body);
    };
    if (request.method === 'POST') {
      let body = '';
      request.on('data', (chunk: Buffer) => (body += chunk.toString()));
      request.on('end', () => {
        answer('text/plain', 'taken');
        const posted = JSON.parse(body) as { value?: unknown; error?: string };
        if (posted.error) settle.fail(new Error(posted.error));
        else settle.done(posted.value);
      });
    } else if (request.url === '/worker.js') answer('text/javascript', workerSource);
    else answer('text/html; charset=utf-8', page);
  });
  await new Promise<void>((done) => server.listen(0, '127.0.0.1', done));
  return { url: `http://127.0.0.1:${(server.address() as AddressInfo).port}/`, result, close: () => server.closeAllConnections() ?? server.close() };
}

export const firefoxPath = (): string | undefined =>
  process.env.FIREFOX_PATH ?? ['/usr/bin/firefox-esr', '/usr/bin/firefox'].find((path) => existsSync(path));

/** Opens a page in Debian's Firefox, headless, with a profile of its own. */
export function openInFirefox(url: string): { stop(): Promise<void> } {
  const path = firefoxPath();
  if (!path) throw new Error('This test needs Firefox: install firefox-esr, or set FIREFOX_PATH.');
  const profile = mkdtempSync(join(tmpdir(), 'hadamark-firefox-'));
  const child: ChildProcess = spawn(path, ['--headless', '--no-remote', '--profile', profile, url], { stdio: 'ignore', env: { ...process.env, MOZ_HEADLESS: '1', HOME: profile } });
  return {
    async stop() {
      if (child.exitCode === null) {
        const ended = new Promise((done) => child.once('exit', done));
        child.kill('SIGTERM');
        const timer = setTimeout(() => child.kill('SIGKILL'), 5000);
        await ended;
        clearTimeout(timer);
      }
      rmSync(profile, { recursive: true, force: true, maxRetries: 5 });
    },
  };
}
