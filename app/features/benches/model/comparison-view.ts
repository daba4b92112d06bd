import type { BenchComparison, Ranking } from '../../../../shared/contracts/benches';
import type { MatrixCell } from '../../../components/charts/pair-matrix';
import { axisView, type AxisView } from '../../../lib/axis-words';
import { formatError, numberWord, plural } from '../../../lib/format';

type Solver = Ranking['rows'][number]['solver'];

/** Two versions of one solver are two entries. */
export const entryId = (solver: Pick<Solver, 'slug' | 'version'>): string => `${solver.slug}@${solver.version}`;

/** What the ranks are of: 'at 1 % noise', or the mean over so many levels. */
export const overWords = ({ over, level, levels }: Pick<Ranking, 'over' | 'level' | 'levels'>, axis: AxisView = axisView()): string =>
  over === 'ladder' ? `over ${numberWord(levels.length)} ${axis.levels}` : `at ${axis.at(level)}`;

/** What one block of the test is. */
export function blockWords({ over, levels, level, blocks, phantom }: BenchComparison, axis: AxisView = axisView()): string {
  if (blocks === 'draws') return over === 'ladder' ? `A block is a draw of ${phantom?.name ?? 'the phantom'}: the mean of its errors from ${axis.format(levels[0] ?? level)} to ${axis.format(levels[levels.length - 1] ?? level)}.` : `A block is a draw of ${phantom?.name ?? 'the phantom'}. The result holds for this phantom, not for others.`;
  return over === 'ladder'
    ? `A block is a phantom: the mean, over ${numberWord(levels.length)} levels from ${axis.format(levels[0] ?? level)} to ${axis.format(levels[levels.length - 1] ?? level)}, of its median over draws.`
    : `A block is a phantom: its median over draws at ${axis.format(level)}.`;
}

/** How the level of the test was found. */
export function testWords({ test }: Pick<BenchComparison, 'test'>): string {
  if (test.pValue === null) return '';
  const f = test.statistic === null ? '' : `, F = ${test.statistic.toFixed(2)}`;
  return `Friedman with ties ${test.chiSquare === null ? '' : `χ² = ${test.chiSquare.toFixed(2)}`}${f}, p ${pWords(test.pValue)} ${test.exact ? 'by counting all orders' : 'by F'}; Nemenyi distance ${test.criticalDifference?.toFixed(2) ?? '–'}.`;
}

export const pWords = (p: number): string => (p < 0.001 ? '< 0.001' : `= ${p.toFixed(p < 0.1 ? 3 : 2)}`);

/** The pair with the row first, whichever way it is stored. */
function pairAt(comparison: BenchComparison, row: number, column: number) {
  const direct = comparison.pairs.find((pair) => pair.first === row && pair.second === column);
  if (direct) return { ...direct, turned: false };
  const other = comparison.pairs.find((pair) => pair.first === column && pair.second === row);
  return other ? { ...other, turned: true } : null;
}

/** Row's error over the column's, with what is known of the pair. */
export function ratioCell(comparison: BenchComparison, names: readonly string[], row: number, column: number): MatrixCell | null {
  const pair = pairAt(comparison, row, column);
  if (!pair) return null;
  const { blocks } = comparison.test;
  const noun = comparison.blocks === 'draws' ? 'draw' : 'phantom';
  const enough = blocks >= comparison.fewestPairs;
  const tested = enough ? `Signed ranks over ${plural(blocks, noun)}: p ${pWords(pair.pHolm)} corrected, ${pair.separable ? 'separable' : 'not separable'}.` : `${plural(blocks, noun)}: too few for signed ranks, which need ${comparison.fewestPairs}.`;
  const head = `${names[row] ?? ''} to ${names[column] ?? ''}: `;
  if (!pair.ratio) return { text: '–', ahead: 0, separable: pair.separable, words: `${head}${pair.reason ?? 'no ratio'} ${tested}` };
  const turn = (value: number): number => (pair.turned ? 1 / value : value);
  const value = turn(pair.ratio.value);
  const [low, high] = pair.turned ? [1 / pair.ratio.high, 1 / pair.ratio.low] : [pair.ratio.low, pair.ratio.high];
  const short = comparison.blocks === 'phantoms' && blocks < 12 ? `, from ${plural(blocks, 'phantom')} too short` : '';
  const better = pair.turned ? 1 - pair.ratio.firstBetter : pair.ratio.firstBetter;
  return {
    text: ratioText(value), ahead: Math.min(1, Math.max(0, Math.log(1 / value) / Math.log(2))), separable: pair.separable,
    words: `${head}error × ${ratioText(value)}, 95 % interval ${ratioText(low)} to ${ratioText(high)}${short}; smaller in ${(100 * better).toFixed(0)} % of resamples. ${tested}`,
  };
}

const ratioText = (value: number): string => (value >= 99.5 ? formatError(value) : value >= 9.95 ? value.toFixed(0) : value.toFixed(value < 0.0995 ? 3 : 2));

/** Per cent of paired draws that the row wins: of all phantoms, or of the one looked at. */
export function wonCell(comparison: BenchComparison, ranking: Ranking, names: readonly string[], row: number, column: number): MatrixCell | null {
  const pair = pairAt(comparison, row, column);
  let share: number | null;
  if (comparison.blocks === 'draws') share = pair ? (pair.turned ? 1 - pair.wins : pair.wins) : null;
  else {
    const place = (at: number): number => ranking.rows.findIndex((own) => comparison.solvers[at] && entryId(own.solver) === entryId(comparison.solvers[at].solver));
    share = ranking.wins[place(row)]?.[place(column)] ?? null;
  }
  if (share === null) return null;
  const where = comparison.blocks === 'draws' ? `of ${comparison.phantom?.name ?? 'this phantom'}` : 'of all phantoms together';
  return {
    text: (100 * share).toFixed(0), ahead: Math.max(0, 2 * share - 1), separable: pair?.separable ?? false,
    words: `${names[row] ?? ''} has the smaller error than ${names[column] ?? ''} in ${(100 * share).toFixed(0)} % of the paired draws ${where}.`,
  };
}
