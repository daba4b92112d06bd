import type { EntityManager } from '@mikro-orm/sqlite';
import type { User } from '../../entities/user.ts';
import { membersWithRole } from '../mail/recipients.ts';

/** Who hears about a run: its developers and owners, and whoever submitted it. */
export async function developersOf(em: EntityManager, groupId: string, submitter: User): Promise<User[]> {
  const users = await membersWithRole(em, groupId, ['developer', 'owner']);
  return users.some((user) => user.id === submitter.id) ? users : [...users, submitter];
}
