import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { commentCreateSchema, commentSchema } from '../../../shared/contracts/runs';
import { MembershipEntity } from '../../entities/group.ts';
import { CommentEntity, RunEntity } from '../../entities/run.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { queueNotification } from '../mail/queue-mail.ts';
import { runGroup, type LoadedRun } from '../runs/find-run.ts';
import { developersOf } from './people.ts';

type CommentWire = z.input<typeof commentSchema>;

export async function listComments(em: EntityManager, run: Pick<LoadedRun, 'id'>): Promise<CommentWire[]> {
  const comments = await em.find(CommentEntity, { run: run.id }, { populate: ['by'], orderBy: { createdAt: 'asc', id: 'asc' } });
  return comments.map((comment) => ({
    id: comment.id,
    by: { handle: comment.by.$.handle },
    at: comment.createdAt.toISOString(),
    text: comment.text,
    anchor: comment.anchor,
    question: comment.question,
    answered: comment.answered,
  }));
}

/** Adds a note. A note from the other side answers the questions that are open: the run's group answers the others, and the reverse. */
export async function addComment(
  em: EntityManager,
  input: Acting & { readonly run: LoadedRun; readonly comment: z.output<typeof commentCreateSchema>; readonly origin: string },
): Promise<CommentWire> {
  const { actor, now, run, comment: given, origin } = input;
  const group = runGroup(run);
  const members = new Set((await em.find(MembershipEntity, { group: group.id })).map((membership) => membership.user.id));
  const open = await em.find(CommentEntity, { run: run.id, question: true, answered: false });
  for (const question of open) if (members.has(question.by.id) !== members.has(actor.id)) question.answered = true;
  const row = em.create(CommentEntity, {
    run: em.getReference(RunEntity, run.id),
    by: em.getReference(UserEntity, actor.id),
    text: given.text,
    anchor: given.anchor,
    question: given.question,
    createdAt: now,
  });
  recordAudit(em, {
    actor, at: now, action: given.question ? 'run.question-asked' : 'run.commented', subject: { type: 'run', id: run.id }, groupId: group.id,
    after: { anchor: given.anchor }, requestId: input.requestId,
  });
  const readers = [...(await developersOf(em, group.id, run.submittedBy.$)), ...(run.reviewer ? [run.reviewer.$] : [])];
  queueNotification(
    em,
    readers.filter((user) => user.id !== actor.id),
    {
      kind: 'note',
      subject: `${given.question ? 'Question' : 'Note'} on ${run.id}: ${run.entry.$.solverVersion.$.solver.$.name} on ${run.phantomVersion.$.name}`,
      text: [`${actor.handle}${given.anchor === '' ? '' : ` on ${given.anchor}`}:`, given.text, `${origin}/runs/${run.id}`].join('\n\n'),
    },
    now,
  );
  await em.flush();
  return { id: row.id, by: { handle: actor.handle }, at: now.toISOString(), text: row.text, anchor: row.anchor, question: row.question, answered: false };
}

/** Questions nobody of the other side has answered, by run id. */
export async function countOpenQuestions(em: EntityManager, runIds: readonly string[]): Promise<Map<string, number>> {
  const open = await em.find(CommentEntity, { run: { $in: [...runIds] }, question: true, answered: false });
  const counts = new Map<string, number>();
  for (const { run } of open) counts.set(run.id, (counts.get(run.id) ?? 0) + 1);
  return counts;
}
