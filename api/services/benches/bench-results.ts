import type { EntityManager } from '@mikro-orm/sqlite';
import { AppError } from '../../../shared/errors.ts';
import { metrics } from '../../../solvers/metrics/registry';
import { median } from '../../../solvers/statistics/quantiles';
import type { Bench } from '../../entities/bench.ts';
import { RunEntity, type Run } from '../../entities/run.ts';
import { loadRunFigures, type RunFigures } from '../figures/load-run-figures.ts';
import { entriesOf, phantomsOf, type BenchEntry, type LoadedBench } from './find-bench.ts';
import { floorsOf } from './show-bench.ts';

export interface EntryResults extends BenchEntry {
  /** By phantom in the order of the bench; null where there is no run. */
  readonly runs: readonly (Run | null)[];
  /** Of the runs that count: finished and not declined. */
  readonly counted: readonly (Run | null)[];
}

export interface BenchResults {
  /** `resultsKey`. */
  readonly key: string;
  readonly entries: readonly EntryResults[];
  /** Largest model-error floor of the phantoms, and whose it is. */
  readonly floor: number;
  readonly floorPhantom: string | null;
}

/**
 * Names all that a figure of the bench depends on: its entries, the results and the reviewers' words. One plain query: it is
 * asked before every answer from memory.
 */
export async function resultsKey(em: EntityManager, bench: Pick<Bench, 'id' | 'revision'>): Promise<string> {
  const rows: { text: string }[] = await em.execute(
    `select r.id || ':' || r.state || ':' || coalesce(r.result_hash, '') || ':' || r.review || ':' || coalesce(r.reservation, '') as text
     from run r join entry e on r.entry_id = e.id where e.bench_id = ? order by r.id`,
    [bench.id],
  );
  return [bench.id, bench.revision, ...rows.map((row) => row.text)].join('|');
}

/** The runs of a bench, without their figures. A declined run leaves the ranking. */
export async function loadBenchResults(em: EntityManager, bench: LoadedBench): Promise<BenchResults> {
  const versions = phantomsOf(bench).map(({ version }) => version);
  const runs = await em.find(RunEntity, { entry: { bench: bench.id } }, { orderBy: { id: 'asc' } });
  const floors = await floorsOf(em, versions.map((version) => version.definitionHash));
  const byPlace = new Map(runs.map((run) => [`${run.entry.id}/${run.phantomVersion.id}`, run]));
  const entries = entriesOf(bench).map((entered): EntryResults => {
    const own = versions.map((version) => byPlace.get(`${entered.entry.id}/${version.id}`) ?? null);
    return { ...entered, runs: own, counted: own.map((run) => (run && run.state === 'finished' && run.review !== 'declined' ? run : null)) };
  });
  let floor = 0;
  let floorPhantom: string | null = null;
  for (const version of versions) {
    const own = floors.get(version.definitionHash) ?? 0;
    if (own > floor) [floor, floorPhantom] = [own, version.name];
  }
  return { key: await resultsKey(em, bench), entries, floor, floorPhantom };
}

/** Figures of an entry by phantom; null where the run does not count. */
export async function loadEntryFigures(em: EntityManager, results: EntryResults): Promise<(RunFigures | null)[]> {
  const figures: (RunFigures | null)[] = [];
  for (const run of results.counted) figures.push(run ? await loadRunFigures(em, run) : null);
  return figures;
}

/** The trivial reconstruction's figure: the median over the phantoms that have one. Every run of a phantom has the same. */
export function trivialOf(results: readonly EntryResults[], metric: string, phantomIndex?: number): number | null {
  const values = new Map<number, number>();
  for (const { counted } of results) {
    counted.forEach((run, phantom) => {
      const value = run?.trivial?.[metric];
      if (typeof value === 'number' && (phantomIndex === undefined || phantomIndex === phantom)) values.set(phantom, value);
    });
  }
  return values.size === 0 ? null : median([...values.values()]);
}

/** @throws AppError 'validation-failed' */
export function requireMetric(key: string): (typeof metrics)[number] {
  const metric = metrics.find((candidate) => candidate.key === key);
  if (metric) return metric;
  const known = metrics.map((candidate) => candidate.key).join(', ');
  throw new AppError('validation-failed', `No metric is called '${key}'.`, [{ path: ['metric'], message: `There are: ${known}.` }]);
}
