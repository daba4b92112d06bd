import type { EntityManager } from '@mikro-orm/sqlite';
import type { BenchComparison } from '../../../shared/contracts/benches';
import { AppError } from '../../../shared/errors.ts';
import { compareMethods, profileMethods, type Comparison } from '../../../solvers/statistics/comparison';
import { placeOnLadder } from '../../../solvers/statistics/ladder-place';
import type { PerformanceProfiles } from '../../../solvers/statistics/performance-profile';
import type { Bench } from '../../entities/bench.ts';
import { BoundedCache } from '../figures/bounded-cache.ts';
import { belowFloorTest, levelsAbove, percent, rankedSet, type RankedOver, type RankedSet } from './bench-ranking.ts';
import { loadBenchResults, resultsKey, type BenchResults } from './bench-results.ts';
import { entryRefs } from './bench-series.ts';
import { findBench, phantomsOf, type LoadedBench } from './find-bench.ts';

const cache = new BoundedCache<BenchComparison>(200);
/** Tests are of a level, not of the noise between two, so a moving cursor asks for few. */
const computed = new BoundedCache<Comparison>(200);
const profiles = new BoundedCache<{ readonly found: PerformanceProfiles | null }>(50);

interface Request {
  readonly noise: number;
  readonly metric: string;
  readonly over: RankedOver;
  readonly phantom?: string | undefined;
}

/** Methods compared over phantoms, or over the draws of one, with the numbers behind the words. */
export async function compareBench(em: EntityManager, input: Request & { readonly bench: Pick<Bench, 'id' | 'slug' | 'revision'> }): Promise<BenchComparison> {
  const { noise, metric, over, phantom } = input;
  const key = (results: string): string => `${results}|${metric}|${noise}|${over}|${phantom ?? ''}`;
  const kept = cache.get(key(await resultsKey(em, input.bench)));
  if (kept) return kept;
  const bench = await findBench(em, input.bench.slug);
  const results = await loadBenchResults(em, bench);
  return cache.set(key(results.key), await compute(em, { ...input, bench, results }));
}

async function compute(em: EntityManager, input: Request & { readonly bench: LoadedBench; readonly results: BenchResults }): Promise<BenchComparison> {
  const { bench, results, noise, metric, over } = input;
  const onBench = phantomsOf(bench);
  const at = input.phantom === undefined ? undefined : onBench.findIndex((own) => own.phantom.slug === input.phantom);
  if (at === -1) throw new AppError('validation-failed', `'${input.phantom}' is not a phantom of this bench.`, [{ path: ['phantom'], message: `There are: ${onBench.map((own) => own.phantom.slug).join(', ')}.` }]);
  const set = await rankedSet(em, { bench, noise, metric, over, results });
  const key = `${results.key}|${metric}|${set.levels.join(',')}|${at ?? ''}`;
  const { methods, test, pairs, fewestPairs } = computed.get(key) ?? computed.set(key, compareMethods({ better: set.better, entries: set.ranked, levels: set.levels, phantom: at, seed: `${bench.id}/${bench.seed}/${metric}` }));
  const placeOf = new Map(methods.map(({ id }, place) => [id, place]));
  const profile = at === undefined ? profileOf(bench, set, results, metric) : null;
  const looked = at === undefined ? null : onBench[at]!;
  return {
    noise, metric, over, level: bench.ladder[placeOnLadder(bench.ladder, noise).nearest]!, levels: set.levels.map((level) => bench.ladder[level]!), belowFloor: set.belowFloor,
    blocks: looked ? 'draws' : 'phantoms',
    phantom: looked && { slug: looked.phantom.slug, name: looked.version.name },
    solvers: methods.map(({ id, meanRank, tieGroup }) => {
      const { glyph, solver } = entryRefs(set.entries.find(({ entry }) => entry.id === id)!);
      return { glyph, solver, meanRank: set.belowFloor ? null : meanRank, tieGroup: set.belowFloor ? null : tieGroup };
    }),
    test: set.belowFloor ? belowFloorTest(test, results) : test,
    pairs: set.belowFloor ? [] : pairs.map(({ first, second, wins, pValue, pHolm, separable, ratio }) => ({
      first: placeOf.get(first)!, second: placeOf.get(second)!, wins, pValue, pHolm, separable, reason: ratio.reason,
      ratio: ratio.ratio === null || ratio.low === null || ratio.high === null || ratio.firstBetter === null ? null : { value: ratio.ratio, low: ratio.low, high: ratio.high, firstBetter: ratio.firstBetter, separable: ratio.separable },
    })),
    fewestPairs,
    pairWords: pairWords(test.blocks, fewestPairs, pairs.length, looked ? 'draw' : 'phantom'),
    resamples: 1000,
    profile: profile && { problems: profile.problems, unsolved: profile.unsolved, items: profile.items.flatMap(({ id, ratios }) => (placeOf.has(id) ? [{ solver: placeOf.get(id)!, ratios: [...ratios] }] : [])).sort((a, b) => a.solver - b.solver) },
    profileWords: profileWords(profile, at !== undefined, set, bench, results),
  };
}

/** Of the complete entries: one that lacks runs would look as if it had failed there. */
function profileOf(bench: LoadedBench, set: RankedSet, results: BenchResults, metric: string): PerformanceProfiles | null {
  const key = `${results.key}|${metric}`;
  const kept = profiles.get(key);
  if (kept) return kept.found;
  const complete = set.ranked.filter(({ values }) => values.every((own) => own !== null));
  const levels = levelsAbove(bench, results);
  return profiles.set(key, { found: complete.length === 0 || levels.length === 0 ? null : profileMethods({ better: set.better, entries: complete, levels }) }).found;
}

function profileWords(profile: PerformanceProfiles | null, within: boolean, set: RankedSet, bench: LoadedBench, results: BenchResults): string {
  if (within) return 'Profiles are over all phantoms.';
  const levels = levelsAbove(bench, results).length;
  if (profile) return `${profile.problems} problems: ${set.ranked[0]?.values.length ?? 0} ${set.ranked[0]?.values.length === 1 ? 'phantom' : 'phantoms'} at ${levels} ${bench.axis.key === 'noise' ? 'noise levels' : 'levels'}${levels < bench.ladder.length ? ` from the model-error floor of ${percent(results.floor)} up` : ''}, median over draws.`;
  if (levels === 0) return `Every level lies below the model-error floor of ${percent(results.floor)}.`;
  return set.better === 'higher' ? 'A ratio of scores means nothing: profiles are of errors.' : 'No solver has finished on every phantom.';
}

function pairWords(blocks: number, fewest: number, pairs: number, noun: string): string {
  if (pairs === 0) return 'There is no pair to compare.';
  const many = `${pairs} ${pairs === 1 ? 'pair' : 'pairs'}`;
  if (blocks < fewest) return `Not enough ${noun}s for signed ranks: ${blocks}, and with ${many} corrected at least ${fewest} are needed to reach 5 %.`;
  return `Signed ranks over ${blocks} ${noun}s, Holm's correction over ${many}.`;
}
