import type { EntityManager } from '@mikro-orm/sqlite';
import type { User } from '../../entities/user.ts';
import { demoAccounts, type StandInAccount } from '../../sign-in/demo-accounts.ts';
import { signInAccount } from './sign-in-account.ts';

/** Makes the demonstration accounts that do not exist yet and returns all of them by handle. */
export async function ensureDemoAccounts(
  em: EntityManager,
  now: Date,
  accounts: readonly StandInAccount[] = demoAccounts,
): Promise<Map<string, User>> {
  const users = new Map<string, User>();
  for (const account of accounts) users.set(account.handle, await signInAccount(em, account, now, account.siteRoles));
  return users;
}
