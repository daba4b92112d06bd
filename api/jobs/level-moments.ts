import { levelMoments, type LevelMoments } from '../../solvers/campaign/level-moments';
import { RunEntity, TrialEntity } from '../entities/run.ts';
import type { JobContext } from './run-job.ts';
import type { RunInput } from './tasks.ts';
import { WorkerFailure, type WorkerPool } from './worker-pool.ts';

export interface MomentRow {
  readonly draw: number;
  readonly metrics: Record<string, number | null>;
}

/**
 * Bias and variance of a complete level, in draw order however the draws came in. A draw whose every metric is undefined gave no finite
 * image: the background is stored in its place, which would count as an answer. Null while an image is missing.
 */
export function momentsOf(rows: readonly MomentRow[], images: ReadonlyMap<number, Float64Array>, input: Pick<RunInput, 'truthImage' | 'definition' | 'cases'>, level: number): LevelMoments | null {
  const { truthImage } = input.cases?.[level] ?? input;
  const ordered = [...rows].sort((a, b) => a.draw - b.draw);
  const kept: Float64Array[] = [];
  for (const { draw, metrics } of ordered) {
    const image = images.get(draw);
    if (!image) return null;
    if (Object.values(metrics).some((value) => value !== null)) kept.push(image);
  }
  const lost = ordered.length - kept.length;
  const found = levelMoments(kept, truthImage, new Float64Array(truthImage.length).fill(input.definition.truth.background));
  if (lost === 0) return found;
  return { ...found, reason: kept.length === 0 ? 'No draw gave a finite image.' : `${lost} of ${ordered.length} draws gave no finite image and are left out.` };
}

/** Draws in one message to a worker, so that a slow method stays within its time limit. */
const batch = 4;

/** Levels whose images a stop of the server lost are computed again; their hashes say whether they are the same. */
export async function fillMoments(context: JobContext, work: { readonly id: string; readonly input: RunInput; readonly pool: Pick<WorkerPool, 'run'>; readonly signal: AbortSignal }): Promise<void> {
  const { id, input, pool, signal } = work;
  const { levelMoments: known } = await context.orm.em.fork().findOneOrFail(RunEntity, { id }, { fields: ['levelMoments'] });
  const all = input.ladder.map((_, level) => known?.[level] ?? null);
  for (const [level, own] of all.entries()) {
    if (own) continue;
    const rows = await context.orm.em.fork().find(TrialEntity, { run: id, level }, { fields: ['draw', 'metrics', 'imageHash'], orderBy: { draw: 'asc' } });
    const images = new Map<number, Float64Array>();
    for (let from = 0; from < rows.length; from += batch) {
      const answer = await pool.run('runSlice', { run: input, level, draws: rows.slice(from, from + batch).map((row) => row.draw) }, { timeLimitMs: context.timeLimitMs, signal });
      if (!answer.ok) throw new WorkerFailure('threw', answer.message);
      for (const trial of answer.trials) {
        if (trial.imageHash !== rows.find((row) => row.draw === trial.draw)?.imageHash) throw new WorkerFailure('threw', changedBits(level, trial.draw));
        images.set(trial.draw, trial.image);
      }
    }
    all[level] = momentsOf(rows, images, input, level);
    await context.orm.em.fork().nativeUpdate(RunEntity, { id }, { levelMoments: [...all] });
  }
}

export const changedBits = (level: number, draw: number): string =>
  `Draw ${draw + 1} of level ${level + 1} gave other bits when it was computed again. The method does not repeat itself: it must not depend on a clock, on chance or on the order of draws.`;
