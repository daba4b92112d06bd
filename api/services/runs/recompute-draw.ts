import type { EntityManager } from '@mikro-orm/sqlite';
import type { Sensitivity } from '../../../shared/contracts/runs';
import { AppError } from '../../../shared/errors.ts';
import { fromBlob } from '../../entities/float64-blob.ts';
import { RunImageEntity, TrialEntity, type Trial } from '../../entities/run.ts';
import type { Jobs } from '../../jobs/jobs.ts';
import { pickDraws } from '../../jobs/level-picks.ts';
import { loadRunInput } from '../../jobs/run-input.ts';
import { metrics } from '../../../solvers/metrics/registry';
import type { LoadedRun } from './find-run.ts';

export interface DrawImage {
  readonly image: Float64Array;
  /** Kept in the database; otherwise it was computed just now and its hash compared. */
  readonly stored: boolean;
  readonly trial: Trial;
}

/**
 * The image of one draw: the stored one, or computed again in a worker.
 * @throws AppError 'not-found' for a draw that was not computed, 'conflict' when the bits are not those of the run
 */
export async function recomputeImage(em: EntityManager, jobs: Pick<Jobs, 'recomputeDraw'>, run: LoadedRun, level: number, draw: number): Promise<DrawImage> {
  const trial = await findTrial(em, run, level, draw);
  const stored = await em.findOne(RunImageEntity, { run: run.id, level, draw }, { populate: ['values'] });
  if (stored) return { image: fromBlob(stored.values.$), stored: true, trial };
  const again = await jobs.recomputeDraw(await loadRunInput(em, run, run.phantomVersion.$), level, draw);
  if (again.imageHash !== trial.imageHash) {
    throw new AppError('conflict', `Draw ${draw + 1} gave other bits than the run has (${run.codeVersion ?? 'unknown code'}). A recomputation by a reviewer says which draws differ.`);
  }
  return { image: again.image, stored: false, trial };
}

/** The draw whose ranking metric is the median or the worst of its level. */
export async function drawOfLevel(em: EntityManager, run: LoadedRun, level: number, which: 'median' | 'worst'): Promise<number> {
  const key = run.entry.$.bench.$.rankingMetric;
  const rows = await em.find(TrialEntity, { run: run.id, level }, { fields: ['draw', 'metrics'] });
  if (rows.length === 0) throw new AppError('not-found', `Level ${level + 1} of ${run.id} is not computed.`);
  const picks = pickDraws(rows.map((row) => ({ draw: row.draw, value: row.metrics[key] ?? null })), metrics.find((metric) => metric.key === key)?.better ?? 'lower');
  return which === 'median' ? picks.medianDraw : picks.worstDraw;
}

/** Error against the regularisation parameter at the median draw of a level, and what the rule chose in all its draws. */
export async function sensitivity(em: EntityManager, jobs: Pick<Jobs, 'sensitivity'>, run: LoadedRun, level: number): Promise<Sensitivity> {
  const delta = run.ladder[level];
  if (delta === undefined) throw new AppError('not-found', `The ladder has no level ${level + 1}.`);
  const draw = await drawOfLevel(em, run, level, 'median');
  const { parameterName, parameters, errors, oracle, picard } = await jobs.sensitivity(await loadRunInput(em, run, run.phantomVersion.$), level, draw);
  const trials = await em.find(TrialEntity, { run: run.id, level }, { orderBy: { draw: 'asc' } });
  const choices = trials.flatMap((trial) =>
    trial.parameter === null || trial.parameter === undefined ? [] : [{ draw: trial.draw, parameter: trial.parameter, error: trial.metrics['relative-l2-error'] ?? null }],
  );
  return { level: delta, draw, parameterName, parameters, errors, choices, oracle, picard };
}

async function findTrial(em: EntityManager, run: LoadedRun, level: number, draw: number): Promise<Trial> {
  const trial = await em.findOne(TrialEntity, { run: run.id, level, draw });
  if (!trial) throw new AppError('not-found', `Draw ${draw + 1} of level ${level + 1} of ${run.id} is not computed.`);
  return trial;
}
