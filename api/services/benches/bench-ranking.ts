import type { EntityManager } from '@mikro-orm/sqlite';
import type { Ranking, rankedOver } from '../../../shared/contracts/benches';
import type { ReviewState } from '../../../shared/domain/states';
import { metrics } from '../../../solvers/metrics/registry';
import type { Better } from '../../../solvers/statistics/loss';
import { lossOf } from '../../../solvers/statistics/loss';
import type { RankedEntry } from '../../../solvers/statistics/blocks';
import { paretoFront } from '../../../solvers/statistics/pareto-front';
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
export async function rankBench(em: EntityManager, input: { readonly bench: Pick<Bench, 'id' | 'slug' | 'revision'>; readonly noise: number; readonly metric: string; readonly over?: RankedOver }): Promise<Ranking> {
  const { noise, metric, over = 'level' } = input;
  const kept = cache.get(`${await resultsKey(em, input.bench)}|${metric}|${noise}|${over}`);
  if (kept) return kept;
  const bench = await findBench(em, input.bench.slug);
  const results = await loadBenchResults(em, bench);
  return cache.set(`${results.key}|${metric}|${noise}|${over}`, await compute(em, { bench, noise, metric, over, results }));
}

export type RankedOver = (typeof rankedOver)[number];

export interface RankedSet {
  readonly entries: readonly EntryResults[];
  readonly ranked: readonly RankedEntry[];
  readonly better: Better;
  /** Levels that a phantom's figure is of. */
  readonly levels: readonly number[];
  readonly belowFloor: boolean;
}

/** Entries with their figures, as the ranking and the comparisons take them. An entry whose every run was declined is no row any more; one that still computes is. */
export async function rankedSet(em: EntityManager, input: { readonly bench: LoadedBench; readonly noise: number; readonly metric: string; readonly over: RankedOver; readonly results: BenchResults }): Promise<RankedSet> {
  const { bench, noise, metric, over, results } = input;
  const { better } = requireMetric(metric);
  const entries = results.entries.filter(({ runs, counted }) => counted.some((run) => run !== null) || runs.some((run) => run !== null && run.review !== 'declined'));
  const ranked: RankedEntry[] = [];
  for (const entry of entries) {
    const figures = await loadEntryFigures(em, entry);
    ranked.push({ id: entry.entry.id, values: figures.map((own) => (own ? bench.ladder.map((_, level) => drawsAt(own, metric, level)) : null)) });
  }
  const above = levelsAbove(bench, results);
  const nearest = placeOnLadder(bench.ladder, noise).nearest;
  return { entries, ranked, better, levels: over === 'ladder' && above.length > 0 ? above : [nearest], belowFloor: over === 'ladder' ? above.length === 0 : noiseAt(bench, noise) < results.floor };
}

/** Levels at or above the model-error floor. */
export const levelsAbove = (bench: Pick<Bench, 'axis' | 'ladder'>, results: BenchResults): number[] => bench.ladder.flatMap((value, level) => (noiseAt(bench, value) >= results.floor * (1 - 1e-9) ? [level] : []));

/** The noise of a level: the level itself, or the fixed one of another axis. */
const noiseAt = ({ axis }: Pick<Bench, 'axis'>, level: number): number => (axis.key === 'noise' ? level : axis.noise);

async function compute(em: EntityManager, input: { readonly bench: LoadedBench; readonly noise: number; readonly metric: string; readonly over: RankedOver; readonly results: BenchResults }): Promise<Ranking> {
  const { bench, noise, metric, over, results } = input;
  const { entries, ranked, better, levels, belowFloor } = await rankedSet(em, input);
  const ranking = rankAtNoise({ ladder: bench.ladder, noise, better, entries: ranked, levels });
  const series = await entrySeries(em, { bench, results, metric });
  const medians = await medianTables(em, bench, results);
  const at = placeOnLadder(bench.ladder, noise);
  const seconds = new Map(entries.map(({ entry, counted }) => [entry.id, meanOf(counted.map((run) => run?.secondsPerReconstruction))]));
  const front = paretoFront(ranking.rows.map((row) => ({ id: row.id, loss: row.median === null ? null : lossOf(row.median, better), seconds: seconds.get(row.id) ?? null })));
  return {
    noise,
    metric,
    interpolated: ranking.interpolated,
    level: ranking.level,
    belowFloor,
    over,
    levels: levels.map((level) => bench.ladder[level]!),
    rows: ranking.rows.map((row, place) => {
      const entry = entries.find((candidate) => candidate.entry.id === row.id)!;
      const sheet = series.find((candidate) => candidate.results.entry.id === row.id)!.sheet;
      const counted = entry.counted.filter((run): run is Run => run !== null);
      const tables = medians.get(row.id) ?? [];
      const placed = row.complete && !belowFloor;
      const dominatedBy = front[place]!.dominatedBy;
      return {
        ...entryRefs(entry),
        rank: placed ? row.rank : null,
        tieGroup: placed ? row.tieGroup : null,
        meanRank: placed ? row.meanRank : null,
        median: row.median,
        p05: row.p05,
        p95: row.p95,
        medians: Object.fromEntries(metrics.map(({ key }, m) => [key, interpolateLevels(tables[m]?.[at.below] ?? null, tables[m]?.[at.below + 1] ?? null, at.share)])),
        breakdown: sheet.breakdown?.value ?? null,
        breakdownNote: sheet.breakdownNote,
        exponent: sheet.exponent?.value ?? null,
        secondsPerReconstruction: seconds.get(row.id) ?? null,
        timeRatio: meanOf(counted.map((run) => run.timeRatio)),
        onFront: front[place]!.onFront,
        dominatedBy: dominatedBy === null ? null : ranking.rows.findIndex(({ id }) => id === dominatedBy),
        review: reviewOf(counted),
        reservations: [...new Set(counted.flatMap((run) => (run.reservation ? [run.reservation] : [])))],
        runs: runRefs(bench, entry),
        complete: row.complete,
      };
    }),
    trivial: trivialOf(results.entries, metric),
    test: belowFloor ? belowFloorTest(ranking.test, results) : ranking.test,
    wins: ranking.wins.map((row) => [...row]),
  };
}

/** Below the floor nothing is tested. */
export const belowFloorTest = (test: Ranking['test'], results: Pick<BenchResults, 'floor' | 'floorPhantom'>): Ranking['test'] => ({
  ...test, name: 'No test', chiSquare: null, statistic: null, pValue: null, exact: false, criticalDifference: null, separable: false,
  words: `Below the model-error floor of ${percent(results.floor)} (${results.floorPhantom ?? 'no phantom'}) the gap between the two models is larger than the noise, so no ranks are given.`,
});

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
