import type { EntityManager } from '@mikro-orm/sqlite';
import type { GroupRole } from '../../../shared/domain/permissions.ts';
import { MembershipEntity } from '../../entities/group.ts';
import { UserEntity, type User } from '../../entities/user.ts';

/** Members of a group with one of the roles. */
export async function membersWithRole(em: EntityManager, groupId: string, roles: readonly GroupRole[]): Promise<User[]> {
  const memberships = await em.find(MembershipEntity, { group: groupId }, { populate: ['user'] });
  return memberships.filter((membership) => membership.roles.some((role) => roles.includes(role))).map((membership) => membership.user.$);
}

/** Reviewers who belong to none of the groups. */
export async function reviewersOutside(em: EntityManager, groupIds: readonly string[]): Promise<User[]> {
  const users = (await em.find(UserEntity, { closedAt: null })).filter((user) => user.siteRoles.includes('reviewer'));
  const inside = await em.find(MembershipEntity, { group: { $in: [...groupIds] }, user: { $in: users.map((user) => user.id) } });
  const barred = new Set(inside.map((membership) => membership.user.id));
  return users.filter((user) => !barred.has(user.id));
}
