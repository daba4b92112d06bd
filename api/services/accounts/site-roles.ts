import { raw, type EntityManager } from '@mikro-orm/sqlite';
import type { UserWire } from '../../../shared/contracts/account.ts';
import { defaultPageSize, type PageQuery } from '../../../shared/contracts/pagination.ts';
import type { SiteRole } from '../../../shared/domain/permissions.ts';
import { AppError } from '../../../shared/errors.ts';
import { MembershipEntity } from '../../entities/group.ts';
import { UserEntity, type User } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit, siteActor } from '../audit/record-audit.ts';
import { afterPlace, cutPage, newestFirst, readCursor } from '../paging.ts';

/** Every account is a member; the other roles are stored. */
export function siteRolesOf(user: Pick<User, 'siteRoles'>): SiteRole[] {
  return ['member', ...user.siteRoles.filter((role) => role !== 'member')];
}

export async function listUsers(
  em: EntityManager,
  query: PageQuery & { readonly q?: string | undefined; readonly role?: SiteRole | undefined },
): Promise<{ items: UserWire[]; nextCursor: string | null }> {
  const limit = query.limit ?? defaultPageSize;
  const named = query.q === undefined || query.q === '' ? {} : { handle: { $like: `%${query.q.replaceAll(/[%_]/g, '')}%` } };
  // Roles are a JSON list of fixed words, so the quoted word finds them; as a property the pattern would be made JSON too.
  const withRole = query.role === undefined || query.role === 'member' ? {} : { [raw('site_roles')]: { $like: `%"${query.role}"%` } };
  const found = await em.find(
    UserEntity,
    { $and: [named, withRole, afterPlace(readCursor(query.cursor))] },
    { orderBy: newestFirst, limit: limit + 1 },
  );
  const { rows, nextCursor } = cutPage(found, limit);
  const memberships = await em.find(MembershipEntity, { user: { $in: rows.map((user) => user.id) } });
  return {
    items: rows.map((user) => ({
      handle: user.handle,
      siteRoles: siteRolesOf(user),
      groupCount: memberships.filter((membership) => membership.user.id === user.id).length,
      since: user.createdAt.toISOString(),
      closed: Boolean(user.closedAt),
    })),
    nextCursor,
  };
}

/** Replaces an account's site roles. @throws AppError 'conflict' when nobody would administer the site any more */
export async function setSiteRoles(
  em: EntityManager,
  { actor, now, requestId }: Acting,
  handle: string,
  siteRoles: readonly SiteRole[],
): Promise<UserWire> {
  return em.transactional(async (inner) => {
    const user = await inner.findOne(UserEntity, { handle, closedAt: null });
    if (!user) throw new AppError('not-found', `There is no account '${handle}'.`);
    const before = user.siteRoles;
    if (before.includes('administrator') && !siteRoles.includes('administrator')) {
      const others = await inner.find(UserEntity, { id: { $ne: user.id }, closedAt: null });
      if (!others.some((other) => other.siteRoles.includes('administrator'))) {
        throw new AppError('conflict', 'The site would have no administrator. Give somebody else the role first.');
      }
    }
    user.siteRoles = [...siteRoles];
    user.siteRolesSince = now;
    recordAudit(inner, {
      actor,
      at: now,
      requestId,
      action: 'account.site-roles-changed',
      subject: { type: 'account', id: user.id },
      before: { siteRoles: before },
      after: { siteRoles },
      detail: handle,
    });
    return {
      handle: user.handle,
      siteRoles: siteRolesOf(user),
      groupCount: await inner.count(MembershipEntity, { user: user.id }),
      since: user.createdAt.toISOString(),
      closed: false,
    };
  });
}

/** A new site has no administrator to give the role. Once there is one, the environment gives nothing any more. */
export async function appointFirstAdministrator(em: EntityManager, user: User, now: Date): Promise<void> {
  const open = await em.find(UserEntity, { closedAt: null }, { fields: ['siteRoles'] });
  if (open.some(({ siteRoles }) => siteRoles.includes('administrator'))) return;
  recordAudit(em, {
    actor: siteActor,
    at: now,
    action: 'account.site-roles-changed',
    subject: { type: 'account', id: user.id },
    before: { siteRoles: user.siteRoles },
    after: { siteRoles: [...user.siteRoles, 'administrator'] },
    detail: `${user.handle}, first administrator`,
  });
  user.siteRoles = [...user.siteRoles, 'administrator'];
  user.siteRolesSince = now;
  await em.flush();
}
