import { Worker } from 'node:worker_threads';
import { beforeAll, describe, expect, it } from 'vitest';
import { familyKeys } from '../../shared/domain/families';
import { methods } from '../../solvers/methods/registry';
import { goldenHashes, type GoldenHash } from '../golden/golden-set';
import { bundleEntry, openInFirefox, serveWorker } from '../support/engines';
import { launchBrowser } from '../support/site';

/*
 * Every method on every family that it serves, computed in four engines: Node's main thread from the sources, a worker thread of
 * Node, a worker of Chromium, and a worker of Firefox that posts its answer back. One SHA-256 each.
 */
let here: GoldenHash[];
let bundle: string;

beforeAll(async () => {
  here = [...goldenHashes()];
  bundle = await bundleEntry('tests/golden/worker-entry.ts', 'browser');
});

describe('the golden set', () => {
  it('holds every method and every family', () => {
    for (const family of familyKeys) expect(here.filter((item) => item.family === family).length).toBeGreaterThan(5);
    for (const { key } of methods) expect(here.some((item) => item.name.endsWith(`: ${key}`)), key).toBe(true);
  });

  it('has the same bits in a worker thread of Node', async () => {
    const worker = new Worker(await bundleEntry('tests/golden/node-worker-entry.ts', 'node'), { eval: true });
    const there = await new Promise((done, fail) => worker.once('message', done).once('error', fail));
    await worker.terminate();
    expect(there).toEqual(here);
  });

  it('has the same bits in Chromium', async () => {
    const server = await serveWorker(bundle);
    const browser = await launchBrowser();
    try {
      const page = await browser.newPage();
      await page.goto(server.url);
      expect(await server.result).toEqual(here);
    } finally {
      await browser.close();
      server.close();
    }
  });

  it('has the same bits in Firefox', async () => {
    const server = await serveWorker(bundle);
    const firefox = openInFirefox(server.url);
    try {
      expect(await server.result).toEqual(here);
    } finally {
      await firefox.stop();
      server.close();
    }
  });
});
