import { ref, type EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { verdictCreateSchema } from '../../../shared/contracts/runs';
import { mayMove, type Verdict } from '../../../shared/domain/states';
import { AppError } from '../../../shared/errors.ts';
import { RunEntity, VerdictEntity } from '../../entities/run.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { queueNotification } from '../mail/queue-mail.ts';
import { runGroup, type LoadedRun } from '../runs/find-run.ts';
import { developersOf } from './people.ts';

export const verdictWords: Record<Verdict, { readonly name: string; readonly consequence: string }> = {
  'signed-off': { name: 'signed off', consequence: 'The table is correct and may be cited.' },
  'signed-off-with-reservation': { name: 'signed off with a reservation', consequence: 'The table is correct; the reservation is shown beside every figure.' },
  returned: { name: 'returned', consequence: 'To be rerun or explained; a new version follows.' },
  declined: { name: 'declined', consequence: 'It breaks a rule of the bench and leaves the ranking.' },
};

/** A reviewer's word. It is never edited, and it ends the review. */
export async function recordVerdict(
  em: EntityManager,
  input: Acting & { readonly run: LoadedRun; readonly verdict: z.output<typeof verdictCreateSchema>; readonly origin: string },
): Promise<void> {
  const { actor, now, run, verdict: given, origin } = input;
  requireReviewable(run);
  if (!mayMove.review(run.review, given.verdict)) throw new AppError('conflict', `The run is ${verdictWord(run.review)} already. A correction is a new version.`);
  if (run.review === 'in-review' && run.reviewer && run.reviewer.id !== actor.id) {
    throw new AppError('conflict', `${run.reviewer.$.handle} has taken this run up. It can be given back first.`);
  }
  const group = runGroup(run);
  const before = run.review;
  run.review = given.verdict;
  run.reviewer = ref(await em.findOneOrFail(UserEntity, actor.id));
  run.reservation = given.verdict === 'signed-off-with-reservation' ? given.reason : null;
  em.create(VerdictEntity, {
    run: em.getReference(RunEntity, run.id),
    verdict: given.verdict,
    reason: given.reason,
    inspected: [...given.inspected],
    by: em.getReference(UserEntity, actor.id),
  });
  recordAudit(em, {
    actor, at: now, action: `run.${given.verdict}`, subject: { type: 'run', id: run.id }, groupId: group.id,
    before: { review: before }, after: { review: given.verdict, resultHash: run.resultHash }, detail: given.reason, requestId: input.requestId,
  });
  const { name, consequence } = verdictWords[given.verdict];
  const solver = run.entry.$.solverVersion.$;
  queueNotification(
    em,
    await developersOf(em, group.id, run.submittedBy.$),
    {
      kind: 'verdict',
      subject: `${run.id} was ${name}: ${solver.solver.$.name} on ${run.phantomVersion.$.name}`,
      text: [
        `${actor.handle} reviewed ${run.id}: ${solver.solver.$.name}, version ${solver.n}, on ${run.phantomVersion.$.name} (${run.entry.$.bench.$.title}).`,
        `Verdict: ${name}. ${consequence}`,
        `Reason:\n${given.reason}`,
        `${origin}/runs/${run.id}`,
      ].join('\n\n'),
    },
    now,
  );
  await em.flush();
}

export function requireReviewable(run: Pick<LoadedRun, 'state'>): void {
  if (run.state !== 'finished') throw new AppError('conflict', `The run is ${run.state}: only a finished one is reviewed.`);
}

const verdictWord = (review: LoadedRun['review']): string => (review === 'unreviewed' || review === 'in-review' ? review : verdictWords[review].name);
