import type { EntityManager } from '@mikro-orm/sqlite';
import type { SolverStability } from '../../../shared/contracts/solvers';
import { RunEntity } from '../../entities/run.ts';
import { requireMetric } from '../benches/bench-results.ts';
import { floorsOf } from '../benches/show-bench.ts';
import { loadRunFigures } from '../figures/load-run-figures.ts';
import { levelTable, runSheet } from '../figures/run-tables.ts';
import { axisOf } from '../runs/axis-of.ts';
import { isSealed } from '../phantoms/phantom-access.ts';

/** One sheet for each finished run of a version, declined ones left out. */
export async function solverStability(em: EntityManager, input: { readonly versionId: string; readonly metric: string; readonly now: Date }): Promise<SolverStability> {
  const { versionId, now } = input;
  const { key, better } = requireMetric(input.metric);
  const runs = await em.find(
    RunEntity,
    { state: 'finished', review: { $ne: 'declined' }, entry: { solverVersion: versionId } },
    { populate: ['phantomVersion', 'phantomVersion.phantom'], orderBy: { id: 'asc' } },
  );
  // Runs over the noise first: they are what a solver's page opens with.
  runs.sort((a, b) => Number(axisOf(a).key !== 'noise') - Number(axisOf(b).key !== 'noise'));
  const floors = await floorsOf(em, runs.map((run) => run.phantomVersion.$.definitionHash));
  const items: SolverStability['items'] = [];
  for (const run of runs) {
    const version = run.phantomVersion.$;
    const figures = await loadRunFigures(em, run);
    items.push({
      run: run.id,
      phantom: { slug: version.phantom.$.slug, id: version.phantom.id, name: version.name, version: version.n, sealed: isSealed(version, now), sealedUntil: version.sealedUntil ?? null },
      axis: axisOf(run),
      sheet: better === 'lower' ? runSheet(run, figures, key) : { metric: key, model: 'none', exponent: null, floor: null, constant: null, breakdown: null, breakdownNote: null, reason: 'The law is fitted to metrics where smaller is better.' },
      levels: levelTable(figures, run.ladder, key),
      trivial: run.trivial?.[key] ?? null,
      modelErrorFloor: floors.get(version.definitionHash) ?? 0,
      secondsPerReconstruction: run.secondsPerReconstruction ?? null,
      timeRatio: run.timeRatio ?? null,
    });
  }
  return { metric: key, items };
}
