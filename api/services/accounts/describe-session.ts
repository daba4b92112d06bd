import type { EntityManager } from '@mikro-orm/sqlite';
import type { Session, SessionAccount } from '../../../shared/contracts/session.ts';
import type { GroupRole, SiteRole } from '../../../shared/domain/permissions.ts';
import { MembershipEntity } from '../../entities/group.ts';
import { UserEntity } from '../../entities/user.ts';
import type { StandInAccount } from '../../sign-in/demo-accounts.ts';

/** The session's account with its groups, and the accounts of the stand-in when it runs. */
export async function describeSession(
  em: EntityManager,
  input: {
    readonly actor: { readonly id: string; readonly handle: string; readonly siteRoles: readonly SiteRole[]; readonly via: 'session' | 'token' } | null;
    readonly standIn: readonly StandInAccount[] | null;
  },
): Promise<Session> {
  let account: SessionAccount | null = null;
  if (input.actor) {
    const memberships = await em.find(MembershipEntity, { user: input.actor.id }, { populate: ['group'], orderBy: { group: { name: 'asc' } } });
    account = {
      id: input.actor.id,
      handle: input.actor.handle,
      siteRoles: [...input.actor.siteRoles],
      groups: memberships.map(({ group, roles }) => ({ id: group.id, slug: group.$.slug, name: group.$.name, roles })),
    };
  }
  return {
    account,
    via: input.actor?.via ?? null,
    signIn: { url: '/auth/github', standIn: input.standIn ? { accounts: await describeStandIn(em, input.standIn) } : null },
  };
}

export async function describeStandIn(em: EntityManager, accounts: readonly StandInAccount[]): Promise<{ handle: string; line: string }[]> {
  const users = await em.find(UserEntity, { githubId: { $in: accounts.map((account) => account.githubId) } });
  const memberships = await em.find(MembershipEntity, { user: { $in: users.map((user) => user.id) } }, { populate: ['group'] });
  return accounts.map(({ githubId, handle, siteRoles }) => {
    const user = users.find((candidate) => candidate.githubId === githubId);
    const own = memberships.filter((membership) => user !== undefined && membership.user.id === user.id);
    return { handle, line: roleLine(user?.siteRoles ?? siteRoles, own.map(({ group, roles }) => ({ name: group.$.name, roles }))) };
  });
}

function roleLine(siteRoles: readonly SiteRole[], groups: readonly { name: string; roles: readonly GroupRole[] }[]): string {
  const parts = [
    ...(siteRoles.includes('administrator') ? ['administrator: roles, audit trail, outbox'] : []),
    ...(siteRoles.includes('reviewer') ? ['reviewer'] : []),
    ...groups.map(({ name, roles }) => `${roles.join(' and ')} in ${name}`),
  ];
  const line = parts.length > 0 ? parts.join('; ') : 'reads, comments, can create a group';
  return line.charAt(0).toUpperCase() + line.slice(1);
}
