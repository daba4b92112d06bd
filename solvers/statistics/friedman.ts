import { chiSquareSurvival, fSurvival, nemenyiCriticalValue } from './distributions';
import { averageRanks } from './ranks';

export interface FriedmanResult {
  readonly blocks: number;
  readonly methods: number;
  /** Mean rank of each method, 1 the best. */
  readonly meanRanks: Float64Array;
  /** Friedman's statistic with the correction for ties. */
  readonly chiSquare: number;
  readonly pChiSquare: number;
  /** Iman and Davenport's F from it, less conservative; Infinity where the ranking is the same in every block. */
  readonly f: number;
  readonly pF: number;
  /** Nemenyi's critical difference of mean ranks. */
  readonly criticalDifference: number;
}

/** Statistics from mean ranks alone; `tieCorrection` is 1 without ties. */
export function friedmanFromRanks(meanRanks: Float64Array, blocks: number, tieCorrection = 1, alpha = 0.05): FriedmanResult {
  const k = meanRanks.length;
  if (k < 2 || blocks < 2) throw new RangeError(`The Friedman test needs two methods and two blocks, not ${k} and ${blocks}.`);
  const middle = (k + 1) / 2;
  let spread = 0;
  for (let j = 0; j < k; j++) spread += (meanRanks[j] - middle) * (meanRanks[j] - middle);
  // 12 N / (k (k + 1)) sum (R_j - (k + 1) / 2)^2, the same as Demsar's form without its cancellation.
  const chiSquare = tieCorrection > 0 ? ((12 * blocks) / (k * (k + 1))) * (spread / tieCorrection) : 0;
  const rest = blocks * (k - 1) - chiSquare;
  const f = chiSquare === 0 ? 0 : rest > 1e-12 * chiSquare ? ((blocks - 1) * chiSquare) / rest : Infinity;
  return {
    blocks, methods: k, meanRanks, chiSquare, pChiSquare: chiSquareSurvival(chiSquare, k - 1), f, pF: f === Infinity ? 0 : fSurvival(f, k - 1, (k - 1) * (blocks - 1)),
    criticalDifference: nemenyiCriticalValue(k, alpha) * Math.sqrt((k * (k + 1)) / (6 * blocks)),
  };
}

/**
 * Friedman test over blocks with the critical difference of Nemenyi (Demsar 2006). The tie correction is that of scipy; Demsar's formula
 * has none.
 * @param losses one row a block, one column a method; small is good, Infinity is worst
 */
export function friedman(losses: readonly ArrayLike<number>[], alpha = 0.05): FriedmanResult {
  const blocks = losses.length;
  const k = losses[0]?.length ?? 0;
  const meanRanks = new Float64Array(k);
  let ties = 0;
  for (const row of losses) {
    if (row.length !== k) throw new RangeError(`A block has ${row.length} methods, the first ${k}.`);
    const ranks = averageRanks(row);
    for (let j = 0; j < k; j++) meanRanks[j] += ranks[j];
    ties += tieSum(ranks);
  }
  for (let j = 0; j < k; j++) meanRanks[j] /= blocks;
  return friedmanFromRanks(meanRanks, blocks, 1 - ties / (blocks * k * (k * k - 1)), alpha);
}

/** Sum over groups of equal ranks of (t^3 - t). */
export function tieSum(ranks: Float64Array): number {
  const sorted = Float64Array.from(ranks).sort();
  let sum = 0;
  for (let i = 0; i < sorted.length; ) {
    let j = i;
    while (j + 1 < sorted.length && sorted[j + 1] === sorted[i]) j++;
    const t = j - i + 1;
    sum += t * t * t - t;
    i = j + 1;
  }
  return sum;
}
