import { exp, ln } from '../core/math';
import { friedman, type FriedmanResult } from './friedman';
import { lossOf, type Better } from './loss';
import { quantileOfSorted, sortedCopy } from './quantiles';

/** One solver in a bench: its values by phantom, level and draw; null where undefined. A phantom whose run is missing is null. */
export interface RankedEntry {
  readonly id: string;
  readonly values: readonly (readonly (readonly (number | null)[])[] | null)[];
}

export interface RankingInput {
  readonly ladder: readonly number[];
  /** Noise at which to rank, a fraction. */
  readonly noise: number;
  readonly better: Better;
  readonly entries: readonly RankedEntry[];
  readonly alpha?: number;
}

/** Place of a noise on the ladder. */
export interface LadderPlace {
  /** Nearest level in log distance: pairs and tests are of this level. */
  readonly nearest: number;
  /** Level below and share of the way to the next one; share 0 on a level or past the ends. */
  readonly below: number;
  readonly share: number;
  readonly interpolated: boolean;
}

export function placeOnLadder(ladder: readonly number[], noise: number): LadderPlace {
  if (ladder.length === 0) throw new RangeError('The ladder is empty.');
  if (!(noise > 0)) throw new RangeError(`A noise must be positive, not ${noise}.`);
  const last = ladder.length - 1;
  if (noise <= ladder[0] * (1 + 1e-9)) return { nearest: 0, below: 0, share: 0, interpolated: noise < ladder[0] * (1 - 1e-9) };
  if (noise >= ladder[last] * (1 - 1e-9)) return { nearest: last, below: last, share: 0, interpolated: noise > ladder[last] * (1 + 1e-9) };
  let below = 0;
  while (ladder[below + 1] <= noise * (1 + 1e-9)) below++;
  if (noise <= ladder[below] * (1 + 1e-9)) return { nearest: below, below, share: 0, interpolated: false };
  const share = (ln(noise) - ln(ladder[below])) / (ln(ladder[below + 1]) - ln(ladder[below]));
  return { nearest: share < 0.5 ? below : below + 1, below, share, interpolated: true };
}

/** Between two levels in log-log, or in log-linear where a value is not positive; null where either is. */
export function interpolateLevels(low: number | null, high: number | null, share: number): number | null {
  if (share === 0) return low;
  if (low === null || high === null) return null;
  if (low > 0 && high > 0) return exp(ln(low) + share * (ln(high) - ln(low)));
  return low + share * (high - low);
}

export interface RankingRow {
  readonly id: string;
  /** Shared by a tie group: the place of its first member; null where runs are missing. */
  readonly rank: number | null;
  /** Tie groups counted from 0. */
  readonly tieGroup: number | null;
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
  /** Best first: by mean rank where it exists, those with missing runs last. */
  readonly rows: readonly RankingRow[];
  readonly friedman: FriedmanResult | null;
  readonly test: {
    readonly name: string;
    readonly blocks: number;
    readonly phantoms: number;
    readonly statistic: number | null;
    readonly pValue: number | null;
    readonly criticalDifference: number | null;
    readonly separable: boolean;
    readonly words: string;
  };
  /** Share of the paired draws that the row's solver wins against the column's; a tie is half a win. Null without common draws. */
  readonly wins: readonly (readonly (number | null)[])[];
}

/** Blocks needed for Friedman's chi-square approximation to mean something (Demsar 2006: more than 10). */
const fewestBlocks = 10;

/** Quantiles of one entry's values pooled over phantoms and draws at a level; undefined values left out. */
function pooled(entry: RankedEntry, level: number): { median: number | null; p05: number | null; p95: number | null } {
  const values: number[] = [];
  for (const phantom of entry.values) for (const value of phantom?.[level] ?? []) if (value !== null && Number.isFinite(value)) values.push(value);
  if (values.length === 0) return { median: null, p05: null, p95: null };
  const sorted = sortedCopy(values);
  return { median: quantileOfSorted(sorted, 0.5), p05: quantileOfSorted(sorted, 0.05), p95: quantileOfSorted(sorted, 0.95) };
}

/** Losses in block order (phantom, then draw) at a level; a missing phantom gives NaN blocks. */
function blockLosses(entry: RankedEntry, level: number, better: Better, drawCounts: readonly number[]): Float64Array {
  const out: number[] = [];
  drawCounts.forEach((count, phantom) => {
    const draws = entry.values[phantom]?.[level];
    for (let draw = 0; draw < count; draw++) out.push(draws ? lossOf(draws[draw] ?? null, better) : NaN);
  });
  return Float64Array.from(out);
}

/**
 * The ranking of a bench at one noise: medians (between levels interpolated in log-log and flagged), mean ranks, tie groups by
 * Nemenyi's critical difference, and paired wins. Blocks are phantom x draw, the same noise for all solvers, so comparisons are paired;
 * an undefined value counts as the worst. Tie groups and ranks follow one ordering, by mean rank.
 */
export function rankAtNoise(input: RankingInput): Ranking {
  const { ladder, noise, better, entries, alpha = 0.05 } = input;
  const place = placeOnLadder(ladder, noise);
  const level = place.nearest;
  const phantomCount = entries.reduce((most, entry) => Math.max(most, entry.values.length), 0);
  const drawCounts = Array.from({ length: phantomCount }, (_, phantom) => entries.reduce((most, entry) => Math.max(most, entry.values[phantom]?.[level]?.length ?? 0), 0));
  const losses = entries.map((entry) => blockLosses(entry, level, better, drawCounts));
  const complete = losses.map((loss) => loss.length > 0 && loss.every((value) => !Number.isNaN(value)));
  const ranked = entries.flatMap((_, i) => (complete[i] ? [i] : []));
  const blocks = ranked.length > 0 ? losses[ranked[0]].length : 0;
  const testable = ranked.length >= 2 && blocks >= fewestBlocks;
  const result = testable ? friedman(Array.from({ length: blocks }, (_, b) => ranked.map((i) => losses[i][b])), alpha) : null;

  const meanRank = new Map<number, number>();
  ranked.forEach((i, column) => { if (result) meanRank.set(i, result.meanRanks[column]); });
  const figures = entries.map((entry) => {
    const low = pooled(entry, place.below);
    if (place.share === 0) return low;
    const high = pooled(entry, place.below + 1);
    return { median: interpolateLevels(low.median, high.median, place.share), p05: interpolateLevels(low.p05, high.p05, place.share), p95: interpolateLevels(low.p95, high.p95, place.share) };
  });
  const key = (i: number): number => meanRank.get(i) ?? lossOf(figures[i].median, better);
  const order = entries.map((_, i) => i).sort((i, j) => Number(complete[j]) - Number(complete[i]) || compare(key(i), key(j)) || compare(lossOf(figures[i].median, better), lossOf(figures[j].median, better)) || i - j);

  const separable = result !== null && result.pF < alpha;
  const rank = new Map<number, { rank: number; group: number }>();
  let group = -1;
  let head = -1;
  let position = 0;
  for (const i of order) {
    if (!complete[i]) continue;
    // Without a significant difference nobody is separated from the first.
    const apart = head < 0 || (separable && key(i) - key(head) > result.criticalDifference);
    if (apart) {
      group++;
      head = i;
      rank.set(i, { rank: position + 1, group });
    } else rank.set(i, { rank: rank.get(head)!.rank, group });
    position++;
  }
  const rows = order.map((i): RankingRow => ({
    id: entries[i].id, rank: rank.get(i)?.rank ?? null, tieGroup: rank.get(i)?.group ?? null, meanRank: meanRank.get(i) ?? null, ...figures[i], complete: complete[i],
  }));
  return {
    noise, levelIndex: level, level: ladder[level], interpolated: place.interpolated, rows, friedman: result,
    test: {
      name: result ? `Friedman with Nemenyi distance over ${blocks} paired draws` : 'No test',
      blocks, phantoms: phantomCount, statistic: result?.f === Infinity ? null : result?.f ?? null, pValue: result?.pF ?? null, criticalDifference: result?.criticalDifference ?? null, separable,
      words: testWords(ranked.length, blocks, phantomCount, result, separable, group + 1),
    },
    wins: order.map((i) => order.map((j) => (i === j ? null : winShare(losses[i], losses[j])))),
  };
}

function compare(a: number, b: number): number {
  return a < b ? -1 : a > b ? 1 : 0;
}

/** Share of common blocks in which `a` has the smaller loss; equal losses are half a win each. */
export function winShare(a: Float64Array, b: Float64Array): number | null {
  let wins = 0;
  let pairs = 0;
  for (let i = 0; i < a.length; i++) {
    if (Number.isNaN(a[i]) || Number.isNaN(b[i])) continue;
    pairs++;
    if (a[i] < b[i]) wins++;
    else if (a[i] === b[i]) wins += 0.5;
  }
  return pairs === 0 ? null : wins / pairs;
}

function testWords(methods: number, blocks: number, phantoms: number, result: FriedmanResult | null, separable: boolean, groups: number): string {
  if (methods < 2) return 'Fewer than two solvers have finished on every phantom: there is nothing to compare.';
  if (!result) return `Not enough phantoms and draws to separate: ${blocks} paired ${blocks === 1 ? 'draw' : 'draws'}, at least ${fewestBlocks} are needed.`;
  const over = `${blocks} paired draws on ${phantoms} ${phantoms === 1 ? 'phantom' : 'phantoms'}`;
  if (!separable) return `The solvers cannot be separated over ${over}.`;
  const scope = phantoms < 5 ? ' Draws of the same phantom speak about that phantom: the result holds for these phantoms, not for others.' : '';
  return groups === 1 ? `The solvers differ over ${over}, but none is clear of the first.${scope}` : `${groups} groups can be separated over ${over}.${scope}`;
}
