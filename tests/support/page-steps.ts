import { readFile } from 'node:fs/promises';
import type { Download, Locator, Page } from 'playwright-core';
import { expect } from 'vitest';
import { doublesOf, relativeError, supError } from './outside-figures';

export interface Answer {
  readonly status: number;
  readonly body: unknown;
}
/** What the API gives this person. */
export async function read(page: Page, path: string): Promise<Answer> {
  const answer = await page.request.get(`/api/v1${path}`);
  return { status: answer.status(), body: await answer.json() };
}
export const button = (within: Page | Locator, name: string | RegExp) => within.getByRole('button', { name, exact: typeof name === 'string' });
export const heading = (page: Page, name: string | RegExp) => page.getByRole('heading', { name }).first().waitFor();
export const pathOf = (page: Page): string => new URL(page.url()).pathname;
export async function savedText(page: Page, press: Locator): Promise<string> {
  const [download]: [Download, void] = await Promise.all([page.waitForEvent('download'), press.click()]);
  return readFile(await download.path(), 'utf8');
}

export interface Trial {
  readonly level: number;
  readonly draw: number;
  readonly noiseNorm: number;
  readonly metrics: Record<string, number | null>;
}
export interface RunImage {
  readonly image: { readonly data: string };
  readonly truth: { readonly data: string };
  readonly trial: Trial;
}

export interface RunFigures {
  readonly l2: number[][];
  readonly sup: number[][];
  readonly trials: Trial[][];
}

/** Relative L2 and largest error of every draw of a run, from its arrays, by level. */
export async function figuresFromArrays(page: Page, run: { readonly address: string; readonly levels: number; readonly draws: number; readonly background: number }): Promise<RunFigures> {
  const found: RunFigures = { l2: [], sup: [], trials: [] };
  for (let level = 0; level < run.levels; level++) {
    found.l2.push([]);
    found.sup.push([]);
    found.trials.push([]);
    for (let draw = 0; draw < run.draws; draw++) {
      const { status, body } = await read(page, `${run.address}/images?level=${level}&draw=${draw}`);
      expect(status).toBe(200);
      const { image, truth, trial } = body as RunImage;
      expect([trial.level, trial.draw]).toEqual([level, draw]);
      const x = doublesOf(image);
      const t = doublesOf(truth);
      found.l2[level]!.push(relativeError(x, t, run.background));
      found.sup[level]!.push(supError(x, t));
      found.trials[level]!.push(trial);
    }
  }
  return found;
}
