import { drawCount, drawLosses, phantomLosses, phantomsOf, type RankedEntry } from './blocks';
import { interpolateLevels, placeOnLadder, type LadderPlace } from './ladder-place';
import { lossOf, type Better } from './loss';
import { winShare } from './pairs';
import { quantileOfSorted, sortedCopy } from './quantiles';
import { separate, separationTest, type Separation, type SeparationTest } from './separation';

export interface RankingInput {
  readonly ladder: readonly number[];
  /** Noise at which to rank, a fraction. */
  readonly noise: number;
  readonly better: Better;
  readonly entries: readonly RankedEntry[];
  readonly alpha?: number;
  /** Rank by the mean over these levels instead of the one nearest to the noise. */
  readonly levels?: readonly number[] | undefined;
}

export interface RankingRow {
  readonly id: string;
  /** Shared by a tie group: the place of its first member; null where runs are missing or the phantoms are too few for any winner. */
  readonly rank: number | null;
  /** Tie groups counted from 0. */
  readonly tieGroup: number | null;
  /** Over phantoms. */
  readonly meanRank: number | null;
  readonly median: number | null;
  readonly p05: number | null;
  readonly p95: number | null;
  readonly complete: boolean;
}

export interface Ranking {
  readonly noise: number;
  readonly levelIndex: number;
  readonly level: number;
  readonly interpolated: boolean;
  /** Best first: by mean rank over phantoms, those with missing runs last. */
  readonly rows: readonly RankingRow[];
  /** Of the complete rows; null below two of them. */
  readonly separation: Separation | null;
  /** Places in `entries` of the methods in `separation`. */
  readonly compared: readonly number[];
  /** Blocks are phantoms, one figure each. */
  readonly test: SeparationTest;
  /** Share of the paired draws, over all phantoms, that the row's solver wins against the column's; a tie is half a win. Null without common draws. */
  readonly wins: readonly (readonly (number | null)[])[];
}

/** Quantiles of one entry's values pooled over phantoms and draws at a level; undefined values left out. */
function pooled(entry: RankedEntry, level: number): { median: number | null; p05: number | null; p95: number | null } {
  const values: number[] = [];
  for (const phantom of entry.values) for (const value of phantom?.[level] ?? []) if (value !== null && Number.isFinite(value)) values.push(value);
  if (values.length === 0) return { median: null, p05: null, p95: null };
  const sorted = sortedCopy(values);
  return { median: quantileOfSorted(sorted, 0.5), p05: quantileOfSorted(sorted, 0.05), p95: quantileOfSorted(sorted, 0.95) };
}

function figuresAt(entry: RankedEntry, place: LadderPlace): ReturnType<typeof pooled> {
  const low = pooled(entry, place.below);
  if (place.share === 0) return low;
  const high = pooled(entry, place.below + 1);
  const between = (key: keyof typeof low): number | null => interpolateLevels(low[key], high[key], place.share);
  return { median: between('median'), p05: between('p05'), p95: between('p95') };
}

/** Losses in the order of phantoms, then draws, at a level; a missing phantom gives NaN. */
function pairedLosses(entries: readonly RankedEntry[], level: number, better: Better): Float64Array[] {
  const counts = Array.from({ length: phantomsOf(entries) }, (_, phantom) => drawCount(entries, phantom, level));
  return entries.map((entry) => Float64Array.from(counts.flatMap((draws, phantom) => Array.from(drawLosses(entry, phantom, level, draws, better) ?? new Float64Array(draws).fill(NaN)))));
}

/**
 * The ranking of a bench at one noise: medians (between levels interpolated in log-log and flagged) and mean ranks with tie groups by
 * Friedman's test and Nemenyi's critical difference. A block is a phantom: its figure is the median over draws at the nearest level, or
 * the mean of the medians over `levels`. Draws of one phantom speak about that phantom only, so they are not blocks here. An undefined
 * value counts as the worst. Ranks, tie groups and rows follow one ordering.
 */
export function rankAtNoise(input: RankingInput): Ranking {
  const { ladder, noise, better, entries, alpha = 0.05 } = input;
  const place = placeOnLadder(ladder, noise);
  const level = place.nearest;
  const phantoms = phantomsOf(entries);
  const losses = phantomLosses(entries, input.levels ?? [level], better);
  const complete = losses.map((own) => own.length > 0 && !own.some(Number.isNaN));
  const figures = entries.map((entry) => figuresAt(entry, place));
  const medianLosses = figures.map(({ median }) => lossOf(median, better));
  const compared = entries.flatMap((_, i) => (complete[i] ? [i] : []));
  const separation = compared.length >= 2 ? separate(compared.map((i) => losses[i]), alpha) : null;
  const rest = entries.flatMap((_, i) => (complete[i] ? [] : [i])).sort((i, j) => Number(medianLosses[i] > medianLosses[j]) - Number(medianLosses[i] < medianLosses[j]) || i - j);
  const order = [...(separation ? separation.order.map((at) => compared[at]) : compared), ...rest];

  const ranks: (number | null)[] = [];
  const rows = order.map((i, position): RankingRow => {
    const at = compared.indexOf(i);
    const tieGroup = at < 0 ? null : separation?.groups?.[at] ?? null;
    const before = position > 0 ? compared.indexOf(order[position - 1]) : -1;
    const shared = tieGroup !== null && before >= 0 && separation?.groups?.[before] === tieGroup;
    ranks.push(tieGroup === null ? null : shared ? ranks[position - 1] : position + 1);
    return { id: entries[i].id, rank: ranks[position], tieGroup, meanRank: at < 0 ? null : separation?.meanRanks[at] ?? null, ...figures[i], complete: complete[i] };
  });
  const paired = pairedLosses(entries, level, better);
  return {
    noise, levelIndex: level, level: ladder[level], interpolated: place.interpolated, rows, separation, compared, test: separationTest(separation, phantoms),
    wins: order.map((i) => order.map((j) => (i === j ? null : winShare(paired[i], paired[j])))),
  };
}
