import type { EntityManager, Loaded } from '@mikro-orm/sqlite';
import type { Run } from '../../entities/run.ts';
import { recordAudit, siteActor } from '../audit/record-audit.ts';
import { queueNotification } from '../mail/queue-mail.ts';
import { reviewersOutside } from '../mail/recipients.ts';
import { developersOf } from '../review/people.ts';

type EndedRun = Loaded<Run, 'entry.bench' | 'entry.solverVersion.solver.group' | 'phantomVersion.phantom.group' | 'submittedBy'>;

/** Audit and mails for a run that has just finished or failed, in the caller's unit of work. */
export async function announceRunEnd(em: EntityManager, input: { readonly run: EndedRun; readonly now: Date; readonly origin: string }): Promise<void> {
  const { run, now, origin } = input;
  const version = run.entry.$.solverVersion.$;
  const solver = version.solver.$;
  const phantom = run.phantomVersion.$;
  const what = `${solver.name}, version ${version.n}, on ${phantom.name} (${run.entry.$.bench.$.title})`;
  const finished = run.state === 'finished';
  recordAudit(em, {
    actor: siteActor, at: now, action: `run.${run.state}`, subject: { type: 'run', id: run.id }, groupId: solver.group.id,
    before: { state: 'running' }, after: { state: run.state, resultHash: run.resultHash ?? null }, detail: run.failure ?? '',
  });
  queueNotification(em, await developersOf(em, solver.group.id, run.submittedBy.$), {
    kind: 'run-ended',
    subject: finished ? `${run.id} is finished: ${solver.name} on ${phantom.name}` : `${run.id} failed: ${solver.name} on ${phantom.name}`,
    text: [finished ? `${what}: ${run.total} reconstructions are done. It waits for a reviewer.` : `${what} failed.`, ...(finished ? [] : [`Reason:\n${run.failure ?? 'unknown'}`]), `${origin}/runs/${run.id}`].join('\n\n'),
  }, now);
  if (finished) {
    queueNotification(em, await reviewersOutside(em, [solver.group.id, phantom.phantom.$.group.id]), {
      kind: 'review-waiting',
      subject: `${run.id} waits for a reviewer: ${solver.name} on ${phantom.name}`,
      text: [`${what} is finished.`, `${origin}/runs/${run.id}`].join('\n\n'),
    }, now);
  }
}
