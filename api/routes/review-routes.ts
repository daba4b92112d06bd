import { commentCreateSchema, commentListSchema, commentSchema, reviewCountSchema, reviewQueueSchema, runDetailSchema, runParamsSchema, verdictCreateSchema } from '../../shared/contracts/runs.ts';
import type { EntityManager } from '@mikro-orm/sqlite';
import type { Actor } from '../../shared/domain/permissions.ts';
import type { Dependencies } from '../dependencies.ts';
import { actingOf } from '../http/acting-of.ts';
import { defineRoute, type Route } from '../http/define-route.ts';
import { addComment, listComments } from '../services/review/comments.ts';
import { recordVerdict } from '../services/review/record-verdict.ts';
import { countWaiting, readReviewQueue } from '../services/review/review-queue.ts';
import { releaseReview, takeReview } from '../services/review/take-review.ts';
import { findRun, runSubject } from '../services/runs/find-run.ts';
import { showRun } from '../services/runs/show-run.ts';

const tag = 'reviews';

/** The run as it stands after a change, read anew. */
async function showAgain({ em, deps, actor }: { readonly em: EntityManager; readonly deps: Dependencies; readonly actor: Actor }, id: string) {
  deps.mailer.kick();
  em.clear();
  return showRun(em, { run: await findRun(em, id), actor, now: deps.clock() });
}

const readQueue = defineRoute({
  method: 'get', path: '/review', tag, summary: 'Runs and phantom versions that wait for a reviewer, the longest wait first',
  permission: 'review.read-queue', response: reviewQueueSchema,
  handle: ({ em, actor, deps }) => readReviewQueue(em, { actor, now: deps.clock() }),
});

const readCount = defineRoute({
  method: 'get', path: '/review/count', tag, summary: 'How many of them the reader may review',
  permission: 'review.read-queue', response: reviewCountSchema,
  handle: async ({ em, actor }) => ({ waiting: await countWaiting(em, actor) }),
});

const takeRun = defineRoute({
  method: 'post', path: '/runs/:id/review', tag, summary: 'Take a run up for review, so that nobody else starts on it',
  permission: 'run.review', params: runParamsSchema, response: runDetailSchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: async (context) => {
    await takeReview(context.em, { ...actingOf(context), run: context.loaded });
    return showAgain(context, context.loaded.id);
  },
});

const giveRunBack = defineRoute({
  method: 'delete', path: '/runs/:id/review', tag, summary: 'Give it back to the queue',
  permission: 'run.review', params: runParamsSchema, response: runDetailSchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: async (context) => {
    await releaseReview(context.em, { ...actingOf(context), run: context.loaded });
    return showAgain(context, context.loaded.id);
  },
});

const giveVerdict = defineRoute({
  method: 'post', path: '/runs/:id/verdicts', tag, summary: 'Sign off, sign off with a reservation, return or decline, with a written reason',
  permission: 'run.review', params: runParamsSchema, body: verdictCreateSchema, response: runDetailSchema, status: 201,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: async (context) => {
    await recordVerdict(context.em, { ...actingOf(context), run: context.loaded, verdict: context.body, origin: context.origin });
    return showAgain(context, context.loaded.id);
  },
});

const readComments = defineRoute({
  method: 'get', path: '/runs/:id/comments', tag, summary: 'The review thread, oldest first',
  permission: 'content.read', params: runParamsSchema, response: commentListSchema,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: async ({ em, loaded }) => ({ items: await listComments(em, loaded) }),
});

const comment = defineRoute({
  method: 'post', path: '/runs/:id/comments', tag, summary: 'Add a note, or ask a question',
  permission: 'run.comment', params: runParamsSchema, body: commentCreateSchema, response: commentSchema, status: 201,
  load: ({ em, params }) => findRun(em, params.id),
  subject: runSubject,
  handle: async (context) => {
    const added = await addComment(context.em, { ...actingOf(context), run: context.loaded, comment: context.body, origin: context.origin });
    context.deps.mailer.kick();
    return added;
  },
});

export const reviewRoutes: readonly Route[] = [readQueue, readCount, takeRun, giveRunBack, giveVerdict, readComments, comment];
