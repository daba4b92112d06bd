import type { EntityManager } from '@mikro-orm/sqlite';
import { mayMove } from '../../../shared/domain/states';
import { AppError } from '../../../shared/errors.ts';
import { PhantomVersionEntity } from '../../entities/phantom.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Jobs } from '../../jobs/jobs.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { queueNotification } from '../mail/queue-mail.ts';
import { reviewersOutside } from '../mail/recipients.ts';
import { simulate } from '../simulations/simulate.ts';
import { checkUploads } from './check-content.ts';
import type { PhantomAt } from './find-phantom.ts';

/**
 * Simulates the version, runs its checks and hands it to the reviewers. A failed check blocks it.
 * @throws AppError 'conflict', 'simulation-failed', or 'validation-failed' with an issue for each failed check
 */
export async function submitVersion(em: EntityManager, jobs: Jobs, input: Acting & PhantomAt & { readonly origin: string }): Promise<void> {
  const { actor, now, phantom, version, origin } = input;
  requireSubmittable(version.state, version.n);
  await checkUploads(em, { actor, now, content: { definition: version.definition, frames: version.frames ?? null } });
  const { contentHash } = version;
  // Outside any transaction: the one connection must not wait for a computation.
  const simulation = await simulate(em, jobs, { definition: version.definition, checks: true });
  const failed = (simulation.checks ?? []).filter((check) => check.state === 'fail');
  if (failed.length > 0) {
    throw new AppError('validation-failed', `${failed.length === 1 ? 'A check' : `${failed.length} checks`} failed: ${failed.map((check) => check.name).join(', ')}.`,
      failed.map((check) => ({ path: ['checks', check.key], message: `${check.name}: ${check.meaning}` })),
      { extra: { checks: simulation.checks } });
  }
  await em.transactional(async (inner) => {
    const fresh = await inner.findOneOrFail(PhantomVersionEntity, { id: version.id }, { refresh: true });
    requireSubmittable(fresh.state, fresh.n);
    if (fresh.contentHash !== contentHash) throw new AppError('conflict', 'The draft was changed while its checks ran. Submit it again.');
    const before = fresh.state;
    fresh.state = 'submitted';
    fresh.submittedAt = now;
    fresh.submittedBy = inner.getReference(UserEntity, actor.id, { wrapped: true });
    recordAudit(inner, {
      actor, at: now, action: 'phantom.submitted', subject: { type: 'phantom', id: phantom.id }, groupId: phantom.group.id,
      before: { version: fresh.n, state: before }, after: { version: fresh.n, state: 'submitted', contentHash }, requestId: input.requestId,
    });
    queueNotification(inner, await reviewersOutside(inner, [phantom.group.id]), {
      kind: 'review-waiting',
      subject: `${phantom.id}, version ${fresh.n}, waits for a reviewer: ${fresh.name}`,
      text: [`${actor.handle} submitted version ${fresh.n} of '${fresh.name}' (${phantom.group.$.name}).`, `${origin}/phantoms/${phantom.slug}/v/${fresh.n}`].join('\n\n'),
    }, now);
  });
}

function requireSubmittable(state: PhantomAt['version']['state'], n: number): void {
  if (!mayMove.phantom(state, 'submitted')) throw new AppError('conflict', `Version ${n} is ${state}: only a draft can be submitted.`);
}
