import type { EntityManager, Loaded } from '@mikro-orm/sqlite';
import type { Recomputation as RecomputationWire } from '../../../shared/contracts/runs';
import { RecomputationEntity, type Recomputation } from '../../entities/run.ts';

type Shown = Loaded<Recomputation, 'requestedBy'>;

/** Null while nobody asked for one. */
export async function newestRecomputation(em: EntityManager, runId: string): Promise<RecomputationWire | null> {
  const newest = await em.findOne(RecomputationEntity, { run: runId }, { populate: ['requestedBy'], orderBy: { createdAt: 'desc', id: 'desc' } });
  return newest && toRecomputation(newest);
}

export function toRecomputation(row: Shown): RecomputationWire {
  const { id, state, done, total } = row;
  return {
    id, state, done, total, requestedBy: { handle: row.requestedBy.$.handle }, at: row.createdAt.toISOString(), equal: row.equal ?? null, resultHash: row.resultHash ?? null,
    failure: row.failure ?? null, firstDifference: row.firstDifference ?? null,
  };
}
