import type { EntityManager } from '@mikro-orm/sqlite';
import { AppError } from '../../../shared/errors.ts';
import type { GroupRole } from '../../../shared/domain/permissions.ts';
import { MembershipEntity, type Group, type Membership } from '../../entities/group.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { findMembership } from './find-group.ts';

/** Replaces a member's roles. @throws AppError 'conflict' when nobody would own the group any more */
export async function setMemberRoles(
  em: EntityManager,
  { actor, now, requestId }: Acting,
  group: Group,
  handle: string,
  roles: readonly GroupRole[],
): Promise<void> {
  await em.transactional(async (inner) => {
    const membership = await findMembership(inner, group, handle);
    if (!roles.includes('owner')) await keepAnOwner(inner, group, membership);
    const before = membership.roles;
    membership.roles = [...roles];
    recordAudit(inner, {
      actor,
      at: now,
      requestId,
      action: 'group.roles-changed',
      subject: { type: 'account', id: membership.user.id },
      groupId: group.id,
      before: { roles: before },
      after: { roles },
      detail: `${handle} in ${group.slug}`,
    });
  });
}

/** Ends a membership; the member's own leaving too. @throws AppError 'conflict' for the last owner */
export async function removeMember(em: EntityManager, { actor, now, requestId }: Acting, group: Group, handle: string): Promise<void> {
  await em.transactional(async (inner) => {
    const membership = await findMembership(inner, group, handle);
    await keepAnOwner(inner, group, membership);
    recordAudit(inner, {
      actor,
      at: now,
      requestId,
      action: 'group.member-removed',
      subject: { type: 'account', id: membership.user.id },
      groupId: group.id,
      before: { roles: membership.roles },
      detail: `${handle} in ${group.slug}`,
    });
    inner.remove(membership);
  });
}

async function keepAnOwner(em: EntityManager, group: Group, leaving: Membership): Promise<void> {
  if (!leaving.roles.includes('owner')) return;
  const others = await em.find(MembershipEntity, { group: group.id, id: { $ne: leaving.id } });
  if (!others.some((membership) => membership.roles.includes('owner'))) {
    throw new AppError('conflict', `${group.name} would have no owner. Give somebody else the owner role first.`);
  }
}
