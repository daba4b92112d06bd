import type { TrialWire } from '../../../../shared/contracts/runs';
import { lossOf } from '../../../../solvers/statistics/loss';
import { comparePairs, type PairComparison } from '../../../../solvers/statistics/pairs';
import { median, quantileOfSorted, sortedCopy } from '../../../../solvers/statistics/quantiles';
import { formatError, formatPercent } from '../../../lib/format';
import { withUnit } from '../../../lib/problem-words';

/** One run in the comparison. */
export interface Contender {
  id: string;
  /** A, B, C, D. */
  letter: string;
  glyph: number;
  name: string;
  short: string;
  trials: readonly TrialWire[];
}

export const l2Key = 'relative-l2-error';
export const supKey = 'sup-error';
export const letters = ['A', 'B', 'C', 'D'] as const;

/** Draws that every run has, ascending: only these are paired. */
export function sharedDraws(contenders: readonly Contender[]): number[] {
  const [first, ...rest] = contenders;
  if (!first) return [];
  return first.trials.map((t) => t.draw).filter((d) => rest.every((c) => c.trials.some((t) => t.draw === d))).sort((a, b) => a - b);
}

export function valuesOf(contender: Contender, metric: string, draws: readonly number[]): (number | null)[] {
  const byDraw = new Map(contender.trials.map((t) => [t.draw, t.metrics[metric] ?? null]));
  return draws.map((d) => byDraw.get(d) ?? null);
}

/** Signed ranks of Wilcoxon (1945) over shared draws, with Holm's (1979) correction over the pairs shown. */
export function pairs(contenders: readonly Contender[], metric: string): PairComparison[] {
  const draws = sharedDraws(contenders);
  if (draws.length === 0 || contenders.length < 2) return [];
  return comparePairs(contenders.map((c) => ({ id: c.id, losses: Float64Array.from(valuesOf(c, metric, draws), (v) => lossOf(v, 'lower')) })));
}

export function medianOf(contender: Contender, metric: string): number | null {
  const values = contender.trials.map((t) => t.metrics[metric] ?? null).filter((v): v is number => v !== null);
  return values.length ? median(values) : null;
}

/** Ratios of paired errors first / second, ascending, with their 5 % and 95 % quantiles. */
export function ratios(a: Contender, b: Contender, metric: string): { sorted: number[]; low: number; high: number; middle: number } | null {
  const draws = sharedDraws([a, b]);
  const va = valuesOf(a, metric, draws);
  const vb = valuesOf(b, metric, draws);
  const all = draws.flatMap((_, i) => {
    const x = va[i];
    const y = vb[i];
    return x && y && x > 0 && y > 0 ? [x / y] : [];
  });
  if (!all.length) return null;
  const sorted = sortedCopy(all);
  return { sorted: [...sorted], low: quantileOfSorted(sorted, 0.05), high: quantileOfSorted(sorted, 0.95), middle: median(all) };
}

/** The draw whose error is the median's nearest in the first run: shown unless another is chosen. */
export function middleDraw(contender: Contender | undefined): number | null {
  if (!contender) return null;
  const known = contender.trials.filter((t) => (t.metrics[l2Key] ?? null) !== null).sort((a, b) => (a.metrics[l2Key] ?? 0) - (b.metrics[l2Key] ?? 0) || a.draw - b.draw);
  return known[Math.floor((known.length - 1) / 2)]?.draw ?? contender.trials[0]?.draw ?? null;
}

/** Draws won; a tie counts half, so the count is whole or half. */
export function drawsWon(pair: Pick<PairComparison, 'wins' | 'pairs'>): string {
  const count = Math.round(pair.wins * pair.pairs * 2) / 2;
  return Number.isInteger(count) ? String(count) : count.toFixed(1);
}

/** Two to four sentences, counts before adjectives. */
export function spokenVerdict(contenders: readonly Contender[], noise: number, floor: number | null, unit: string): string[] {
  const order = [...contenders].sort((a, b) => (medianOf(a, l2Key) ?? Infinity) - (medianOf(b, l2Key) ?? Infinity));
  const found = pairs(contenders, l2Key);
  const between = (a: Contender, b: Contender): PairComparison | null => {
    const direct = found.find((p) => p.first === a.id && p.second === b.id);
    if (direct) return direct;
    const turned = found.find((p) => p.first === b.id && p.second === a.id);
    return turned ? { ...turned, first: a.id, second: b.id, wins: 1 - turned.wins } : null;
  };
  const [best, ...rest] = order;
  const sentences: string[] = [];
  if (!best) return sentences;
  rest.forEach((other, i) => {
    const pair = between(best, other);
    if (!pair) return;
    const won = drawsWon(pair);
    const draws = `${won} of ${pair.pairs}${i === 0 ? ' paired draws' : ''}`;
    if (i === 0) {
      sentences.push(
        pair.separable
          ? `${best.name} has the lower relative L2 in ${draws} against ${other.name}.`
          : `${best.name} and ${other.name} cannot be separated in relative L2: ${best.letter} won ${draws}.`,
      );
    } else sentences.push(pair.separable ? `It is lower than ${other.name} in ${draws}.` : `Nor can ${other.name} be separated from it (${draws}).`);
  });
  const bySup = contenders.map((c) => ({ c, sup: medianOf(c, supKey) })).filter((v): v is { c: Contender; sup: number } => v.sup !== null).sort((a, b) => a.sup - b.sup);
  const least = bySup[0];
  const most = bySup[bySup.length - 1];
  const before = bySup[bySup.length - 2];
  if (least && most && before && least !== most && least.sup > 0) {
    sentences.push(
      most.sup / before.sup > 1.4
        ? `In L∞ ${most.c.name} stands apart: its median largest error is ${withUnit(formatError(most.sup), unit)}, ${(most.sup / least.sup).toFixed(1)} times that of ${least.c.name}.`
        : `In L∞ they stay together, ${formatError(least.sup)} to ${withUnit(formatError(most.sup), unit)}.`,
    );
  }
  if (floor !== null && noise < floor) sentences.push(`This noise is below the model-error floor of ${formatPercent(floor)}, so the gap between the meshes decides.`);
  return sentences;
}

/** The pair that L2 and L-infinity judge most differently in one draw: the ratio of their ratios, and the run with the spot. */
export function disagreement(readings: readonly { contender: Contender; l2: number; sup: number }[]): { near: Contender; far: Contender; l2Ratio: number; supRatio: number } | null {
  let found: { near: Contender; far: Contender; l2Ratio: number; supRatio: number } | null = null;
  for (const near of readings) {
    for (const far of readings) {
      if (near === far || near.sup <= 0 || near.l2 <= 0 || far.sup < near.sup) continue;
      const candidate = { near: near.contender, far: far.contender, l2Ratio: far.l2 / near.l2, supRatio: far.sup / near.sup };
      const gap = (c: typeof candidate): number => Math.abs(Math.log(c.supRatio / c.l2Ratio));
      if (!found || gap(candidate) > gap(found)) found = candidate;
    }
  }
  return found;
}
