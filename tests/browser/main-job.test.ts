import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { csvOf, discPicture, doublesOf, mean, minus, norm, pointElectrodeFrame, printedError, quantile, recordsOf } from '../support/outside-figures';
import { button, figuresFromArrays, heading, pathOf, read, savedText, type RunFigures } from '../support/page-steps';
import { launchBrowser, openViewer, startSite, type Site, type Viewer } from '../support/site';

/*
 * The whole job on a site that starts empty, by five people one after the other, through its pages. What the pages show is
 * held against figures computed here from files made here, or from the raw arrays, with no code of the product.
 */
const levels = [0.05, 0.1, 0.3];
const draws = 6;
const background = 1;
const radius = 0.15;
const electrodes = 16;
const current = 0.005;
/** A disc of 1.5 S/m in 1 S/m: greys 50 and 75 with the scale 5.1 S/m over grey 0 to 1. */
const picture = { side: 64, grey: 50, disc: { x: 40, y: 22, radius: 9, grey: 75 }, scale: '5.1' };
const referenceFrame = pointElectrodeFrame(electrodes, current, 1);
const changedFrame = pointElectrodeFrame(electrodes, current, 1.02);

const tikhonov = 'Tikhonov, gradient, discrepancy';
const truncated = 'Truncated SVD, cross-validated';
const trivial = 'Plain background';
const slow = 'Gauss-Newton, sixty steps';

/** How long a page may take to follow; a busy machine takes a while. */
const soon = { timeout: 30_000 };

let site: Site;
let browser: Browser;
const people = new Map<string, Viewer>();
/** Run addresses by solver name, and what the steps hand on. */
const runs: Record<string, string> = {};
let phantomAddress = '';
let benchAddress = '';

beforeAll(async () => {
  // One worker: the runs wait for each other, so that waiting and working are both seen.
  site = await startSite({ WORKERS: '1' });
  browser = await launchBrowser();
});
afterAll(async () => {
  for (const { faults, page } of people.values()) if (faults.length) console.error(page.url(), faults);
  await browser?.close();
  await site?.dispose();
});

async function as(handle: string): Promise<Page> {
  const known = people.get(handle);
  if (known) return known.page;
  const viewer = await openViewer(browser, site, handle === 'reader' ? {} : { handle });
  viewer.page.setDefaultTimeout(60_000);
  people.set(handle, viewer);
  return viewer.page;
}

const computed = new Map<string, RunFigures>();
async function figuresOf(page: Page, name: string): Promise<RunFigures> {
  const known = computed.get(name) ?? (await figuresFromArrays(page, { address: runs[name]!, levels: levels.length, draws, background }));
  computed.set(name, known);
  return known;
}

describe.sequential('the main job', () => {
  it('a group owner creates a group and invites the curator by e-mail; the administrator sees the message; the curator accepts', async () => {
    const owner = await as('owner-demo');
    await owner.goto('/groups');
    await owner.getByLabel('Name', { exact: true }).fill('Fenland Tank Imaging');
    await owner.getByRole('textbox', { name: 'Description' }).fill('Tanks with electrodes around them.');
    await button(owner, 'Create group').click();
    await heading(owner, 'Fenland Tank Imaging');
    await owner.getByLabel('Invite by e-mail').fill('curator-demo@hadamark.example');
    const form = owner.locator('#invite');
    await form.getByLabel('Curator').check();
    await form.getByLabel('Observer').uncheck();
    await button(form, 'Send invitation').click();
    await owner.getByText('curator-demo@hadamark.example').first().waitFor();

    const admin = await as('admin-demo');
    await admin.goto('/admin?tab=outbox');
    await admin.getByText('No SMTP server is set').waitFor();
    const mail = admin.locator('details.mail', { hasText: 'Fenland Tank Imaging' });
    await mail.locator('summary').click();
    const link = /https?:\/\/\S+#invitation=\S+/.exec((await mail.locator('pre').textContent()) ?? '')?.[0] ?? '';
    expect(link.startsWith(`${site.url}/groups/`)).toBe(true);

    const curator = await as('curator-demo');
    await curator.goto(link);
    await button(curator, 'Accept invitation').click();
    await curator.getByText('You are curator here').waitFor();
  });

  it('the curator uploads a picture as ground truth and frames that are refused by row and column, then accepted', async () => {
    const page = await as('curator-demo');
    await page.goto('/phantoms/new');
    await heading(page, 'New phantom');
    await button(page.locator('#truth'), 'File').click();
    await page.locator('#truth input[type=file]').setInputFiles({ name: 'bright-disc.png', mimeType: 'image/png', buffer: discPicture(picture.side, picture.disc, picture.grey) });
    await page.getByText(`${picture.side} × ${picture.side}, double`).waitFor();
    await page.getByRole('textbox', { name: 'Scale' }).fill(picture.scale);
    await page.getByRole('textbox', { name: 'Offset' }).fill('0');
    await page.getByRole('textbox', { name: 'Background' }).fill(String(background));
    await page.getByRole('combobox', { name: 'Noise is relative to' }).selectOption('difference');

    await page.getByRole('radio', { name: /On a tank, plant or sample/ }).check();
    const file = page.locator('#frames input[type=file]');
    expect(await file.isDisabled(), 'locked until the statement is complete').toBe(true);
    await page.getByLabel('What was measured, with which instrument').fill('Point electrodes on a disc, from the closed form');
    const faulty = [...changedFrame].map(String);
    faulty[16] = 'NaN';
    await file.setInputFiles({ name: 'not-a-number.csv', mimeType: 'text/csv', buffer: csvOf([referenceFrame, faulty]) });
    const alert = page.locator('#frames').getByRole('alert');
    await alert.getByText(/Row 2, column 17.*NaN/).waitFor();
    await file.setInputFiles({ name: 'short.csv', mimeType: 'text/csv', buffer: csvOf([referenceFrame, changedFrame.slice(0, -1)]) });
    await alert.getByText(/Row 2, column 208.*207 values.*208/).waitFor();

    const [answer] = await Promise.all([
      page.waitForResponse((response) => response.url().endsWith('/api/v1/frames') && response.request().method() === 'POST'),
      file.setInputFiles({ name: 'frames.csv', mimeType: 'text/csv', buffer: csvOf([referenceFrame, changedFrame]) }),
    ]);
    const stored = (await answer.json()) as { referenceNorm: number; largestChange: number; frames: number; valuesPerFrame: number };
    expect(stored).toMatchObject({ frames: 2, valuesPerFrame: 208 });
    // Sums of 208 doubles in another order: rounding only.
    expect(stored.referenceNorm / norm(referenceFrame)).toBeCloseTo(1, 12);
    const change = norm(minus(changedFrame, referenceFrame));
    expect(stored.largestChange / change).toBeCloseTo(1, 12);
    await page.getByText('2 frames of 208 values').waitFor();
    const shown = /Norm of the largest change (\d+(?:\.\d+)?)\s*(µ|m)?V/.exec((await page.locator('#frames .found').textContent()) ?? '');
    // Printed with two significant digits.
    expect(Number(shown?.[1]) * (shown?.[2] === 'µ' ? 1e-6 : shown?.[2] === 'm' ? 1e-3 : 1) / change).toBeCloseTo(1, 1);
  });

  it('the curator sees the simulated data and the checks before anything is saved, keeps a draft and submits it', async () => {
    const page = await as('curator-demo');
    const live = page.getByRole('complementary', { name: 'Live simulation' });
    await live.getByText(/simulated in/).waitFor({ timeout: 120_000 });
    expect(((await read(page, '/phantoms')).body as { items: unknown[] }).items, 'nothing is stored yet').toEqual([]);
    await page.getByLabel('Name', { exact: true }).fill('Bright disc in grey');
    await page.getByRole('textbox', { name: 'Description' }).fill('A disc of 1.5 S/m in 1 S/m, drawn as a picture: $\\sigma = 5.1\\,g$ for the grey value $g$.');
    await page.getByRole('combobox', { name: 'Licence' }).selectOption('CC-BY-4.0');
    const submit = button(live, 'Submit for review');
    await expect.poll(() => submit.isEnabled(), { timeout: 120_000, message: 'all checks pass and no field is left' }).toBe(true);
    await button(page, 'Keep as draft').first().click();
    await page.getByText('This is a draft; only the group sees it').waitFor();
    phantomAddress = pathOf(page);
    expect(phantomAddress).toBe('/phantoms/bright-disc-in-grey/v/1');

    const reader = await as('reader');
    expect((await reader.request.get('/api/v1/phantoms/bright-disc-in-grey')).status(), 'a draft is not published').toBe(404);
    await button(page, 'Submit for review').click();
    await page.getByText('Waits for a reviewer outside the group.').waitFor({ timeout: 120_000 });
  });

  it('an independent reviewer publishes it; the truth on the page is the picture', async () => {
    const page = await as('reviewer-demo');
    await page.goto('/review?tab=phantoms');
    await page.getByRole('link', { name: 'Review this phantom' }).click();
    await page.getByRole('radio', { name: /^Publish/ }).check();
    await page.getByRole('textbox', { name: 'Reason, kept with the version' }).fill('Picture and extent agree, every check passes.');
    await button(page, 'Publish').click();
    await page.getByText('The truth is public.').waitFor();

    const { body } = await read(page, '/phantoms/bright-disc-in-grey/versions/1/simulation');
    const { truth, grid, clean, frame, reference, noiseScale, truthRange } = body as {
      truth: { data: string }; grid: { nx: number; xMin: number; xMax: number }; clean: number[]; frame: number[]; reference: number[]; noiseScale: number; truthRange: number[];
    };
    const pixel = ((grid.xMax - grid.xMin) / grid.nx) ** 2;
    const excess = doublesOf(truth).reduce((sum, value) => sum + (value - background), 0) * pixel;
    let bright = 0;
    for (let row = 0; row < picture.side; row++) for (let col = 0; col < picture.side; col++) if ((col + 0.5 - picture.disc.x) ** 2 + (row + 0.5 - picture.disc.y) ** 2 < picture.disc.radius ** 2) bright++;
    // Both are integrals of one step function; averaging by sub-samples of a pixel may move its edge by a share of a sample.
    expect(excess / (0.5 * bright * ((2 * radius) / picture.side) ** 2)).toBeCloseTo(1, 1.7);
    expect(truthRange[0]).toBeCloseTo(1, 9);
    expect(truthRange[1]).toBeCloseTo(1.5, 9);
    expect(norm(minus(minus(frame, reference), clean)), 'difference data').toBe(0);
    expect(noiseScale / norm(clean)).toBeCloseTo(1, 12);
    // A conductive body lowers the transfer impedances: the signal has one sign where drive and measurement are neighbours.
    expect(frame).toHaveLength(208);
  });

  it('the curator makes a bench with a short ladder and opens it', async () => {
    const page = await as('curator-demo');
    await page.goto('/benches/new');
    await page.getByRole('textbox', { name: 'Short name' }).fill('Disc in grey, 16 electrodes');
    await page.getByRole('textbox', { name: 'Question' }).fill('Which method finds a bright disc in a grey body?');
    await page.getByRole('checkbox', { name: /Bright disc in grey, version 1/ }).check();
    await page.getByRole('textbox', { name: 'Noise levels' }).fill('5, 10, 30');
    await page.getByRole('textbox', { name: 'Draws per level' }).fill('0');
    await button(page, 'Save draft').click();
    await page.getByText('Write a whole number from 1 to 200.').waitFor();
    await page.getByRole('textbox', { name: 'Draws per level' }).fill(String(draws));
    await page.getByRole('textbox', { name: 'Seed' }).fill('77');
    await button(page, 'Save draft').click();
    await heading(page, 'Which method finds a bright disc in a grey body?');
    benchAddress = pathOf(page);
    await button(page, 'Open bench').click();
    await button(page.getByRole('dialog'), 'Open bench').click();
    await page.getByText('Bench opened.').waitFor();
    await page.getByText('No solver is entered yet').waitFor();
  });

  it('the developer creates a group, registers four configurations and enters them', async () => {
    const page = await as('developer-demo');
    await page.goto('/groups');
    await page.getByLabel('Name', { exact: true }).fill('Ridge Inversion');
    await button(page, 'Create group').click();
    await heading(page, 'Ridge Inversion');
    const slug = benchAddress.split('/').at(-1)!;
    const enter = async (name: string, family: RegExp, fill: () => Promise<void>) => {
      await page.goto(`/solvers/new?bench=${slug}`);
      await page.getByRole('textbox', { name: 'Name in the table' }).fill(name);
      await page.getByRole('radiogroup', { name: 'Method family' }).getByRole('radio', { name: family }).check({ force: true });
      await fill();
      await page.getByLabel('The forward model uses a discretisation of its own, not that of the data').check();
      await button(page, 'Submit for validation').click();
      await page.waitForURL(/\/runs\//);
      runs[name] = pathOf(page);
    };
    await enter(tikhonov, /^Variational/, async () => {
      await page.getByRole('combobox', { name: 'Algorithm' }).selectOption('tikhonov');
      await page.getByRole('combobox', { name: 'Penalty' }).selectOption('gradient');
      await page.getByRole('radio', { name: /^Discrepancy/ }).check();
    });
    await enter(truncated, /^Spectral/, async () => {
      await page.getByRole('combobox', { name: 'Algorithm' }).selectOption('truncated-svd');
      await page.getByRole('radio', { name: /cross-validation/i }).check();
      await page.getByText(/^L2 relative|Relative L2/).first().waitFor();
    });
    await enter(trivial, /^Baseline/, () => Promise.resolve());
    // The slow one last, so that its page stands open while it works.
    await enter(slow, /^Nonlinear/, async () => {
      await page.getByRole('combobox', { name: 'Algorithm' }).selectOption('gauss-newton');
      await page.getByRole('textbox', { name: 'Most iterations' }).fill('60');
      await page.getByRole('radio', { name: /^Fixed/ }).check();
    });
    expect(Object.keys(runs)).toHaveLength(4);
  });

  it('the developer watches progress, which survives a reload, and cancels the slow run; the others finish', async () => {
    const page = await as('developer-demo');
    const progress = page.getByRole('region', { name: 'Progress' });
    const done = async (): Promise<number> => Number(/(\d+) of 18/.exec((await progress.textContent()) ?? '')?.[1] ?? -1);
    await expect.poll(done, { timeout: 120_000, message: 'draws are counted while the page stands' }).toBeGreaterThan(0);
    const before = await done();
    await page.reload();
    await progress.getByText(/trials done/).waitFor();
    expect(await done()).toBeGreaterThanOrEqual(before);
    await button(progress, 'Cancel this run').click();
    await progress.getByText('Stopped').waitFor();

    for (const name of [tikhonov, truncated, trivial]) {
      await page.goto(runs[name]!);
      await heading(page, 'Error table');
      await page.getByText('Unreviewed').first().waitFor();
    }
  });

  it('the table of a run shows what its arrays give', async () => {
    const page = await as('reader');
    for (const name of [tikhonov, truncated, trivial]) {
      const { l2, sup, trials } = await figuresOf(page, name);
      // The product sums in another order: rounding only.
      trials.forEach((row, level) => row.forEach((trial, draw) => {
        expect(trial.metrics['relative-l2-error']! / l2[level]![draw]!).toBeCloseTo(1, 10);
        expect(trial.metrics['sup-error']! / sup[level]![draw]!).toBeCloseTo(1, 10);
      }));
      await page.goto(runs[name]!);
      const rows = page.locator('#error-table tbody tr');
      await rows.first().waitFor();
      for (const [level] of levels.entries()) {
        const cells = (await rows.nth(level).locator('td.num').allTextContents()).map((text) => /^[\d.]+/.exec(text)?.[0]);
        const [errors, largest] = [l2[level]!, sup[level]!];
        expect([cells[0], cells[2], cells[3], cells[4]], `${name}, level ${level}: mean, 5 %, 95 %, worst`)
          .toEqual([mean(errors), quantile(errors, 0.05), quantile(errors, 0.95), Math.max(...errors)].map(printedError));
        expect([cells[5], cells[7]], `${name}, level ${level}: largest error, mean and worst`).toEqual([mean(largest), Math.max(...largest)].map(printedError));
      }
    }
    const { l2 } = await figuresOf(page, trivial);
    for (const error of l2.flat()) expect(error).toBeCloseTo(1, 12);
    // Regularised inversion of data with 5 % noise is better than saying nothing; a bound from the meaning, not from a run.
    expect(quantile((await figuresOf(page, tikhonov)).l2[0]!, 0.5)).toBeLessThan(1);
  });

  it('the noise of every draw has the level the ladder says', async () => {
    const page = await as('reader');
    const { trials } = await figuresOf(page, tikhonov);
    const { body } = await read(page, `${runs[tikhonov]}/replay`);
    const clean = norm(doublesOf((body as { clean: { data: string } }).clean));
    trials.forEach((row, level) => row.forEach(({ noiseNorm }) => expect(noiseNorm / clean / levels[level]!).toBeCloseTo(1, 10)));
  });

  it('the reviewer opens the queue, inspects, recomputes, and signs off one run plainly and one with a reservation', async () => {
    const page = await as('reviewer-demo');
    await page.goto('/review');
    await page.getByText(/Three tables wait/).waitFor();
    const finished = ((await read(page, '/runs')).body as { items: { finishedAt: string | null; state: string; solver: { name: string } }[] }).items.filter((run) => run.state === 'finished');
    const oldestFirst = finished.sort((p, q) => Date.parse(p.finishedAt!) - Date.parse(q.finishedAt!)).map((run) => run.solver.name);
    expect(await page.locator('table.q tbody tr .sv a').allTextContents()).toEqual(oldestFirst);
    await page.locator('table.q').getByRole('link', { name: truncated }).click();
    await heading(page, 'Error table');
    await button(page, 'Recompute on the server').click();
    await page.getByText('Same bits on the server for reviewer-demo').waitFor({ timeout: 120_000 });

    const sign = async (option: RegExp, label: string, words: string) => {
      const form = page.getByRole('form', { name: 'Verdict' });
      const record = button(form, 'Record verdict');
      expect(await record.isDisabled(), 'nothing is inspected yet').toBe(true);
      await form.getByRole('radio', { name: option }).check();
      await form.getByLabel(label).fill(words);
      for (const part of ['Error table', 'Images', 'Checks', 'Provenance']) await form.getByLabel(part).check();
      await record.click();
      await page.getByText(/Verdict recorded/).waitFor();
    };
    await sign(/^Signed off The table/, 'Reason', 'Table, images, checks and provenance agree with each other.');
    await page.locator('.thread').getByText('Table, images, checks and provenance agree with each other.').waitFor();
    await page.goto(runs[tikhonov]!);
    await sign(/^Signed off with a reservation/, 'Reservation, shown beside every figure', 'One phantom with one disc only: says little about sharp corners.');
    await page.getByText('One phantom with one disc only: says little about sharp corners.').first().waitFor();

    // Nobody reviews the work of their own group, and the developer is no reviewer.
    const developer = await as('developer-demo');
    await developer.goto(runs[trivial]!);
    await heading(developer, 'Error table');
    expect(await developer.getByRole('form', { name: 'Verdict' }).count()).toBe(0);
  });

  it('the administrator reads the messages to the owner and the trail of who did what and when', async () => {
    const page = await as('admin-demo');
    await page.goto('/admin?tab=outbox');
    const id = runs[truncated]!.split('/').at(-1)!;
    const mail = page.locator('details.mail', { hasText: `${id} was signed off: ${truncated}` });
    await mail.waitFor();
    expect(await mail.locator('summary').textContent()).toContain('developer-demo@hadamark.example');
    await mail.locator('summary').click();
    expect(await mail.locator('pre').textContent()).toContain('Table, images, checks and provenance agree with each other.');
    await page.locator('details.mail', { hasText: 'signed off with a reservation' }).first().waitFor();

    await page.goto('/admin?tab=audit');
    const rows = page.locator('table.trail tbody tr');
    await rows.first().waitFor();
    while (await button(page, 'Older entries').isVisible()) {
      const count = await rows.count();
      await button(page, 'Older entries').click();
      await expect.poll(() => rows.count(), soon).toBeGreaterThan(count);
    }
    const trail = await Promise.all((await rows.all()).map(async (row) => (await row.locator('td').allTextContents()).slice(0, 3)));
    const acted = trail.map(([, who, what]) => `${who} ${what}`);
    for (const line of ['owner-demo group.created', 'curator-demo phantom.submitted', 'reviewer-demo phantom.published', 'curator-demo bench.opened', 'reviewer-demo run.signed-off', 'reviewer-demo run.signed-off-with-reservation', 'developer-demo run.cancelled'])
      expect(acted).toContain(line);
    for (const [when] of trail) expect(when).toMatch(/^\d{1,2} [A-Z][a-z]+ \d{4}, \d\d:\d\d$/);
  });

  it('a reader without an account reads the ranking at the cursor, moves it by keyboard, and the address keeps what was chosen', async () => {
    const page = await as('reader');
    await page.goto(`${benchAddress}?noise=0.1`);
    await heading(page, /Ranking at 10/);
    const medianOf = async (name: string): Promise<string | null> => page.locator('table.rk tbody tr', { hasText: name }).locator('td.num').first().textContent();
    const expected = async (name: string, level: number, of: 'l2' | 'sup' = 'l2') => printedError(quantile((await figuresOf(page, name))[of][level]!, 0.5));
    for (const name of [tikhonov, truncated, trivial]) expect(await medianOf(name), name).toBe(await expected(name, 1));
    expect(await page.locator('table.rk tr.base td.num').first().textContent()).toBe('1.00');
    expect(await page.locator('table.rk tbody tr', { hasText: tikhonov }).textContent()).toContain('With a reservation');

    const rule = page.getByRole('slider', { name: 'Relative noise level' });
    await rule.focus();
    await page.keyboard.press('ArrowRight');
    await heading(page, /Ranking at 30/);
    await expect.poll(() => new URL(page.url()).searchParams.get('noise'), soon).toBe('0.3');
    await expect.poll(() => medianOf(truncated), soon).toBe(await expected(truncated, 2));
    await page.keyboard.press('Home');
    await heading(page, /Ranking at 5\.?0?\s*%/);
    await expect.poll(() => medianOf(tikhonov), soon).toBe(await expected(tikhonov, 0));

    await page.getByRole('combobox', { name: 'Rank by' }).selectOption('sup-error');
    await button(page.locator('table.rk'), `Follow ${truncated} in the charts`).click();
    await expect.poll(() => [...new URL(page.url()).searchParams.keys()].sort(), soon).toEqual(['focus', 'metric', 'noise']);
    await page.reload();
    await heading(page, /Ranking at 5\.?0?\s*%/);
    expect(await page.getByRole('combobox', { name: 'Rank by' }).inputValue()).toBe('sup-error');
    expect(await button(page.locator('table.rk'), `Follow ${truncated} in the charts`).getAttribute('aria-pressed')).toBe('true');
    await expect.poll(() => medianOf(truncated), soon).toBe(await expected(truncated, 0, 'sup'));
  });

  it('the downloads hold the medians and the 5 and 95 % quantiles over the draws', async () => {
    const page = await as('reader');
    await page.goto(`${benchAddress}?noise=0.1`);
    const table = recordsOf((await savedText(page, page.getByRole('link', { name: 'Full table as CSV' }))).replace(/"[^"]*"/g, (text) => text.slice(1, -1).replaceAll(',', ';')));
    for (const name of [tikhonov, truncated, trivial]) {
      const { l2 } = await figuresOf(page, name);
      for (const [level, noise] of levels.entries()) {
        const row = table.find((r) => r['run'] === runs[name]!.split('/').at(-1) && r['metric'] === 'relative-l2-error' && Number(r['noise']) === noise);
        expect(Number(row?.['draws'])).toBe(draws);
        for (const [column, share] of [['p05', 0.05], ['median', 0.5], ['p95', 0.95]] as const)
          expect(Number(row?.[column]) / quantile(l2[level]!, share), `${name}, ${noise}, ${column}`).toBeCloseTo(1, 10);
        expect(Number(row?.['trivial'])).toBeCloseTo(1, 12);
      }
    }
    expect(await savedText(page, page.getByRole('link', { name: 'Ranking as CSV' }))).toContain(truncated);
    await page.goto(runs[tikhonov]!);
    const trials = recordsOf(await savedText(page, page.getByRole('link', { name: 'All trials' })));
    expect(trials).toHaveLength(levels.length * draws);
  });

  it('the reader recomputes the run in the browser and gets the same bits', async () => {
    const page = await as('reader');
    await page.goto(`${benchAddress}?noise=0.1`);
    await page.locator('table.rk').getByRole('link', { name: tikhonov }).click();
    await page.waitForURL((url) => url.pathname === runs[tikhonov]);
    await button(page, 'Recompute here').click();
    await page.getByText('Same bits in this browser').waitFor({ timeout: 120_000 });
  });

  it('no page threw or logged an error on the way', () => {
    expect([...people].flatMap(([who, { faults }]) => faults.map((fault) => `${who}: ${fault}`))).toEqual([]);
  });
});
