import { mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { EnvError, readEnv } from '../../../api/env.ts';

const folder = mkdtempSync(path.join(tmpdir(), 'hadamark-env-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const linesOf = (source: Record<string, string>): readonly string[] => {
  try {
    readEnv(source);
  } catch (error) {
    if (error instanceof EnvError) return error.lines;
    throw error;
  }
  return [];
};

describe('the environment', () => {
  it('has a default for everything away from production, and serves this machine only', () => {
    const env = readEnv({ DATA_DIR: path.join(folder, 'data'), PORT: '' });
    expect(env).toMatchObject({ port: 3000, host: '127.0.0.1', nodeEnv: 'development', github: null, smtpUrl: null, rateLimit: 1, seedDemo: true });
    expect(env.workers).toBeGreaterThanOrEqual(1);
  });

  it('keeps a session secret for its owner alone, the same after a restart', () => {
    const dataDir = path.join(folder, 'kept');
    const { sessionSecret } = readEnv({ DATA_DIR: dataDir });
    expect(sessionSecret).toMatch(/^[0-9a-f]{64}$/);
    expect(readEnv({ DATA_DIR: dataDir }).sessionSecret).toBe(sessionSecret);
    const file = path.join(dataDir, 'session-secret');
    expect(statSync(file).mode & 0o777).toBe(0o600);
    expect(readFileSync(file, 'utf8').trim()).toBe(sessionSecret);
  });

  it('names every fault in a line of its own', () => {
    const lines = linesOf({ DATA_DIR: folder, PORT: 'eighty', SMTP_URL: 'mail.example', PUBLIC_URL: 'ftp://x', LOG_LEVEL: 'loud', RATE_LIMIT: '-1', WORKERS: '0' });
    for (const name of ['PORT', 'SMTP_URL', 'PUBLIC_URL', 'LOG_LEVEL', 'RATE_LIMIT', 'WORKERS']) {
      expect(lines.filter((line) => line.startsWith(`${name}: `)), name).toHaveLength(1);
    }
  });

  it('requires in production what must not be guessed', () => {
    const lines = linesOf({ NODE_ENV: 'production', DATA_DIR: folder });
    expect(lines.map((line) => line.split(':')[0])).toEqual(['PUBLIC_URL', 'SESSION_SECRET', 'GITHUB_CLIENT_ID', 'GITHUB_CLIENT_SECRET']);
    expect(linesOf({ NODE_ENV: 'production', DATA_DIR: folder, PORT: 'x' }).length).toBe(5);
  });

  it('takes an address of a host, without a path, and of a secure one in production', () => {
    expect(readEnv({ DATA_DIR: folder, PUBLIC_URL: 'https://Registry.example/' }).publicUrl).toBe('https://registry.example');
    expect(linesOf({ DATA_DIR: folder, PUBLIC_URL: 'https://registry.example/hadamark' })).toEqual(['PUBLIC_URL: must end after the host, without a path']);
    const secret = { SESSION_SECRET: 'x'.repeat(40), GITHUB_CLIENT_ID: 'a', GITHUB_CLIENT_SECRET: 'b' };
    expect(linesOf({ NODE_ENV: 'production', DATA_DIR: folder, PUBLIC_URL: 'http://registry.example', ...secret })).toEqual(['PUBLIC_URL: must be an https address when NODE_ENV is production']);
  });

  it('refuses half a GitHub client and a data folder that is a file', () => {
    expect(linesOf({ DATA_DIR: folder, GITHUB_CLIENT_ID: 'x' })).toEqual(['GITHUB_CLIENT_ID and GITHUB_CLIENT_SECRET: set both or neither']);
    const file = path.join(folder, 'a-file');
    writeFileSync(file, '');
    expect(linesOf({ DATA_DIR: file })[0]).toMatch(/^DATA_DIR: .* cannot be written/);
  });
});
