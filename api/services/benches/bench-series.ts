import type { EntityManager } from '@mikro-orm/sqlite';
import type { Series } from '../../../shared/contracts/benches';
import type { LevelStatistics, StabilitySheetWire } from '../../../shared/contracts/common';
import { AppError } from '../../../shared/errors.ts';
import { levelStatistics } from '../../../solvers/statistics/error-table';
import type { Bench } from '../../entities/bench.ts';
import { BoundedCache } from '../figures/bounded-cache.ts';
import { drawsAt, levelTable, makeSheet } from '../figures/run-tables.ts';
import type { RunFigures } from '../figures/load-run-figures.ts';
import { loadBenchResults, loadEntryFigures, requireMetric, resultsKey, trivialOf, type BenchResults, type EntryResults } from './bench-results.ts';
import { findBench, phantomsOf, type BenchEntry, type LoadedBench } from './find-bench.ts';

export interface EntrySeries {
  readonly results: EntryResults;
  readonly levels: readonly LevelStatistics[];
  readonly sheet: StabilitySheetWire;
}

const cache = new BoundedCache<readonly EntrySeries[]>(200);

/** Medians and sheets of every entry over the counted runs of all phantoms, or of one. */
export async function entrySeries(
  em: EntityManager,
  input: { readonly bench: LoadedBench; readonly results: BenchResults; readonly metric: string; readonly phantom?: number | undefined },
): Promise<readonly EntrySeries[]> {
  const { bench, results, metric, phantom } = input;
  const key = `${results.key}|${metric}|${phantom ?? 'all'}`;
  const kept = cache.get(key);
  if (kept) return kept;
  const trivial = trivialOf(results.entries, metric, phantom);
  const made: EntrySeries[] = [];
  for (const entry of results.entries) {
    const figures = (await loadEntryFigures(em, entry)).filter((own, index): own is RunFigures => own !== null && (phantom === undefined || phantom === index));
    made.push({ results: entry, levels: pooledTable(figures, bench.ladder, metric), sheet: pooledSheet(figures, { bench, metric, trivial, seed: `${bench.id}/${entry.entry.id}/${metric}/${phantom ?? 'all'}` }) });
  }
  return cache.set(key, made);
}

/** One row a level over the draws of all phantoms together. */
export function pooledTable(figures: readonly RunFigures[], ladder: readonly number[], metric: string): LevelStatistics[] {
  const [only] = figures;
  if (only && figures.length === 1) return levelTable(only, ladder, metric);
  const { better } = requireMetric(metric);
  return ladder.map((noise, level) => {
    const draws = figures.flatMap((own) => drawsAt(own, metric, level));
    const reason = figures.map((own) => own.reasons.get(metric)?.get(level)).find((text) => text !== undefined) ?? null;
    return levelStatistics(noise, draws, better, reason);
  });
}

function pooledSheet(figures: readonly RunFigures[], input: { readonly bench: LoadedBench; readonly metric: string; readonly trivial: number | null; readonly seed: string }): StabilitySheetWire {
  const { bench, metric, trivial, seed } = input;
  const nothing = { metric, model: 'none' as const, exponent: null, floor: null, constant: null, breakdown: null, breakdownNote: null };
  if (figures.length === 0) return { ...nothing, reason: 'No run has finished.' };
  if (requireMetric(metric).better !== 'lower') return { ...nothing, reason: 'The law is fitted to metrics where smaller is better.' };
  return makeSheet({ metric, axis: bench.axis.key, ladder: bench.ladder, draws: bench.ladder.map((_, level) => figures.flatMap((own) => drawsAt(own, metric, level))), trivial, seed });
}

const wireCache = new BoundedCache<Series>(200);

export async function benchSeries(
  em: EntityManager,
  input: { readonly bench: Pick<Bench, 'id' | 'slug' | 'revision'>; readonly metric: string; readonly phantom?: string | undefined },
): Promise<Series> {
  const { metric } = input;
  requireMetric(metric);
  const key = (results: string): string => `${results}|${metric}|${input.phantom ?? ''}`;
  const kept = wireCache.get(key(await resultsKey(em, input.bench)));
  if (kept) return kept;
  const bench = await findBench(em, input.bench.slug);
  const slugs = phantomsOf(bench).map(({ phantom: own }) => own.slug);
  const phantom = input.phantom === undefined ? undefined : slugs.indexOf(input.phantom);
  if (phantom === -1) {
    throw new AppError('validation-failed', `'${input.phantom}' is not a phantom of this bench.`, [{ path: ['phantom'], message: `There are: ${slugs.join(', ')}.` }]);
  }
  const results = await loadBenchResults(em, bench);
  const series = await entrySeries(em, { bench, results, metric, phantom });
  return wireCache.set(key(results.key), {
    metric,
    axis: bench.axis,
    ladder: bench.ladder,
    trivial: trivialOf(results.entries, metric, phantom),
    modelErrorFloor: results.floor,
    items: series.map(({ results: own, levels, sheet }) => ({ ...entryRefs(own), levels: levels.map(({ draws: _draws, ...rest }) => rest), sheet })),
  });
}

/** How rows of a ranking and of the series name an entry. */
export function entryRefs({ glyph, version, solver, group }: BenchEntry) {
  return { glyph, solver: { slug: solver.slug, id: solver.id, name: solver.name, version: version.n }, group: { slug: group.slug, name: group.name } };
}
