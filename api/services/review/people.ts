import type { EntityManager } from '@mikro-orm/sqlite';
import { MembershipEntity } from '../../entities/group.ts';
import type { User } from '../../entities/user.ts';

/** Who hears about a run: its developers and owners, and whoever submitted it. */
export async function developersOf(em: EntityManager, groupId: string, submitter: User): Promise<User[]> {
  const memberships = await em.find(MembershipEntity, { group: groupId }, { populate: ['user'] });
  const users = memberships.filter(({ roles }) => roles.includes('developer') || roles.includes('owner')).map(({ user }) => user.$);
  return users.some((user) => user.id === submitter.id) ? users : [...users, submitter];
}
