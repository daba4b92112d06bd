import type { EntityManager, MikroORM } from '@mikro-orm/sqlite';
import type { Logger } from 'pino';
import { MembershipEntity } from '../../entities/group.ts';
import type { User } from '../../entities/user.ts';
import type { Jobs } from '../../jobs/jobs.ts';
import type { Acting } from '../acting.ts';

export interface SeedContext {
  readonly orm: MikroORM;
  readonly jobs: Jobs;
  readonly clock: () => Date;
  readonly logger: Logger;
  /** Address of the site for links in mails. */
  readonly origin: string;
  readonly users: ReadonlyMap<string, User>;
  readonly pollMs: number;
  readonly stopped: () => boolean;
}

/** The account as the actor of a service, with the groups it has now. */
export async function actAs(context: Pick<SeedContext, 'users' | 'clock'>, em: EntityManager, handle: string): Promise<Acting> {
  const user = context.users.get(handle);
  if (!user) throw new Error(`The demonstration has no account '${handle}'.`);
  const memberships = await em.find(MembershipEntity, { user: user.id });
  return {
    actor: { id: user.id, handle, siteRoles: user.siteRoles, groups: Object.fromEntries(memberships.map(({ group, roles }) => [group.id, roles])) },
    now: context.clock(),
  };
}
