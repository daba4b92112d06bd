import { medianLoss } from './blocks';
import { fewestBlocks, friedman, type FriedmanResult } from './friedman';
import { averageRanks } from './ranks';

/** What Friedman's and Nemenyi's tests say about some methods over blocks. Everything is in the order that it names. */
export interface Separation {
  /** Places of the methods in the input, best first: by mean rank, equal ones by the median of their losses, then as given. */
  readonly order: readonly number[];
  /** Mean rank by place in the input, 1 the best. */
  readonly meanRanks: Float64Array;
  /** Tie group by place in the input, counted from 0; null where the blocks are too few for any winner. */
  readonly groups: readonly number[] | null;
  readonly blocks: number;
  /** Blocks with which the tests can reach the level at all. */
  readonly fewest: number;
  readonly enough: boolean;
  /** Friedman's test rejects that all are alike. */
  readonly separable: boolean;
  /** Null below two blocks. */
  readonly friedman: FriedmanResult | null;
  /** Null where the blocks are too few. */
  readonly criticalDifference: number | null;
}

/**
 * Ranks, tie groups and their order from one test. A group holds the methods within the critical difference of its best; without a
 * significant Friedman test there is one group.
 * @param losses one array a method, over the same blocks; small is good, Infinity is worst
 * @throws RangeError below two methods or one block, or for NaN
 */
export function separate(losses: readonly Float64Array[], alpha = 0.05): Separation {
  const k = losses.length;
  const blocks = losses[0]?.length ?? 0;
  if (k < 2 || blocks < 1) throw new RangeError(`A comparison needs two methods and a block, not ${k} and ${blocks}.`);
  const rows = Array.from({ length: blocks }, (_, b) => losses.map((own) => own[b]));
  if (rows.some((row) => row.some(Number.isNaN))) throw new RangeError('A loss is not a number.');
  const result = blocks >= 2 ? friedman(rows, alpha) : null;
  const meanRanks = result?.meanRanks ?? averageRanks(rows[0]);
  const medians = losses.map(medianLoss);
  const order = losses.map((_, i) => i).sort((i, j) => compare(meanRanks[i], meanRanks[j]) || compare(medians[i], medians[j]) || i - j);
  const fewest = fewestBlocks(k, alpha);
  const enough = blocks >= fewest;
  const separable = enough && result !== null && result.p < alpha;
  const criticalDifference = enough && result ? result.criticalDifference : null;
  let groups: number[] | null = null;
  if (enough) {
    groups = new Array<number>(k).fill(0);
    let group = 0;
    let head = order[0];
    for (const i of order) {
      if (separable && meanRanks[i] - meanRanks[head] > criticalDifference!) {
        group++;
        head = i;
      }
      groups[i] = group;
    }
  }
  return { order, meanRanks, groups, blocks, fewest, enough, separable, friedman: result, criticalDifference };
}

function compare(a: number, b: number): number {
  return a < b ? -1 : a > b ? 1 : 0;
}

const numbers = ['no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten', 'eleven', 'twelve'] as const;
const count = (n: number, one: string, many = `${one}s`): string => `${numbers[n] ?? n} ${n === 1 ? one : many}`;
const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/**
 * The outcome in words, counts before adjectives.
 * @param noun what a block is, e.g. 'phantom'
 */
export function separationWords(separation: Separation, noun = 'phantom'): string {
  const { blocks, fewest, enough, separable, groups, order } = separation;
  const k = order.length;
  const over = count(blocks, noun);
  if (!enough) return `Not enough ${noun}s to separate: ${over}, and for ${count(k, 'solver')} the tests need at least ${numbers[fewest] ?? fewest} to reach 5 %. No winner is named.`;
  if (!separable) return `${capital(count(k, 'solver'))} cannot be separated over ${over}.`;
  const separated = Math.max(...groups!) + 1;
  return separated === 1 ? `The solvers differ over ${over}, but none is clear of the first.` : `${capital(count(separated, 'group'))} can be separated over ${over}.`;
}

/** A separation as it is told. */
export interface SeparationTest {
  readonly name: string;
  readonly blocks: number;
  /** Blocks that the tests need; null where there is nothing to compare. */
  readonly fewest: number | null;
  readonly enough: boolean;
  readonly chiSquare: number | null;
  /** Iman and Davenport's F; null where it is infinite or there is no test. */
  readonly statistic: number | null;
  readonly pValue: number | null;
  /** p is counted, not approximated. */
  readonly exact: boolean;
  readonly criticalDifference: number | null;
  readonly separable: boolean;
  readonly words: string;
}

/** @param separation null where fewer than two methods are complete */
export function separationTest(separation: Separation | null, blocks: number, noun = 'phantom'): SeparationTest {
  const nothing = { chiSquare: null, statistic: null, pValue: null, exact: false, criticalDifference: null, separable: false } as const;
  if (!separation) return { ...nothing, name: 'No test', blocks, fewest: null, enough: false, words: 'Fewer than two solvers have finished on every phantom: there is nothing to compare.' };
  const { friedman: result, fewest, enough, criticalDifference, separable } = separation;
  const words = separationWords(separation, noun);
  if (!result || !enough) return { ...nothing, name: 'No test', blocks, fewest, enough, words };
  return {
    name: `Friedman with Nemenyi distance over ${blocks} ${noun}s`, blocks, fewest, enough, chiSquare: result.chiSquare, statistic: result.f === Infinity ? null : result.f,
    pValue: result.p, exact: result.pExact !== null, criticalDifference, separable, words,
  };
}
