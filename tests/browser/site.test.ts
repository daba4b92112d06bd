import { spawn, type ChildProcess } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { demoPlan } from '../../api/services/seed/demo-plan.ts';
import { trialListSchema, type Progress } from '../../shared/contracts/runs';
import { HttpClient } from '../support/http-client';
import { launchBrowser, openViewer, startSite } from '../support/site';
import { fillSite } from '../support/small-site';

const main = join(import.meta.dirname, '../../dist/server/main.js');
const folders: string[] = [];
const children: ChildProcess[] = [];
afterAll(() => {
  for (const child of children) if (child.exitCode === null) child.kill('SIGKILL');
  for (const folder of folders) rmSync(folder, { recursive: true, force: true });
});
function newFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'hadamark-built-'));
  folders.push(folder);
  return folder;
}

/** The built server as `npm start` runs it, with nothing of this process's settings. */
function built(env: Record<string, string>) {
  const began = performance.now();
  const child = spawn(process.execPath, ['--enable-source-maps', main], { cwd: newFolder(), stdio: ['ignore', 'pipe', 'pipe'], env: { PATH: process.env['PATH'] ?? '', PORT: '0', LOG_LEVEL: 'warn', RATE_LIMIT: 'off', ...env } });
  children.push(child);
  let out = '';
  let err = '';
  child.stdout.on('data', (chunk: Buffer) => (out += chunk.toString()));
  child.stderr.on('data', (chunk: Buffer) => (err += chunk.toString()));
  const ended = new Promise<number | null>((resolve) => child.once('exit', (code) => resolve(code)));
  const address = async (): Promise<string> => {
    await expect.poll(() => out, { timeout: 60_000, interval: 10 }).toMatch(/Hadamark is at http:\/\/\S+/);
    return /http:\/\/\S+/.exec(out)![0];
  };
  return { child, ended, address, err: () => err, sinceStart: () => performance.now() - began };
}

describe('the built server', () => {
  it('prints its address, serves the pages and the API, and ends cleanly on Ctrl-C', async () => {
    const server = built({ DATA_DIR: newFolder(), SEED_DEMO: '0' });
    const url = await server.address();
    const answer = await fetch(url);
    const answered = server.sinceStart();
    expect(answer.status).toBe(200);
    expect(await answer.text()).toContain('<div id="root">');
    expect(await (await fetch(`${url}/api/v1/health`)).json()).toMatchObject({ status: 'ok' });
    // A time on a shared machine says little about the program; it is printed, not asserted.
    console.log(`first page ${Math.round(answered)} ms after the start of the process, with an empty data folder`);
    server.child.kill('SIGINT');
    expect(await server.ended).toBe(0);
    expect(server.err()).toBe('');
  });

  it('goes on seeding at a second start and makes nothing twice', async () => {
    const DATA_DIR = newFolder();
    const planned = [demoPlan.groups.length, demoPlan.solvers.length];
    const counts = async (url: string): Promise<number[]> => {
      const client = new HttpClient(url);
      const of = async (noun: string): Promise<number> => ((await client.get(`/api/v1/${noun}?limit=100`)).body as { items: unknown[] }).items.length;
      return [await of('groups'), await of('solvers')];
    };
    const first = built({ DATA_DIR, SEED_DEMO: '1', WORKERS: '1' });
    const firstUrl = await first.address();
    await expect.poll(() => counts(firstUrl), { timeout: 60_000, interval: 300 }).toEqual(planned);
    first.child.kill('SIGINT');
    expect(await first.ended, first.err()).toBe(0);

    const second = built({ DATA_DIR, SEED_DEMO: '1', WORKERS: '1' });
    const url = await second.address();
    // The next thing seeding makes is a phantom: by then it has gone past groups and solvers again.
    await expect.poll(async () => ((await new HttpClient(url).get('/api/v1/phantoms')).body as { items: unknown[] }).items.length, { timeout: 120_000, interval: 300 }).toBeGreaterThan(0);
    expect(await counts(url)).toEqual(planned);
    second.child.kill('SIGINT');
    expect(await second.ended, second.err()).toBe(0);
  });

  it('names a wrong setting and ends with 1', async () => {
    const server = built({ DATA_DIR: newFolder(), PORT: 'eighty', WORKERS: '0' });
    expect(await server.ended).toBe(1);
    expect(server.err().trim().split('\n').map((line) => line.split(':')[0])).toEqual(['PORT', 'WORKERS']);
  });

  it('refuses the stand-in for sign-in in production', async () => {
    const server = built({ DATA_DIR: newFolder(), NODE_ENV: 'production', PUBLIC_URL: 'https://registry.example', SESSION_SECRET: 'x'.repeat(40) });
    expect(await server.ended).toBe(1);
    expect(server.err()).toMatch(/GITHUB_CLIENT_ID: .*stand-in.*refused in production/);
  });
});

describe('a server killed in the middle of a run', () => {
  it('resumes at the next start while the page stays open, without a lost or a doubled draw', async () => {
    const ladder = [0.02, 0.05, 0.2];
    const draws = 3;
    const total = ladder.length * draws;
    const site = await startSite({ WORKERS: '1' });
    const browser = await launchBrowser();
    try {
      const small = await fillSite(site, { solvers: [], ladder, draws, electrodes: 8 });
      const developer = await small.client('developer-demo');
      const made = await developer.post('/api/v1/solvers', {
        group: small.group, name: 'Slow steps', description: '', declaration: { notTuned: true, ownMesh: true, sourceMayBePublished: true },
        configuration: { method: 'gauss-newton', parameters: { penalty: 'gradient', firstAlpha: 0.3, decay: 0.9, largestIteration: 30 }, rule: { key: 'fixed', value: 1e-4 } },
      });
      const { slug } = made.body as { slug: string };
      await developer.post(`/api/v1/benches/${small.bench}/entries`, { solver: slug, version: 1 });
      const run = ((await developer.get(`/api/v1/runs?solver=${slug}`)).body as { items: { id: string }[] }).items[0]!.id;
      const progress = async (): Promise<Progress> => ((await developer.get(`/api/v1/runs/${run}`)).body as { progress: Progress }).progress;

      const { page } = await openViewer(browser, site);
      await page.goto(`/runs/${run}`);
      await page.getByRole('region', { name: 'Progress' }).getByText(/[1-9]\d* of \d+ trials done/).waitFor({ timeout: 120_000 });
      await site.stop('SIGKILL');
      await site.restart();
      expect((await progress()).state, 'the kill came in the middle').not.toBe('finished');
      await page.getByRole('heading', { name: 'Error table' }).waitFor({ timeout: 180_000 });
      expect(await progress()).toMatchObject({ state: 'finished', done: total, total });
      const trials = trialListSchema.parse((await developer.get(`/api/v1/runs/${run}/trials`)).body).items;
      expect(trials.map(({ level, draw }) => `${level} ${draw}`)).toEqual(ladder.flatMap((_, level) => Array.from({ length: draws }, (_d, draw) => `${level} ${draw}`)));
    } finally {
      await browser.close();
      await site.dispose();
    }
  });
});
