import { ref, type EntityManager } from '@mikro-orm/sqlite';
import { AppError } from '../../../shared/errors.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { runGroup, type LoadedRun } from '../runs/find-run.ts';
import { requireReviewable } from './record-verdict.ts';

/** In review by the actor, so that nobody else starts on it. */
export async function takeReview(em: EntityManager, input: Acting & { readonly run: LoadedRun }): Promise<void> {
  const { actor, now, run } = input;
  requireReviewable(run);
  if (run.review === 'in-review') {
    if (run.reviewer?.id === actor.id) return;
    throw new AppError('conflict', `${run.reviewer?.$.handle ?? 'Somebody'} has taken it up already.`);
  }
  if (run.review !== 'unreviewed') throw new AppError('conflict', 'The run has its verdict already.');
  run.review = 'in-review';
  run.reviewer = ref(await em.findOneOrFail(UserEntity, actor.id));
  recordAudit(em, {
    actor, at: now, action: 'run.review-taken', subject: { type: 'run', id: run.id }, groupId: runGroup(run).id,
    before: { review: 'unreviewed' }, after: { review: 'in-review' }, requestId: input.requestId,
  });
  await em.flush();
}

/** Back in the queue. Another reviewer may do it too, so that a run does not stay with somebody who left; the trail says who did. */
export async function releaseReview(em: EntityManager, input: Acting & { readonly run: LoadedRun }): Promise<void> {
  const { actor, now, run } = input;
  if (run.review !== 'in-review') throw new AppError('conflict', 'Nobody has taken this run up.');
  const holder = run.reviewer?.$.handle ?? null;
  run.review = 'unreviewed';
  run.reviewer = null;
  recordAudit(em, {
    actor, at: now, action: 'run.review-released', subject: { type: 'run', id: run.id }, groupId: runGroup(run).id,
    before: { review: 'in-review', reviewer: holder }, after: { review: 'unreviewed' }, requestId: input.requestId,
  });
  await em.flush();
}
