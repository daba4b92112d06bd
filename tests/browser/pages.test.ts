import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { accessibilityFaults, launchBrowser, openViewer, overflowsSideways, startSite, type Site, type Viewer } from '../support/site';
import { cgls, fillSite, tikhonov, truncatedSvd, type SmallSite } from '../support/small-site';

/*
 * Every address of the client, with content, as somebody who may see it, at the width of a desk and of a phone, on the
 * light and on the dark sheet. WCAG 2.2 A and AA and the best practices of axe; axe sees about half of what can be wrong.
 */
let site: Site;
let browser: Browser;
let small: SmallSite;
const viewers = new Map<string, Viewer>();

beforeAll(async () => {
  site = await startSite();
  browser = await launchBrowser();
  small = await fillSite(site, {
    solvers: [{ name: 'Tikhonov gradient', configuration: tikhonov }, { name: 'Truncated SVD', configuration: truncatedSvd }, { name: 'CGLS stopped early', configuration: cgls }],
    ladder: [0.01, 0.03, 0.1, 0.3], draws: 4, electrodes: 8,
  });
  const reviewer = await small.client('reviewer-demo');
  const signedOff = await reviewer.post(`/api/v1/runs/${small.runs['truncated-svd']}/verdicts`, {
    verdict: 'signed-off-with-reservation', reason: 'One phantom only, so it says little about others.', inspected: ['table', 'images', 'checks', 'provenance'],
  });
  expect(signedOff.status).toBeLessThan(300);
  const developer = await small.client('developer-demo');
  await developer.post(`/api/v1/runs/${small.runs['truncated-svd']}/comments`, { text: 'Is the last level past its breakdown?', anchor: 'table', question: true });
  // A phantom that waits and a bench that is a draft.
  const curator = await small.client('curator-demo');
  const published = (await curator.get(`/api/v1/phantoms/${small.phantom}`)).body as { version: { definition: Record<string, unknown> }; group: { slug: string } };
  const { definition } = published.version;
  const waiting = await curator.post('/api/v1/phantoms', { group: published.group.slug, name: 'Waiting bodies', description: '', licence: 'CC0-1.0', frames: null, sealedUntil: null, definition: { ...definition, truth: { kind: 'expression', background: 1, expression: '1 + 0.5*exp(-(x^2 + y^2)/0.002)' } } });
  await curator.post(`/api/v1/phantoms/${(waiting.body as { slug: string }).slug}/versions/1/submit`);
  await curator.post('/api/v1/benches', { group: published.group.slug, title: 'A draft bench', question: 'What does a draft look like to its group?', description: '', phantoms: [{ slug: small.phantom, version: 1 }], ladder: [0.1], draws: 2, seed: 1 });
  await curator.post(`/api/v1/groups/${published.group.slug}/invitations`, { email: 'somebody@group.example', roles: ['observer'] });
});
afterAll(async () => {
  await browser?.close();
  await site?.dispose();
});

const underWay = new WeakMap<Page, Set<unknown>>();
async function viewer(handle: string): Promise<Viewer> {
  const known = viewers.get(handle);
  if (known) return known;
  const made = await openViewer(browser, site, handle === '' ? {} : { handle });
  const requests = new Set<unknown>();
  made.page.on('request', (request) => void requests.add(request));
  made.page.on('requestfinished', (request) => void requests.delete(request));
  made.page.on('requestfailed', (request) => void requests.delete(request));
  underWay.set(made.page, requests);
  viewers.set(handle, made);
  return made;
}

/** Until the page has its heading and nothing has been fetched for a moment. */
async function settled(page: Page): Promise<void> {
  const ready = () => page.waitForFunction(() => document.querySelector('main h1') !== null && document.querySelector('main .sk') === null && !document.querySelector('[aria-busy=true]'));
  await ready();
  for (let quiet = 0; quiet < 4; ) {
    await page.waitForTimeout(40);
    quiet = underWay.get(page)?.size ? 0 : quiet + 1;
  }
  await ready();
}

const run = (solver: string) => () => `/runs/${small.runs[solver]}`;
/** Pattern of the router, who looks, the address. */
const pages: readonly [pattern: string, handle: string, address: () => string][] = [
  ['/', '', () => '/'],
  ['benches', '', () => '/benches'],
  ['benches/new', 'curator-demo', () => '/benches/new'],
  ['benches/:slug', '', () => `/benches/${small.bench}?noise=0.1&focus=tikhonov-gradient`],
  ['benches/:slug', 'curator-demo', () => '/benches/a-draft-bench'],
  ['compare', '', () => `/compare?runs=${Object.values(small.runs).join(',')}&noise=0.1`],
  ['phantoms', '', () => '/phantoms'],
  ['phantoms/new', 'curator-demo', () => '/phantoms/new'],
  ['phantoms/:slug', '', () => `/phantoms/${small.phantom}`],
  ['phantoms/:slug/v/:n', 'reviewer-demo', () => '/phantoms/waiting-bodies/v/1'],
  ['solvers', '', () => '/solvers'],
  ['solvers/new', 'developer-demo', () => `/solvers/new?bench=${small.bench}`],
  ['solvers/:slug', '', () => '/solvers/tikhonov-gradient'],
  ['solvers/:slug', 'developer-demo', () => '/solvers/cgls-stopped-early'],
  ['runs/:id', '', run('truncated-svd')],
  ['runs/:id', 'reviewer-demo', run('tikhonov-gradient')],
  ['review', 'reviewer-demo', () => '/review'],
  ['review', 'reviewer-demo', () => '/review?tab=phantoms'],
  ['groups', 'member-demo', () => '/groups'],
  ['groups/:slug', '', () => `/groups/${small.group}`],
  ['groups/:slug', 'curator-demo', () => '/groups/fenland-tank-imaging'],
  ['account', 'member-demo', () => '/account'],
  ['admin', 'admin-demo', () => '/admin'],
  ['admin', 'admin-demo', () => '/admin?tab=queue'],
  ['admin', 'admin-demo', () => '/admin?tab=audit'],
  ['admin', 'admin-demo', () => '/admin?tab=outbox'],
  ['sign-in', '', () => '/sign-in'],
  ['reference', '', () => '/reference'],
  ['reference/:kind/:key', '', () => '/reference/metrics/relative-l2-error'],
  ['reference/:kind/:key', '', () => '/reference/methods/total-variation'],
  ['verification', '', () => '/verification'],
  ['api', '', () => '/api'],
  ['*', '', () => '/nowhere'],
];

it('the list above has every address of the router', () => {
  const source = readFileSync(join(import.meta.dirname, '../../app/router.tsx'), 'utf8');
  const patterns = ['/', '*', ...[...source.matchAll(/page\('([^']+)'/g)].map((match) => match[1]!)];
  expect(patterns.length).toBeGreaterThan(20);
  expect([...new Set(pages.map(([pattern]) => pattern))].sort()).toEqual(patterns.sort());
});

const sizes = [['desk', 1440, 900], ['phone', 390, 844]] as const;
const sheets = ['light', 'dark'] as const;

describe.each(pages.map(([pattern, handle, address]) => ({ title: `/${pattern.replace(/^\//, '')} as ${handle || 'a reader'}`, handle, address })))('$title', ({ handle, address }) => {
  it('is accessible, fits its width and logs no error, at a desk and on a phone, light and dark', async () => {
    const { page, faults } = await viewer(handle);
    const before = faults.length;
    const found: string[] = [];
    for (const [size, width, height] of sizes) {
      await page.setViewportSize({ width, height });
      await page.emulateMedia({ colorScheme: 'light' });
      await page.goto(address());
      await settled(page);
      const where = `${address()} ${size}`;
      if (!/\S/.test(await page.title())) found.push(`${where}: no title`);
      const headings = await page.locator('h1:visible').count();
      if (headings !== 1) found.push(`${where}: ${headings} h1`);
      if (await overflowsSideways(page)) found.push(`${where}: scrolls sideways`);
      for (const sheet of sheets) {
        await page.emulateMedia({ colorScheme: sheet });
        for (const fault of await accessibilityFaults(page)) found.push(`${where} ${sheet}: ${fault}`);
      }
    }
    expect([...found, ...faults.slice(before)]).toEqual([]);
  });
});

describe('with the keyboard alone', () => {
  it('the first stop of Tab is the way past the masthead', async () => {
    const { page } = await viewer('');
    await page.setViewportSize({ width: 1440, height: 900 });
    await page.goto(`/benches/${small.bench}`);
    await settled(page);
    await page.evaluate(() => (document.activeElement as HTMLElement | null)?.blur());
    await page.evaluate(() => window.getSelection()?.removeAllRanges());
    await page.locator('a.skip').focus();
    expect(await page.locator('a.skip').evaluate((link) => document.activeElement === link && link.getBoundingClientRect().top >= 0), 'it is seen while it has the focus').toBe(true);
    await page.keyboard.press('Enter');
    expect(await page.evaluate(() => document.activeElement?.id)).toBe('main');
    await page.keyboard.press('Tab');
    expect(await page.evaluate(() => document.activeElement?.closest('main') !== null), 'the next stop is in the content').toBe(true);
  });

  it('Tab reaches every link and control of the bench and shows where it is', async () => {
    const { page } = await viewer('');
    await page.goto(`/benches/${small.bench}?noise=0.1`);
    await settled(page);
    await page.locator('a.skip').focus();
    const reached = new Set<string>();
    for (let stop = 0; stop < 120; stop++) {
      await page.keyboard.press('Tab');
      const at = await page.evaluate(() => {
        const element = document.activeElement;
        if (!(element instanceof HTMLElement) || element === document.body) return null;
        const style = getComputedStyle(element);
        const box = element.getBoundingClientRect();
        const marked = style.outlineStyle !== 'none' || style.boxShadow !== 'none' || element.matches('[role=slider]') || element.closest('label') !== null;
        return { name: element.getAttribute('aria-label') ?? element.textContent?.trim() ?? element.tagName, marked, box: box.width * box.height > 0 };
      });
      if (at === null) break;
      expect(at, at.name).toMatchObject({ marked: true, box: true });
      reached.add(at.name);
    }
    for (const name of ['Relative noise level', 'Rank by', 'Follow Tikhonov gradient in the charts', 'Tikhonov gradient', 'Full table as CSV']) expect([...reached]).toContain(name);
  });

  it('the noise rule follows arrow keys, Home and End, and says where it stands', async () => {
    const { page } = await viewer('');
    await page.goto(`/benches/${small.bench}?noise=0.03`);
    await settled(page);
    const rule = page.getByRole('slider', { name: 'Relative noise level' });
    await rule.focus();
    const reads = async (): Promise<string | null> => rule.getAttribute('aria-valuenow');
    await page.keyboard.press('ArrowRight');
    expect(await reads()).toBe('10');
    await page.keyboard.press('ArrowLeft');
    await page.keyboard.press('ArrowLeft');
    expect(await reads()).toBe('1');
    await page.keyboard.press('End');
    expect(await reads()).toBe('30');
    await page.keyboard.press('Home');
    expect(await reads()).toBe('1');
    expect(await rule.getAttribute('aria-valuetext')).toMatch(/relative noise.*dB.*measured ladder level/);
  });

  const dialogs: readonly [handle: string, address: () => string, opener: string][] = [
    ['curator-demo', () => '/benches/a-draft-bench', 'Open bench'],
    ['developer-demo', () => '/solvers/cgls-stopped-early', 'Enter in a bench'],
    ['curator-demo', () => '/groups/fenland-tank-imaging', 'Leave this group'],
    ['curator-demo', () => '/phantoms/new', 'Copy from a phantom'],
  ];
  it.each(dialogs)('Escape closes a dialog of %s and the focus returns (%#)', async (handle, address, name) => {
    const { page } = await viewer(handle);
    await page.setViewportSize({ width: 1440, height: 900 });
    await page.goto(address());
    await settled(page);
    const opener = page.getByRole('button', { name, exact: true });
    await opener.focus();
    await page.keyboard.press('Enter');
    const dialog = page.getByRole('dialog');
    await dialog.waitFor();
    expect(await page.evaluate(() => document.activeElement?.closest('dialog') !== null), 'the focus is inside').toBe(true);
    expect(await accessibilityFaults(page)).toEqual([]);
    await page.keyboard.press('Escape');
    await dialog.waitFor({ state: 'hidden' });
    expect(await opener.evaluate((element) => document.activeElement === element)).toBe(true);
  });
});
