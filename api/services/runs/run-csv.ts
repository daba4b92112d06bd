import type { EntityManager } from '@mikro-orm/sqlite';
import { axisWords } from '../../../shared/domain/axes';
import { metrics } from '../../../solvers/metrics/registry';
import { toCsv, type CsvCell } from '../../http/csv.ts';
import { caution } from '../benches/caution.ts';
import { noiseWords } from '../benches/noise-words.ts';
import { metricUnit } from '../figures/metric-unit.ts';
import { levelTable } from '../figures/run-tables.ts';
import { loadRunFigures } from '../figures/load-run-figures.ts';
import { commentLines } from '../files/comment-lines.ts';
import { axisOf } from './axis-of.ts';
import type { LoadedRun } from './find-run.ts';
import { listTrials } from './list-trials.ts';

const momentRows = [['bias-squared', 'biasSquared'], ['variance', 'variance'], ['mean-squared-error', 'meanSquaredError']] as const;

/** The error table, one row a level and metric; bias and variance after them. */
export async function runTableCsv(em: EntityManager, run: LoadedRun): Promise<string> {
  const figures = await loadRunFigures(em, run);
  const { family } = run.phantomVersion.$.definition;
  const rows = metrics.flatMap((metric) =>
    levelTable(figures, run.ladder, metric.key).map((row): CsvCell[] => [
      metric.key, metricUnit(metric, family), row.level, row.count, row.median, row.p05, row.p95, row.mean, row.sd, row.worst, row.worstDraw === null ? null : row.worstDraw + 1, run.trivial?.[metric.key] ?? null,
    ]),
  );
  // One figure a level, not one a draw: it stands where the mean does.
  for (const [key, of] of momentRows)
    run.ladder.forEach((level, i) => {
      const moments = run.levelMoments?.[i];
      rows.push([key, '', level, moments?.draws ?? null, null, null, null, moments?.[of] ?? null, null, null, null, null]);
    });
  return preamble(run) + toCsv(['metric', 'unit', levelColumn(run), 'draws', 'median', 'p05', 'p95', 'mean', 'sd', 'worst', 'worst_draw', 'trivial'], rows);
}

/** Every draw, one row each. */
export async function runTrialsCsv(em: EntityManager, run: LoadedRun): Promise<string> {
  const trials = await listTrials(em, { run });
  const keys = metrics.map((metric) => metric.key);
  const header = ['level', levelColumn(run), 'draw', 'noise_norm', 'parameter', 'iterations', 'forward_solves', 'stop', ...keys, 'sup_x', 'sup_y', 'seconds', 'image_sha256'];
  const rows = trials.map((trial) => [
    trial.level + 1, run.ladder[trial.level] ?? null, trial.draw + 1, trial.noiseNorm, trial.parameter, trial.iterations, trial.forwardSolves, trial.stop, ...keys.map((key) => trial.metrics[key] ?? null),
    trial.supAt?.[0] ?? null, trial.supAt?.[1] ?? null, trial.seconds, trial.imageHash,
  ]);
  return preamble(run) + toCsv(header, rows);
}

/** Name of the column of levels: the axis. */
const levelColumn = (run: LoadedRun): string => axisOf(run).key.replaceAll('-', '_');

function axisLine(run: LoadedRun): string[] {
  const axis = axisOf(run);
  return axis.key === 'noise' ? [] : [`Levels: ${axisWords[axis.key].name}. ${axisWords[axis.key].line} The noise is fixed at ${Number((100 * axis.noise).toPrecision(4))} %`];
}

function preamble(run: LoadedRun): string {
  const version = run.entry.$.solverVersion.$;
  const bench = run.entry.$.bench.$;
  const phantom = run.phantomVersion.$;
  return commentLines([
    `Hadamark run ${run.id}: ${version.solver.$.name}, version ${version.n}, on ${phantom.name}, version ${phantom.n}`,
    `Bench ${bench.id}, revision ${bench.revision}: ${bench.title}`,
    noiseWords(phantom.definition.noiseReference, run.noiseModel),
    ...axisLine(run),
    `Seed ${run.seed}; ${run.draws} draws a level; code ${run.codeVersion ?? 'not started'}`,
    `Phantom ${run.phantomHash}; solver ${version.contentHash}; result ${run.resultHash ?? 'not finished'}`,
    `Review: ${run.review}${run.reservation ? `. Reservation: ${run.reservation}` : ''}`,
    ...caution,
  ]);
}
