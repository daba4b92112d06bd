import { drawCount, drawFigures, medianLoss, phantomLosses, phantomsOf, type RankedEntry } from './blocks';
import type { Better } from './loss';
import { comparePairs, type PairComparison } from './pairs';
import { pairedBootstrap, type PairedRatio } from './paired-bootstrap';
import { performanceProfiles, type PerformanceProfiles } from './performance-profile';
import { separate, separationTest, type SeparationTest } from './separation';
import { fewestPairs } from './wilcoxon';

export interface ComparisonInput {
  readonly better: Better;
  readonly entries: readonly RankedEntry[];
  /** Levels that a figure is of: one, or several whose mean it is. */
  readonly levels: readonly number[];
  /** Compare over the draws of this phantom, instead of over phantoms. */
  readonly phantom?: number | undefined;
  /** Of the bootstrap. */
  readonly seed: string;
  readonly alpha?: number;
}

export interface ComparedMethod {
  readonly id: string;
  readonly meanRank: number;
  readonly tieGroup: number | null;
}

export interface Comparison {
  /** Complete methods, best first, in the one ordering of the test. */
  readonly methods: readonly ComparedMethod[];
  readonly test: SeparationTest;
  readonly pairs: readonly (PairComparison & { readonly ratio: PairedRatio })[];
  /** Blocks that a pair needs so that the corrected p can reach the level. */
  readonly fewestPairs: number;
}

/**
 * Methods compared over phantoms, or within one phantom over its draws: mean ranks with tie groups, every pair by signed ranks with
 * Holm's correction, and the ratio of errors with its bootstrap interval. What `rankAtNoise` says of ranks is the same here.
 * @throws RangeError for a phantom or level that does not exist
 */
export function compareMethods(input: ComparisonInput): Comparison {
  const { better, entries, levels, phantom, seed, alpha = 0.05 } = input;
  const phantoms = phantomsOf(entries);
  if (phantom !== undefined && !(phantom >= 0 && phantom < phantoms)) throw new RangeError(`There is no phantom ${phantom}.`);
  const looked = phantom === undefined ? Array.from({ length: phantoms }, (_, p) => p) : [phantom];
  const draws = looked.map((p) => drawCount(entries, p, levels[0]));
  const figures = entries.map((entry) => looked.map((p, at) => drawFigures(entry, p, levels, draws[at], better)));
  const overPhantoms = phantom === undefined ? phantomLosses(entries, levels, better) : null;
  const complete = entries.flatMap((_, i) => (figures[i].length > 0 && figures[i].every((own) => own !== null && own.length > 0) ? [i] : []));
  const noun = phantom === undefined ? 'phantom' : 'draw';
  const blocks = phantom === undefined ? phantoms : draws[0];
  const needed = fewestPairs(Math.max(1, (complete.length * (complete.length - 1)) / 2), alpha);
  if (complete.length < 2) return { methods: complete.map((i) => ({ id: entries[i].id, meanRank: 1, tieGroup: null })), test: separationTest(null, blocks, noun), pairs: [], fewestPairs: needed };
  const own = complete.map((i) => figures[i] as Float64Array[]);
  const losses = overPhantoms ? complete.map((i) => overPhantoms[i]) : own.map(([only]) => only);
  const separation = separate(losses, alpha);
  const ordered = separation.order;
  const pairs = comparePairs(ordered.map((at) => ({ id: entries[complete[at]].id, losses: losses[at] })), alpha);
  const ratios = pairedBootstrap(ordered.map((at) => ({ id: entries[complete[at]].id, phantoms: own[at] })), { seed, level: 1 - alpha });
  return {
    methods: ordered.map((at) => ({ id: entries[complete[at]].id, meanRank: separation.meanRanks[at], tieGroup: separation.groups?.[at] ?? null })),
    test: separationTest(separation, blocks, noun), pairs: pairs.map((pair, i) => ({ ...pair, ratio: ratios[i] })), fewestPairs: needed,
  };
}

/**
 * Performance profiles over every phantom and level: the loss of a problem is the median over its draws. A method without a run on a
 * phantom has no answer there.
 * @returns null for scores, whose ratios mean nothing
 */
export function profileMethods(input: { readonly better: Better; readonly entries: readonly RankedEntry[]; readonly levels: readonly number[] }): PerformanceProfiles | null {
  const { better, entries, levels } = input;
  if (better === 'higher') return null;
  const phantoms = phantomsOf(entries);
  return performanceProfiles(
    entries.map((entry) => {
      const losses: number[] = [];
      for (let p = 0; p < phantoms; p++)
        for (const level of levels) {
          const figures = drawFigures(entry, p, [level], drawCount(entries, p, level), better);
          losses.push(figures && figures.length > 0 ? medianLoss(figures) : Infinity);
        }
      return { id: entry.id, losses };
    }),
  );
}
