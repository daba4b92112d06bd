import { randomUUID } from 'node:crypto';
import type { EntityManager } from '@mikro-orm/sqlite';
import { AppError } from '../../../shared/errors.ts';
import type { GroupRole } from '../../../shared/domain/permissions.ts';
import { GroupEntity, MembershipEntity, type Group } from '../../entities/group.ts';
import { UserEntity, type User } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { freeSlug } from '../identifiers.ts';

/** Creates a group; who creates it becomes its owner. */
export async function createGroup(
  em: EntityManager,
  { actor, now, requestId }: Acting,
  input: { readonly name: string; readonly slug?: string | undefined; readonly description: string },
): Promise<Group> {
  const taken = async (slug: string): Promise<boolean> => (await em.count(GroupEntity, { slug })) > 0;
  if (input.slug !== undefined && (await taken(input.slug))) {
    throw new AppError('duplicate', 'Another group has this address.', [{ path: ['slug'], message: `'${input.slug}' is taken.` }]);
  }
  const group = em.create(GroupEntity, {
    id: randomUUID(),
    slug: input.slug ?? (await freeSlug(input.name, taken)),
    name: input.name,
    description: input.description,
  });
  em.create(MembershipEntity, { group, user: em.getReference(UserEntity, actor.id), roles: ['owner'] });
  recordAudit(em, {
    actor,
    at: now,
    requestId,
    action: 'group.created',
    subject: { type: 'group', id: group.id },
    groupId: group.id,
    after: { slug: group.slug, name: group.name },
  });
  await em.flush();
  return group;
}

export async function editGroup(
  em: EntityManager,
  { actor, now, requestId }: Acting,
  group: Group,
  input: { readonly name?: string | undefined; readonly description?: string | undefined },
): Promise<Group> {
  const before = { name: group.name, description: group.description };
  if (input.name !== undefined) group.name = input.name;
  if (input.description !== undefined) group.description = input.description;
  recordAudit(em, {
    actor,
    at: now,
    requestId,
    action: 'group.edited',
    subject: { type: 'group', id: group.id },
    groupId: group.id,
    before,
    after: { name: group.name, description: group.description },
  });
  await em.flush();
  return group;
}

/** Makes the user a member, or adds the roles to those already held. */
export async function addMember(
  em: EntityManager,
  { actor, now, requestId }: Acting,
  group: Group,
  user: User,
  roles: readonly GroupRole[],
): Promise<void> {
  const held = await em.findOne(MembershipEntity, { group: group.id, user: user.id });
  const before = held ? [...held.roles] : [];
  const after = [...new Set([...before, ...roles])];
  if (held) held.roles = after;
  else em.create(MembershipEntity, { group, user, roles: after });
  recordAudit(em, {
    actor,
    at: now,
    requestId,
    action: held ? 'group.roles-changed' : 'group.member-added',
    subject: { type: 'account', id: user.id },
    groupId: group.id,
    before: { roles: before },
    after: { roles: after },
    detail: `${user.handle} in ${group.slug}`,
  });
  await em.flush();
}
