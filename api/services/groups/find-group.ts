import type { EntityManager } from '@mikro-orm/sqlite';
import { AppError } from '../../../shared/errors.ts';
import { GroupEntity, MembershipEntity, type Group, type Membership } from '../../entities/group.ts';

/** @throws AppError 'not-found' */
export async function findGroup(em: EntityManager, slug: string): Promise<Group> {
  const group = await em.findOne(GroupEntity, { slug });
  if (!group) throw new AppError('not-found', `There is no group '${slug}'.`);
  return group;
}

/** @throws AppError 'not-found' */
export async function findMembership(em: EntityManager, group: Group, handle: string): Promise<Membership> {
  const membership = await em.findOne(MembershipEntity, { group: group.id, user: { handle } }, { populate: ['user'] });
  if (!membership) throw new AppError('not-found', `'${handle}' is not a member of ${group.name}.`);
  return membership;
}
