import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

const folder = mkdtempSync(path.join(tmpdir(), 'hadamark-client-'));
let app: TestApp;
beforeAll(async () => {
  mkdirSync(path.join(folder, 'assets'));
  writeFileSync(path.join(folder, 'index.html'), '<!doctype html><title>page</title>');
  writeFileSync(path.join(folder, 'assets', 'main-abc123.js'), 'export {};');
  writeFileSync(path.join(folder, 'icon.svg'), '<svg/>');
  app = await startTestApp({ dependencies: { clientDir: folder } });
});
afterAll(async () => {
  await app.stop();
  rmSync(folder, { recursive: true, force: true });
});

describe('the built client', () => {
  it.each(['/', '/phantoms/two-discs/v/2', '/runs/RN-001?draw=1', '/api'])('answers %s with its page, asked for anew each time', async (address) => {
    const answer = await app.visitor.get(address);
    expect(answer.status).toBe(200);
    expect(answer.text).toContain('<title>page</title>');
    expect(answer.headers.get('cache-control')).toBe('no-cache');
  });
  it('lets hashed files stay in caches and tags the others', async () => {
    expect((await app.visitor.get('/assets/main-abc123.js')).headers.get('cache-control')).toContain('immutable');
    const icon = await app.visitor.get('/icon.svg');
    expect(icon.headers.get('cache-control')).toBe('no-cache');
    expect(icon.headers.get('etag')).toBeTruthy();
  });
  it('does not answer a missing file with a page', async () => {
    expect((await app.visitor.get('/assets/gone-123.js')).status).toBe(404);
    expect((await app.visitor.get('/assets/../../etc/passwd')).text).not.toContain('root:');
  });
});

describe('without a built client', () => {
  it('a plain hint says what to run', async () => {
    const bare = await startTestApp();
    try {
      const answer = await bare.visitor.get('/');
      expect(answer.status).toBe(503);
      expect(answer.text).toContain('npm run build');
    } finally {
      await bare.stop();
    }
  });
});
