import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { phantomVerdictSchema } from '../../../shared/contracts/phantoms';
import { mayMove, type PhantomState } from '../../../shared/domain/states';
import { AppError } from '../../../shared/errors.ts';
import { PhantomVerdictEntity, PhantomVersionEntity } from '../../entities/phantom.ts';
import { SimulationEntity } from '../../entities/simulation.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { queueNotification } from '../mail/queue-mail.ts';
import { membersWithRole } from '../mail/recipients.ts';
import type { PhantomAt } from './find-phantom.ts';

/** A reviewer's word: publish, or ask for changes. Publishing needs checks that pass. */
export async function giveVerdict(em: EntityManager, input: Acting & PhantomAt & z.output<typeof phantomVerdictSchema> & { readonly origin: string }): Promise<void> {
  const { actor, now, phantom, version, verdict, reason, origin } = input;
  const to: PhantomState = verdict === 'publish' ? 'published' : 'changes-requested';
  requireMove(version, to);
  if (verdict === 'publish') {
    const simulation = await em.findOne(SimulationEntity, { contentHash: version.definitionHash });
    if (!simulation?.checks || simulation.checks.some((check) => check.state === 'fail'))
      throw new AppError('conflict', 'Its checks do not pass, so it cannot be published. Ask for changes.');
  }
  const before = version.state;
  version.state = to;
  if (to === 'published') {
    version.publishedAt = now;
    phantom.name = version.name;
  }
  em.create(PhantomVerdictEntity, { version: em.getReference(PhantomVersionEntity, version.id), verdict, reason, by: em.getReference(UserEntity, actor.id) });
  recordAudit(em, {
    actor, at: now, action: `phantom.${to}`, subject: { type: 'phantom', id: phantom.id }, groupId: phantom.group.id,
    before: { version: version.n, state: before }, after: { version: version.n, state: to, contentHash: version.contentHash }, detail: reason, requestId: input.requestId,
  });
  const word = to === 'published' ? 'published' : 'sent back for changes';
  queueNotification(em, await membersWithRole(em, phantom.group.id, ['curator', 'owner']), {
    kind: 'verdict',
    subject: `${phantom.id}, version ${version.n}, was ${word}: ${version.name}`,
    text: [`${actor.handle} reviewed version ${version.n} of '${version.name}'. It was ${word}.`, `Reason:\n${reason}`, `${origin}/phantoms/${phantom.slug}/v/${version.n}`].join('\n\n'),
  }, now);
  await em.flush();
}

/** A withdrawn version keeps its page, its data and whatever was ranked on it; new benches cannot use it. */
export async function withdrawVersion(em: EntityManager, input: Acting & PhantomAt & { readonly reason: string }): Promise<void> {
  const { actor, now, phantom, version, reason } = input;
  requireMove(version, 'withdrawn');
  const before = version.state;
  version.state = 'withdrawn';
  version.withdrawnAt = now;
  version.withdrawnReason = reason;
  recordAudit(em, {
    actor, at: now, action: 'phantom.withdrawn', subject: { type: 'phantom', id: phantom.id }, groupId: phantom.group.id,
    before: { version: version.n, state: before }, after: { version: version.n, state: 'withdrawn' }, detail: reason, requestId: input.requestId,
  });
  await em.flush();
}

function requireMove(version: PhantomAt['version'], to: PhantomState): void {
  if (!mayMove.phantom(version.state, to)) throw new AppError('conflict', `Version ${version.n} is ${version.state}: it cannot become ${to}.`);
}
