import { setTimeout as sleep } from 'node:timers/promises';
import { CommentEntity, RunEntity } from '../../entities/run.ts';
import { slugify } from '../identifiers.ts';
import { addComment } from '../review/comments.ts';
import { recordVerdict } from '../review/record-verdict.ts';
import { takeReview } from '../review/take-review.ts';
import { findRun } from '../runs/find-run.ts';
import { cancelRun } from '../runs/queue-run.ts';
import type { DemoPlan, ReviewPlan } from './demo-plan.ts';
import { actAs, type SeedContext } from './seed-context.ts';
import { readStockPhantom } from './stock-phantoms.ts';

/** Waits for each run and says what the plan has for it. False when it was stopped before the end. */
export async function reviewDemo(context: SeedContext, plan: DemoPlan): Promise<boolean> {
  const waiting = new Set(plan.reviews);
  const slugs = new Map<string, string>();
  for (const { phantom } of waiting) if (!slugs.has(phantom)) slugs.set(phantom, slugify((await readStockPhantom(phantom)).name));
  for (;;) {
    for (const review of waiting) {
      if (context.stopped()) return false;
      if (await sayWords(context, plan, review, slugs)) waiting.delete(review);
    }
    if (waiting.size === 0) return true;
    // No timer of the seed keeps the process alive.
    await sleep(context.pollMs, undefined, { ref: false });
  }
}

/** True once nothing is left to say: it was said, somebody else was first, or the run will not finish. */
async function sayWords(context: SeedContext, plan: DemoPlan, review: ReviewPlan, slugs: ReadonlyMap<string, string>): Promise<boolean> {
  const em = context.orm.em.fork();
  const bench = plan.benches.find((candidate) => candidate.key === review.bench);
  const solver = plan.solvers.find((candidate) => candidate.key === review.solver);
  if (!bench || !solver) throw new Error(`The demonstration reviews '${review.solver}' on '${review.bench}', which it does not have.`);
  const row = await em.findOne(RunEntity, {
    entry: { bench: { slug: slugify(bench.title) }, solverVersion: { solver: { slug: slugify(solver.name) } } },
    phantomVersion: { phantom: { slug: slugs.get(review.phantom) } },
  });
  if (!row || row.state === 'cancelled' || (row.state === 'failed' && !review.giveUp)) return true;
  if (row.state !== 'finished' && row.state !== 'failed') return false;
  if (review.giveUp && row.state === 'finished') return true;
  const { origin } = context;
  for (const { by, ...comment } of review.comments ?? []) {
    if ((await em.count(CommentEntity, { run: row.id, text: comment.text })) > 0) continue;
    const inner = context.orm.em.fork();
    await addComment(inner, { ...(await actAs(context, inner, by)), run: await findRun(inner, row.id), comment: { anchor: '', question: false, ...comment }, origin });
  }
  const last = context.orm.em.fork();
  const run = await findRun(last, row.id);
  if (review.giveUp) {
    const siblings = await last.find(RunEntity, { entry: row.entry.id, state: { $in: ['queued', 'running'] } });
    for (const sibling of siblings) {
      const inner = context.orm.em.fork();
      await cancelRun(inner, context.jobs, { ...(await actAs(context, inner, review.giveUp.by)), run: await findRun(inner, sibling.id) });
    }
    return true;
  }
  if (run.review !== 'unreviewed') return true;
  if (review.taken) await takeReview(last, { ...(await actAs(context, last, review.taken)), run });
  if (review.verdict) {
    const { by, verdict, reason } = review.verdict;
    await recordVerdict(last, { ...(await actAs(context, last, by)), run, verdict: { verdict, reason, inspected: ['table', 'images', 'checks', 'provenance'] }, origin });
  }
  return true;
}
