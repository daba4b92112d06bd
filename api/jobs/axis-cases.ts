import type { EntityManager } from '@mikro-orm/sqlite';
import { AxisCaseEntity, BenchEntity } from '../entities/bench.ts';
import { fromBlob, toBlob } from '../entities/float64-blob.ts';
import { PhantomVersionEntity, type PhantomVersion } from '../entities/phantom.ts';
import type { Run } from '../entities/run.ts';
import { loadArrayValues } from '../services/arrays/find-array.ts';
import { axisOf } from '../services/runs/axis-of.ts';
import type { JobContext } from './run-job.ts';
import type { CaseInput } from './tasks.ts';
import { WorkerFailure } from './worker-pool.ts';

export interface AxisRun extends Pick<Run, 'axis' | 'ladder'> {
  readonly entry: { readonly $: { readonly bench: { readonly id: string } } };
  readonly phantomVersion: { readonly $: Pick<PhantomVersion, 'id' | 'definition'> };
}

/**
 * Simulates the levels of a bench whose axis is not the noise, once for a phantom: every entry gets the same data.
 * @throws WorkerFailure with the reason where a level cannot be simulated
 */
export async function ensureAxisCases(context: JobContext, run: AxisRun): Promise<void> {
  const axis = axisOf(run);
  if (axis.key === 'noise') return;
  const { orm, pool, timeLimitMs } = context;
  const { id: phantomVersion, definition } = run.phantomVersion.$;
  const bench = run.entry.$.bench.id;
  const have = new Set((await orm.em.fork().find(AxisCaseEntity, { bench, phantomVersion }, { fields: ['level'] })).map((row) => row.level));
  const arrayValues = definition.truth.kind === 'array' ? await loadArrayValues(orm.em.fork(), { ...definition.truth, kind: 'array' }) : null;
  for (const [level, value] of run.ladder.entries()) {
    if (have.has(level)) continue;
    const answer = await pool.run('axisCase', { definition, arrayValues, axis: axis.key, level: value }, { timeLimitMs });
    if (!answer.ok) throw new WorkerFailure('threw', `Level ${level + 1} of the axis cannot be simulated: ${answer.message}`);
    const { clean, truthImage, noiseScale, rows, targets } = answer;
    await orm.em.fork().transactional(async (em) => {
      if ((await em.count(AxisCaseEntity, { bench, phantomVersion, level })) > 0) return;
      em.create(AxisCaseEntity, {
        bench: em.getReference(BenchEntity, bench), phantomVersion: em.getReference(PhantomVersionEntity, phantomVersion), level, noiseScale,
        rows: rows ? [...rows] : null, targets: [...targets], clean: toBlob(clean), truthImage: toBlob(truthImage),
      });
    });
  }
}

/** The levels' data in order; null on the axis of the noise. */
export async function loadAxisCases(em: EntityManager, run: AxisRun): Promise<CaseInput[] | null> {
  if (axisOf(run).key === 'noise') return null;
  const rows = await em.find(AxisCaseEntity, { bench: run.entry.$.bench.id, phantomVersion: run.phantomVersion.$.id }, { orderBy: { level: 'asc' }, populate: ['clean', 'truthImage'] });
  return rows.map((row) => ({ clean: fromBlob(row.clean.$), truthImage: fromBlob(row.truthImage.$), noiseScale: row.noiseScale, targets: row.targets, rows: row.rows ? Int32Array.from(row.rows) : null }));
}
