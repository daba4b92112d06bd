import type { EntityManager } from '@mikro-orm/sqlite';
import type { RequestHandler } from 'express';
import type { GroupRole } from '../../shared/domain/permissions.ts';
import type { TokenScope } from '../../shared/domain/token-scopes.ts';
import { AppError } from '../../shared/errors.ts';
import type { Dependencies } from '../dependencies.ts';
import { ApiTokenEntity } from '../entities/api-token.ts';
import { MembershipEntity } from '../entities/group.ts';
import { UserEntity, type User } from '../entities/user.ts';
import { siteRolesOf } from '../services/accounts/site-roles.ts';
import { secretHash } from '../services/secret-hash.ts';
import type { RequestActor } from './actor.ts';

const lastUsedEveryMs = 60_000;

/** Finds out who asks: a bearer token goes before the session; a token that is wrong is refused, never ignored. */
export function resolveActor(deps: Dependencies): RequestHandler {
  return async (req, _res, next) => {
    const em = deps.orm.em.fork();
    const header = req.get('authorization');
    if (header !== undefined) {
      const match = /^Bearer ([\w-]{20,200})$/i.exec(header);
      const actor = match?.[1] === undefined ? null : await actorOfToken(em, match[1], deps.clock());
      if (!actor) throw new AppError('not-signed-in', 'The bearer token is unknown, expired or revoked.');
      req.actor = actor;
    } else if (req.session?.userId !== undefined) {
      const user = await em.findOne(UserEntity, { id: req.session.userId, closedAt: null });
      req.actor = user ? await actorOfUser(em, user, 'session', null) : null;
    } else req.actor = null;
    next();
  };
}

async function actorOfToken(em: EntityManager, secret: string, now: Date): Promise<RequestActor | null> {
  const token = await em.findOne(
    ApiTokenEntity,
    { tokenHash: secretHash(secret), revokedAt: null, expiresAt: { $gt: now } },
    { populate: ['user'] },
  );
  if (!token || token.user.$.closedAt) return null;
  if (!token.lastUsedAt || now.getTime() - token.lastUsedAt.getTime() > lastUsedEveryMs) {
    await em.nativeUpdate(ApiTokenEntity, { id: token.id }, { lastUsedAt: now });
  }
  return actorOfUser(em, token.user.$, 'token', token.scopes);
}

export async function actorOfUser(
  em: EntityManager,
  user: User,
  via: RequestActor['via'],
  scopes: readonly TokenScope[] | null,
): Promise<RequestActor> {
  const memberships = await em.find(MembershipEntity, { user: user.id });
  const groups: Record<string, readonly GroupRole[]> = {};
  for (const membership of memberships) groups[membership.group.id] = membership.roles;
  return { id: user.id, handle: user.handle, siteRoles: siteRolesOf(user), groups, via, scopes };
}

