import { randomUUID } from 'node:crypto';
import type { EntityManager } from '@mikro-orm/sqlite';
import type { SiteRole } from '../../../shared/domain/permissions.ts';
import { UserEntity, type User } from '../../entities/user.ts';
import { recordAudit } from '../audit/record-audit.ts';

export interface ProviderProfile {
  readonly githubId: string;
  readonly handle: string;
  /** Confirmed by the provider. */
  readonly email: string | null;
}

/** Finds the account of a provider's profile or makes it. A handle changed at the provider is taken over. */
export async function signInAccount(
  em: EntityManager,
  profile: ProviderProfile,
  now: Date,
  firstRoles: readonly SiteRole[] = [],
): Promise<User> {
  const found = await em.findOne(UserEntity, { githubId: profile.githubId });
  if (found) {
    if (found.handle !== profile.handle && !(await em.count(UserEntity, { handle: profile.handle }))) {
      recordAudit(em, {
        actor: found,
        at: now,
        action: 'account.renamed',
        subject: { type: 'account', id: found.id },
        before: { handle: found.handle },
        after: { handle: profile.handle },
      });
      found.handle = profile.handle;
    }
    await em.flush();
    return found;
  }
  const user = em.create(UserEntity, {
    id: randomUUID(),
    handle: await freeHandle(em, profile.handle),
    githubId: profile.githubId,
    email: profile.email,
    siteRoles: [...firstRoles],
    siteRolesSince: firstRoles.length > 0 ? now : null,
    notifications: {},
  });
  recordAudit(em, {
    actor: user,
    at: now,
    action: 'account.created',
    subject: { type: 'account', id: user.id },
    after: { handle: user.handle, siteRoles: user.siteRoles },
  });
  await em.flush();
  return user;
}

/** An account closed or renamed at the provider may still hold the handle here. */
async function freeHandle(em: EntityManager, wanted: string): Promise<string> {
  let handle = wanted;
  for (let number = 2; await em.count(UserEntity, { handle }); number += 1) handle = `${wanted}-${number}`;
  return handle;
}
