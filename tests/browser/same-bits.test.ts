import { createHash } from 'node:crypto';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { recomputationSchema, replaySchema, runImageSchema, type Replay } from '../../shared/contracts/runs';
import { decodeArray } from '../../shared/domain/array-encoding';
import { prepareRun, recomputeDraw } from '../../solvers/campaign/run';
import { createProblem } from '../../solvers/problems/registry';
import { launchBrowser, openViewer, startSite, type Site } from '../support/site';
import { cgls, fillSite, gaussNewton, tikhonov, totalVariation, truncatedSvd, type SmallSite } from '../support/small-site';

/*
 * One stored draw computed again in three places: the main thread here, from the sources; a worker thread of the server, from
 * the bundle of the server; a worker of Chromium, from the bundle of the client. SHA-256 by Node's own implementation decides.
 */
const solvers = { 'Tikhonov bits': tikhonov, 'Truncated SVD bits': truncatedSvd, 'CGLS bits': cgls, 'Total variation bits': totalVariation, 'Gauss-Newton bits': gaussNewton };
let site: Site;
let browser: Browser;
let small: SmallSite;

beforeAll(async () => {
  site = await startSite();
  browser = await launchBrowser();
  small = await fillSite(site, { solvers: Object.entries(solvers).map(([name, configuration]) => ({ name, configuration })), ladder: [0.02, 0.2], draws: 2, electrodes: 8 });
});
afterAll(async () => {
  await browser?.close();
  await site?.dispose();
});

const sha256 = (values: Float64Array): string => {
  const bytes = Buffer.alloc(8 * values.length);
  values.forEach((value, i) => bytes.writeDoubleLE(value, 8 * i));
  return createHash('sha256').update(bytes).digest('hex');
};
/** Over the hashes of all images in order, a line each. */
const sha256OfRun = (hashes: readonly string[]): string => createHash('sha256').update(hashes.join('\n')).digest('hex');

/** Images of every draw, in this thread. */
function recomputeHere(replay: Replay): string[] {
  const problem = createProblem(replay.problem);
  const prepared = prepareRun({ problem, ...replay.configuration });
  const backgroundImage = new Float64Array(problem.grid.inside.length).fill(replay.problem.background);
  const phantom = { clean: decodeArray(replay.clean), noiseScale: replay.noiseScale, truthImage: backgroundImage, backgroundImage, targets: [] };
  return replay.ladder.flatMap((level, levelIndex) =>
    Array.from({ length: replay.draws }, (_, drawIndex) => sha256(recomputeDraw(prepared, phantom, { benchSeed: replay.seed, phantomHash: replay.phantomHash, levelIndex, level, drawIndex }).image)));
}

describe.each(Object.keys(solvers))('%s', (name) => {
  it('gives the same SHA-256 in the main thread, in a worker thread and in Chromium', async () => {
    const run = small.runs[name.toLowerCase().replaceAll(' ', '-')]!;
    const reviewer = await small.client('reviewer-demo');
    const replay = replaySchema.parse((await reviewer.get(`/api/v1/runs/${run}/replay`)).body);
    expect(replay.trials).toHaveLength(4);

    const image = runImageSchema.parse((await reviewer.get(`/api/v1/runs/${run}/images?level=1&draw=1`)).body);
    expect(sha256(decodeArray(image.image)), 'the image that is served').toBe(replay.trials[3]!.imageHash);

    const here = recomputeHere(replay);
    expect(here, 'main thread').toEqual(replay.trials.map((trial) => trial.imageHash));
    expect(sha256OfRun(here)).toBe(replay.resultHash);

    await reviewer.post(`/api/v1/runs/${run}/recomputations`);
    await expect.poll(async () => recomputationSchema.parse((await reviewer.get(`/api/v1/runs/${run}/recomputations`)).body).state, { timeout: 120_000 }).toBe('finished');
    expect(recomputationSchema.parse((await reviewer.get(`/api/v1/runs/${run}/recomputations`)).body), 'worker thread').toMatchObject({ equal: true, resultHash: sha256OfRun(here), firstDifference: null });

    const { page, context, faults } = await openViewer(browser, site);
    await page.goto(`/runs/${run}`);
    await page.getByRole('button', { name: 'Recompute here' }).click();
    const outcome = page.getByRole('status').filter({ hasText: 'in this browser' });
    await outcome.waitFor({ timeout: 120_000 });
    expect(await outcome.textContent(), 'Chromium').toContain('Same bits in this browser');
    // The page prints the first sixteen digits of the stored hash and of its own.
    expect((await outcome.locator('.mono').innerText()).replace(/[^0-9a-f\n]/g, '').split('\n')).toEqual([sha256OfRun(here).slice(0, 16), sha256OfRun(here).slice(0, 16)]);
    expect(faults).toEqual([]);
    await context.close();
  });
});
