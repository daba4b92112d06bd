import type { EntityManager } from '@mikro-orm/sqlite';
import { metrics } from '../../../solvers/metrics/registry';
import { toCsv, type CsvCell } from '../../http/csv.ts';
import { loadRunFigures } from '../figures/load-run-figures.ts';
import { metricUnit } from '../figures/metric-unit.ts';
import { levelTable } from '../figures/run-tables.ts';
import { commentLines } from '../files/comment-lines.ts';
import { percent, rankBench, type RankedOver } from './bench-ranking.ts';
import { loadBenchResults, requireMetric } from './bench-results.ts';
import { caution } from './caution.ts';
import { phantomsOf, type LoadedBench } from './find-bench.ts';
import { noiseWords } from './noise-words.ts';

/** The ranking as it stands at a noise, one row a solver. */
export async function rankingCsv(em: EntityManager, input: { readonly bench: LoadedBench; readonly noise: number; readonly metric: string; readonly over: RankedOver; readonly now: Date }): Promise<string> {
  const { bench, noise, over } = input;
  const metric = requireMetric(input.metric);
  const ranking = await rankBench(em, { bench, noise, metric: metric.key, over });
  const unit = metricUnit(metric, bench.family);
  const keys = metrics.map(({ key }) => key);
  const header = [
    'rank', 'tie_group', 'mean_rank', 'solver', 'solver_id', 'version', 'group', 'median', 'p05', 'p95', ...keys.map((key) => `median_${key}`), 'breakdown', 'breakdown_note', 'exponent',
    'seconds_per_reconstruction', 'time_ratio_to_truncated_svd', 'on_error_time_front', 'review', 'reservations', 'complete',
  ];
  const rows = ranking.rows.map((row): CsvCell[] => [
    row.rank, row.tieGroup === null ? null : row.tieGroup + 1, row.meanRank, row.solver.name, row.solver.id, row.solver.version, row.group.name, row.median, row.p05, row.p95, ...keys.map((key) => row.medians[key] ?? null),
    row.breakdown, row.breakdownNote, row.exponent, row.secondsPerReconstruction, row.timeRatio, row.onFront, row.review, row.reservations.join('; '), row.complete,
  ]);
  return (
    preamble(input.bench, input.now) +
    commentLines([
      `Ranked by ${metric.name} (${metric.key}${unit === '' ? '' : `, ${unit}`}) at a noise of ${percent(noise)}${ranking.interpolated ? `, interpolated in log-log; tests are of the nearest level, ${percent(ranking.level)}` : ''}`,
      `${ranking.test.name}: ${ranking.test.words} A block is a phantom: ${over === 'ladder' ? `the mean over ${ranking.levels.map(percent).join(', ')} of its medians over draws` : `its median over draws at ${percent(ranking.level)}`}`,
      `The trivial reconstruction (the background alone) scores ${ranking.trivial ?? 'no figure'}`,
    ]) +
    toCsv(header, rows)
  );
}

/** Every entry, phantom, metric and level. Declined runs stay in the table with their state: it is the record, not the ranking. */
export async function tableCsv(em: EntityManager, input: { readonly bench: LoadedBench; readonly now: Date }): Promise<string> {
  const { bench } = input;
  const results = await loadBenchResults(em, bench);
  const phantoms = phantomsOf(bench);
  const header = ['solver', 'solver_id', 'version', 'phantom', 'phantom_id', 'phantom_version', 'run', 'review', 'reservation', 'metric', 'unit', 'noise', 'draws', 'median', 'p05', 'p95', 'mean', 'sd', 'worst', 'trivial', 'result_sha256'];
  const rows: CsvCell[][] = [];
  for (const { version, solver, runs } of results.entries) {
    for (const [index, run] of runs.entries()) {
      const on = phantoms[index];
      if (!run || !on || run.state !== 'finished') continue;
      const figures = await loadRunFigures(em, run);
      for (const metric of metrics) {
        const { key } = metric;
        const unit = metricUnit(metric, bench.family);
        for (const level of levelTable(figures, bench.ladder, key)) {
          rows.push([
            solver.name, solver.id, version.n, on.version.name, on.phantom.id, on.version.n, run.id, run.review, run.reservation ?? null, key, unit, level.level, level.count, level.median, level.p05, level.p95, level.mean,
            level.sd, level.worst, run.trivial?.[key] ?? null, run.resultHash ?? null,
          ]);
        }
      }
    }
  }
  return preamble(bench, input.now) + toCsv(header, rows);
}

function preamble(bench: LoadedBench, now: Date): string {
  const reference = phantomsOf(bench)[0]?.version.definition.noiseReference;
  return commentLines([
    `Hadamark bench ${bench.id}, revision ${bench.revision}: ${bench.title}`,
    bench.question,
    `State ${bench.state}; read ${now.toISOString()}; content hash ${bench.contentHash}`,
    ...(reference ? [noiseWords(reference, bench.noiseModel)] : []),
    `Seed ${bench.seed}; ${bench.draws} draws at each of ${bench.ladder.length} levels: ${bench.ladder.map(percent).join(', ')}`,
    'Norms: errors are taken on the evaluation grid inside the body; a relative one is over the same norm of truth less background, so that the background alone scores 1',
    'Medians with 5 and 95 % quantiles over draws',
    ...caution,
  ]);
}
