/**
 * Takes the README's pictures of a running demonstration: `npx tsx tests/browser/take-pictures.ts http://localhost:3000`.
 * They go to tests/pictures/. The runs of the first bench must have finished.
 */
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Page } from 'playwright-core';
import { toPalette } from '../support/palette-png';
import { launchBrowser, openViewer, type Site } from '../support/site';

const url = process.argv[2];
if (!url || !URL.canParse(url)) {
  console.error('Name the address of a running site, as in http://localhost:3000.');
  process.exit(1);
}
const folder = join(import.meta.dirname, '../pictures');
mkdirSync(folder, { recursive: true });
const site = { url: new URL(url).origin } as Site;
const browser = await launchBrowser();

const list = async (path: string): Promise<Record<string, string>[]> => ((await (await fetch(`${site.url}/api/v1${path}`)).json()) as { items: Record<string, string>[] }).items;

async function settle(page: Page): Promise<void> {
  await page.waitForFunction(() => document.querySelector('main h1') !== null && document.querySelector('main .sk') === null);
  await page.waitForLoadState('networkidle');
  await page.waitForTimeout(400);
}

async function take(name: string, path: string, options: { handle?: string; dark?: boolean; width?: number; height?: number; before?: (page: Page) => Promise<void> } = {}): Promise<void> {
  const { page, context } = await openViewer(browser, site, { ...options, height: options.height ?? 1000 });
  await page.goto(path);
  await settle(page);
  await options.before?.(page);
  await settle(page);
  const picture = toPalette(await page.screenshot());
  writeFileSync(join(folder, `${name}.png`), picture);
  console.log(`${name}.png ${Math.round(picture.length / 1000)} kB`);
  await context.close();
}

const benches = await list('/benches?state=open');
const bench = benches.find((b) => b['slug']?.startsWith('buried')) ?? benches[0];
if (!bench) throw new Error('The site has no open bench.');
const runs = ((await list(`/runs?bench=${bench['slug']}&limit=100`)) as unknown as { id: string; state: string; review: string; solver: { name: string }; phantom: { slug: string; sealed: boolean } }[]).filter((r) => r.state === 'finished' && !r.phantom.sealed);
const run = runs.find((r) => r.review === 'signed-off' && /variation/i.test(r.solver.name)) ?? runs.find((r) => r.review === 'signed-off') ?? runs[0];
if (!run) throw new Error('The bench has no finished run yet.');
const beside = runs.filter((r) => r.phantom.slug === run.phantom.slug).slice(0, 3).map((r) => r.id);

await take('home', '/?noise=0.05');
await take('bench', `/benches/${bench['slug']}?noise=0.05`);
await take('run', `/runs/${run.id}?noise=0.05`);
await take('phantom-form', '/phantoms/new', { handle: 'curator-demo', before: async (page) => page.getByText(/simulated in/).waitFor({ timeout: 60_000 }) });
await take('review', '/review?noise=0.05', { handle: 'reviewer-demo' });
await take('compare', `/compare?runs=${beside.join(',')}&noise=0.05`);
await take('run-dark', `/runs/${run.id}?noise=0.05`, { dark: true });
await take('bench-phone', `/benches/${bench['slug']}?noise=0.05`, { width: 390, height: 844 });
const views = (await list('/runs?bench=few-views-few-angles&limit=100')).find((r) => r['state'] === 'finished' && /variation/i.test(JSON.stringify(r['solver'])) && /contrast/i.test(JSON.stringify(r['phantom'])));
if (views) await take('run-x-ray', `/runs/${views['id']}?noise=0.07`);
const contrast = (await list('/benches?state=open')).find((b) => b['slug'] === 'how-strong-a-contrast');
if (contrast) await take('bench-contrast', `/benches/${contrast['slug']}?noise=1.5`);
await browser.close();
