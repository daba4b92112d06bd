import { spawn, type ChildProcess } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import axe from 'axe-core';

const root = resolve(import.meta.dirname, '../..');

/** The built site on a port of its own, with a data folder that is removed at the end. */
export interface Site {
  readonly url: string;
  readonly dataDir: string;
  /** Ends the server as Ctrl-C does and answers with its exit code. */
  stop(signal?: NodeJS.Signals): Promise<number | null>;
  /** Starts it again on the same data. */
  restart(): Promise<void>;
  dispose(): Promise<void>;
  readonly output: () => string;
}

async function freePort(): Promise<number> {
  return new Promise((done, fail) => {
    const server = createServer();
    server.on('error', fail);
    server.listen(0, '127.0.0.1', () => {
      const address = server.address();
      server.close(() => (address && typeof address === 'object' ? done(address.port) : fail(new Error('No port.'))));
    });
  });
}

export async function startSite(env: Record<string, string> = {}): Promise<Site> {
  const main = join(root, 'dist', 'server', 'main.js');
  if (!existsSync(main)) throw new Error('The site is not built: run `npm run build`, or the whole of `npm test`.');
  const dataDir = mkdtempSync(join(tmpdir(), 'hadamark-site-'));
  const port = await freePort();
  const url = `http://127.0.0.1:${port}`;
  let child: ChildProcess | null = null;
  let output = '';
  const start = async (): Promise<void> => {
    const started = spawn(process.execPath, ['--enable-source-maps', main], {
      cwd: root, stdio: ['ignore', 'pipe', 'pipe'],
      env: { ...process.env, NODE_ENV: 'development', PORT: String(port), HOST: '127.0.0.1', PUBLIC_URL: url, DATA_DIR: dataDir, SEED_DEMO: '0', RATE_LIMIT: 'off', LOG_LEVEL: 'warn', ...env },
    });
    child = started;
    const collect = (chunk: Buffer): void => {
      output = (output + chunk.toString()).slice(-50_000);
    };
    started.stdout.on('data', collect);
    started.stderr.on('data', collect);
    for (let attempt = 0; attempt < 300; attempt++) {
      if (started.exitCode !== null) throw new Error(`The server ended with ${started.exitCode}:\n${output}`);
      const answer = await fetch(`${url}/api/v1/health`).catch(() => null);
      if (answer?.ok) return;
      await new Promise((r) => setTimeout(r, 100));
    }
    throw new Error(`The server did not answer within 30 s:\n${output}`);
  };
  const stop = (signal: NodeJS.Signals = 'SIGINT'): Promise<number | null> =>
    new Promise((done) => {
      const running = child;
      if (!running || running.exitCode !== null) return done(running?.exitCode ?? null);
      running.once('exit', (code) => done(code));
      running.kill(signal);
    });
  await start();
  return {
    url, dataDir, stop, restart: start, output: () => output,
    dispose: async () => {
      await stop();
      rmSync(dataDir, { recursive: true, force: true });
    },
  };
}

export async function launchBrowser(): Promise<Browser> {
  const executablePath = process.env.CHROMIUM_PATH ?? ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome'].find((path) => existsSync(path));
  if (!executablePath) throw new Error('No Chromium: install your system\'s package, or set CHROMIUM_PATH.');
  return chromium.launch({
    executablePath, headless: true,
    args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync'],
  });
}

export interface Viewer {
  readonly page: Page;
  readonly context: BrowserContext;
  /** What the page logged as an error, or threw. */
  readonly faults: string[];
}

/** A person at a browser of their own. Faults on the page's console are collected. */
export async function openViewer(browser: Browser, site: Site, options: { handle?: string; width?: number; height?: number; dark?: boolean } = {}): Promise<Viewer> {
  const context = await browser.newContext({
    baseURL: site.url, viewport: { width: options.width ?? 1440, height: options.height ?? 900 }, colorScheme: options.dark ? 'dark' : 'light', reducedMotion: 'reduce', acceptDownloads: true,
  });
  const page = await context.newPage();
  page.setDefaultTimeout(30_000);
  const faults: string[] = [];
  page.on('pageerror', (error) => faults.push(error.message));
  page.on('console', (message) => {
    if (message.type() === 'error' && !/Failed to load resource/.test(message.text())) faults.push(message.text());
  });
  if (options.handle) await signIn(page, options.handle);
  return { page, context, faults };
}

/** Takes a demo role through the local stand-in, as a person does. */
export async function signIn(page: Page, handle: string): Promise<void> {
  await page.goto('/sign-in');
  await page.getByRole('button', { name: `Sign in as ${handle}` }).or(page.getByRole('link', { name: `Sign in as ${handle}` })).click();
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in') && !url.pathname.startsWith('/auth') && !url.pathname.startsWith('/local-github'));
}

/** Accessibility faults of the page as it stands, one line each. */
export async function accessibilityFaults(page: Page): Promise<string[]> {
  await page.evaluate(axe.source);
  const found = await page.evaluate(async () => {
    const run = (window as unknown as { axe: { run(context: unknown, options: unknown): Promise<{ violations: { id: string; nodes: { target: string[]; failureSummary?: string }[] }[] }> } }).axe.run;
    const result = await run(document, { runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'] });
    return result.violations.flatMap((violation) => violation.nodes.map((node) => `${violation.id}: ${node.target.join(' ')} ${node.failureSummary ?? ''}`));
  });
  return found;
}

/** Whether the page scrolls sideways: a layout fault at any width. */
export const overflowsSideways = (page: Page): Promise<boolean> => page.evaluate(() => document.documentElement.scrollWidth > document.documentElement.clientWidth + 1);
