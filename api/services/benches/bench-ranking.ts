import type { EntityManager } from '@mikro-orm/sqlite';
import type { Ranking } from '../../../shared/contracts/benches';
import type { ReviewState } from '../../../shared/domain/states';
import { metrics } from '../../../solvers/metrics/registry';
import type { RankedEntry } from '../../../solvers/statistics/blocks';
import { interpolateLevels, placeOnLadder } from '../../../solvers/statistics/ladder-place';
import { rankAtNoise } from '../../../solvers/statistics/ranking';
import type { Bench } from '../../entities/bench.ts';
import type { Run } from '../../entities/run.ts';
import { BoundedCache } from '../figures/bounded-cache.ts';
import { drawsAt } from '../figures/run-tables.ts';
import { loadBenchResults, loadEntryFigures, requireMetric, resultsKey, trivialOf, type BenchResults, type EntryResults } from './bench-results.ts';
import { entryRefs, entrySeries, pooledTable } from './bench-series.ts';
import { findBench, phantomsOf, type LoadedBench } from './find-bench.ts';

const cache = new BoundedCache<Ranking>(500);
const medianCache = new BoundedCache<ReadonlyMap<string, readonly (readonly (number | null)[])[]>>(50);

/**
 * The ranking at a noise level. It depends on results and reviewers' words alone, which its key in the cache names, so it
 * is computed once for each noise and metric.
 */
export async function rankBench(em: EntityManager, input: { readonly bench: Pick<Bench, 'id' | 'slug' | 'revision'>; readonly noise: number; readonly metric: string }): Promise<Ranking> {
  const { noise, metric } = input;
  const kept = cache.get(`${await resultsKey(em, input.bench)}|${metric}|${noise}`);
  if (kept) return kept;
  const bench = await findBench(em, input.bench.slug);
  const results = await loadBenchResults(em, bench);
  return cache.set(`${results.key}|${metric}|${noise}`, await compute(em, { bench, noise, metric, results }));
}

async function compute(em: EntityManager, input: { readonly bench: LoadedBench; readonly noise: number; readonly metric: string; readonly results: BenchResults }): Promise<Ranking> {
  const { bench, noise, metric, results } = input;
  const { better } = requireMetric(metric);
  // An entry whose every run was declined is no row any more; one that still computes is.
  const entries = results.entries.filter(({ runs, counted }) => counted.some((run) => run !== null) || runs.some((run) => run !== null && run.review !== 'declined'));
  const ranked: RankedEntry[] = [];
  for (const entry of entries) {
    const figures = await loadEntryFigures(em, entry);
    ranked.push({ id: entry.entry.id, values: figures.map((own) => (own ? bench.ladder.map((_, level) => drawsAt(own, metric, level)) : null)) });
  }
  const ranking = rankAtNoise({ ladder: bench.ladder, noise, better, entries: ranked });
  const series = await entrySeries(em, { bench, results, metric });
  const medians = await medianTables(em, bench, results);
  const place = placeOnLadder(bench.ladder, noise);
  const belowFloor = noise < results.floor;
  return {
    noise,
    metric,
    interpolated: ranking.interpolated,
    level: ranking.level,
    belowFloor,
    rows: ranking.rows.map((row) => {
      const entry = entries.find((candidate) => candidate.entry.id === row.id)!;
      const sheet = series.find((candidate) => candidate.results.entry.id === row.id)!.sheet;
      const counted = entry.counted.filter((run): run is Run => run !== null);
      const tables = medians.get(row.id) ?? [];
      // Where no entry has a phantom left, the ranking cannot know that it is missing.
      const complete = row.complete && entry.counted.every((run) => run !== null);
      const placed = complete && !belowFloor;
      return {
        ...entryRefs(entry),
        rank: placed ? row.rank : null,
        tieGroup: placed ? row.tieGroup : null,
        meanRank: placed ? row.meanRank : null,
        median: row.median,
        p05: row.p05,
        p95: row.p95,
        medians: Object.fromEntries(metrics.map(({ key }, m) => [key, interpolateLevels(tables[m]?.[place.below] ?? null, tables[m]?.[place.below + 1] ?? null, place.share)])),
        breakdown: sheet.breakdown?.value ?? null,
        breakdownNote: sheet.breakdownNote,
        exponent: sheet.exponent?.value ?? null,
        secondsPerReconstruction: meanOf(counted.map((run) => run.secondsPerReconstruction)),
        timeRatio: meanOf(counted.map((run) => run.timeRatio)),
        review: reviewOf(counted),
        reservations: [...new Set(counted.flatMap((run) => (run.reservation ? [run.reservation] : [])))],
        runs: runRefs(bench, entry),
        complete,
      };
    }),
    trivial: trivialOf(results.entries, metric),
    test: belowFloor
      ? { ...ranking.test, separable: false, words: `Below the model-error floor of ${percent(results.floor)} (${results.floorPhantom ?? 'no phantom'}) the gap between the two models is larger than the noise, so no ranks are given.` }
      : ranking.test,
    wins: ranking.wins.map((row) => [...row]),
  };
}

/** Pooled medians by entry, metric (in registry order) and level. */
async function medianTables(em: EntityManager, bench: LoadedBench, results: BenchResults): Promise<ReadonlyMap<string, readonly (readonly (number | null)[])[]>> {
  const kept = medianCache.get(results.key);
  if (kept) return kept;
  const tables = new Map<string, (number | null)[][]>();
  for (const entry of results.entries) {
    const figures = (await loadEntryFigures(em, entry)).filter((own) => own !== null);
    tables.set(entry.entry.id, metrics.map(({ key }) => pooledTable(figures, bench.ladder, key).map((row) => row.median)));
  }
  return medianCache.set(results.key, tables);
}

function runRefs(bench: LoadedBench, entry: EntryResults): Ranking['rows'][number]['runs'] {
  const phantoms = phantomsOf(bench);
  return entry.runs.flatMap((run, index) => {
    const on = phantoms[index];
    return run && on ? [{ run: run.id, phantom: on.phantom.slug, state: run.state, review: run.review }] : [];
  });
}

/** One word for several runs: the one a reader must know first. */
const gravest: readonly ReviewState[] = ['returned', 'in-review', 'unreviewed', 'signed-off-with-reservation', 'signed-off'];
const reviewOf = (runs: readonly Run[]): ReviewState => gravest.find((state) => runs.some((run) => run.review === state)) ?? 'unreviewed';

function meanOf(values: readonly (number | null | undefined)[]): number | null {
  const known = values.filter((value): value is number => typeof value === 'number');
  return known.length === 0 ? null : known.reduce((sum, value) => sum + value, 0) / known.length;
}

export const percent = (level: number): string => `${Number((100 * level).toPrecision(3))} %`;
