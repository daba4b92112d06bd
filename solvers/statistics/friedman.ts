import { chiSquareSurvival, fSurvival, nemenyiCriticalValue } from './distributions';
import { friedmanExactP } from './friedman-exact';
import { averageRanks, tieSum } from './ranks';

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
  /** Share of all orders within blocks that give a statistic as large; null where they are too many to count. */
  readonly pExact: number | null;
  /** What is held against the level: `pExact` where it exists, else `pF`. */
  readonly p: number;
  /** Nemenyi's critical difference of mean ranks. */
  readonly criticalDifference: number;
}

/** Statistics from mean ranks alone; `tieCorrection` is 1 without ties. */
export function friedmanFromRanks(meanRanks: Float64Array, blocks: number, tieCorrection = 1, alpha = 0.05, pExact: number | null = null): FriedmanResult {
  const k = meanRanks.length;
  if (k < 2 || blocks < 2) throw new RangeError(`The Friedman test needs two methods and two blocks, not ${k} and ${blocks}.`);
  const middle = (k + 1) / 2;
  let spread = 0;
  for (let j = 0; j < k; j++) spread += (meanRanks[j] - middle) * (meanRanks[j] - middle);
  // 12 N / (k (k + 1)) sum (R_j - (k + 1) / 2)^2, the same as Demsar's form without its cancellation.
  const chiSquare = tieCorrection > 0 ? ((12 * blocks) / (k * (k + 1))) * (spread / tieCorrection) : 0;
  const rest = blocks * (k - 1) - chiSquare;
  const f = chiSquare === 0 ? 0 : rest > 1e-12 * chiSquare ? ((blocks - 1) * chiSquare) / rest : Infinity;
  const pF = f === Infinity ? 0 : fSurvival(f, k - 1, (k - 1) * (blocks - 1));
  return {
    blocks, methods: k, meanRanks, chiSquare, pChiSquare: chiSquareSurvival(chiSquare, k - 1), f, pF, pExact, p: pExact ?? pF, criticalDifference: criticalDifference(k, blocks, alpha),
  };
}

/** Mean ranks further apart than this differ (Nemenyi 1963; Demsar 2006). */
export function criticalDifference(methods: number, blocks: number, alpha = 0.05): number {
  return nemenyiCriticalValue(methods, alpha) * Math.sqrt((methods * (methods + 1)) / (6 * blocks));
}

/**
 * Friedman test over blocks with the critical difference of Nemenyi (Demsar 2006). The tie correction is that of scipy; Demsar's formula
 * has none. Few blocks of few methods are counted out, because the F of an order that is the same in two or three blocks is infinite
 * and says nothing.
 * @param losses one row a block, one column a method; small is good, Infinity is worst
 * @throws RangeError below two methods or two blocks, for rows of different lengths, or NaN
 */
export function friedman(losses: readonly ArrayLike<number>[], alpha = 0.05): FriedmanResult {
  const blocks = losses.length;
  const k = losses[0]?.length ?? 0;
  const meanRanks = new Float64Array(k);
  const rows: Float64Array[] = [];
  let ties = 0;
  for (const row of losses) {
    if (row.length !== k) throw new RangeError(`A block has ${row.length} methods, the first ${k}.`);
    for (let j = 0; j < k; j++) if (Number.isNaN(row[j])) throw new RangeError('A block holds a loss that is not a number.');
    const ranks = averageRanks(row);
    for (let j = 0; j < k; j++) meanRanks[j] += ranks[j];
    ties += tieSum(ranks);
    rows.push(ranks);
  }
  for (let j = 0; j < k; j++) meanRanks[j] /= blocks;
  return friedmanFromRanks(meanRanks, blocks, k > 1 ? 1 - ties / (blocks * k * (k * k - 1)) : 1, alpha, k > 1 && blocks > 1 ? friedmanExactP(rows) : null);
}

/**
 * Fewest blocks with which both tests can reach a level at all. Friedman: the same order in every block has probability
 * (1 / k!)^(n - 1) by chance. Nemenyi: the largest difference of mean ranks is k - 1.
 */
export function fewestBlocks(methods: number, alpha = 0.05): number {
  if (!(Number.isInteger(methods) && methods >= 2)) throw new RangeError(`A comparison needs at least two methods, not ${methods}.`);
  let orders = 1;
  for (let k = 2; k <= methods; k++) orders *= k;
  let n = 2;
  for (let p = 1 / orders; p >= alpha; p /= orders) n++;
  while (criticalDifference(methods, n, alpha) >= methods - 1) n++;
  return n;
}
