import type { EntityManager } from '@mikro-orm/sqlite';
import { z } from 'zod';
import type { phantomBestSchema } from '../../../shared/contracts/phantoms';
import { distinctGlyphs, solverGlyph } from '../../../shared/domain/glyphs';
import { AppError } from '../../../shared/errors.ts';
import { metrics } from '../../../solvers/metrics/registry';
import { levelStatistics } from '../../../solvers/statistics/error-table';
import { lossOf } from '../../../solvers/statistics/loss';
import { interpolateLevels, placeOnLadder } from '../../../solvers/statistics/ladder-place';
import type { PhantomVersion } from '../../entities/phantom.ts';
import { RunEntity } from '../../entities/run.ts';
import { loadRunFigures } from '../figures/load-run-figures.ts';
import { runParts } from '../runs/find-run.ts';

export const bestQuerySchema = z.strictObject({
  noise: z.coerce.number<string>().min(1e-8).max(1).default(0.01),
  metric: z.string().regex(/^[a-z0-9-]{1,60}$/).default('relative-l2-error'),
});

const shownRuns = 10;

/** Finished runs on a version, best first at a noise level; between two levels their figures are interpolated. Declined ones are left out. */
export async function listBest(em: EntityManager, input: { readonly version: Pick<PhantomVersion, 'id'>; readonly noise: number; readonly metric: string }): Promise<z.input<typeof phantomBestSchema>> {
  const { version, noise, metric: key } = input;
  const metric = metrics.find((candidate) => candidate.key === key);
  if (!metric) throw new AppError('validation-failed', `No metric is called '${key}'.`, [{ path: ['metric'], message: `There are: ${metrics.map((m) => m.key).join(', ')}.` }]);
  const runs = await em.find(
    RunEntity,
    { phantomVersion: version.id, state: 'finished', review: { $ne: 'declined' }, entry: { bench: { state: { $ne: 'draft' } } } },
    { populate: runParts },
  );
  let interpolated = false;
  const items: z.input<typeof phantomBestSchema>['items'] = [];
  for (const run of runs) {
    // Levels of another axis are no noise levels.
    if (run.axis && run.axis.key !== 'noise') continue;
    const lowest = run.ladder[0];
    const highest = run.ladder.at(-1);
    if (lowest === undefined || highest === undefined || noise < lowest || noise > highest) continue;
    const { values } = await loadRunFigures(em, run);
    const column = values.get(key);
    if (!column) continue;
    const at = (level: number) => levelStatistics(run.ladder[level]!, [...column.subarray(level * run.draws, (level + 1) * run.draws)].map((value) => (Number.isNaN(value) ? null : value)), metric.better);
    const place = placeOnLadder(run.ladder, noise);
    const low = at(place.below);
    const high = place.share === 0 ? low : at(place.below + 1);
    const figure = (of: 'median' | 'p05' | 'p95'): number | null => interpolateLevels(low[of], high[of], place.share);
    const [median, p05, p95] = [figure('median'), figure('p05'), figure('p95')];
    if (median === null || p05 === null || p95 === null) continue;
    interpolated ||= place.interpolated;
    const solver = run.entry.$.solverVersion.$.solver.$;
    items.push({
      run: run.id,
      solver: { slug: solver.slug, id: solver.id, name: solver.name },
      group: { slug: solver.group.$.slug, name: solver.group.$.name },
      glyph: solverGlyph(solver.glyph),
      median,
      p05,
      p95,
      review: run.review,
      reservation: run.reservation ?? null,
    });
  }
  items.sort((a, b) => lossOf(a.median, metric.better) - lossOf(b.median, metric.better) || (a.run < b.run ? -1 : 1));
  const shown = items.slice(0, shownRuns);
  const glyphs = distinctGlyphs(shown.map((item) => item.glyph));
  return { noise, metric: key, interpolated, items: shown.map((item, i) => ({ ...item, glyph: glyphs[i]! })) };
}
