import { randomUUID } from 'node:crypto';
import type { EntityManager } from '@mikro-orm/sqlite';
import { AppError } from '../../../shared/errors.ts';
import type { TokenWire } from '../../../shared/contracts/token.ts';
import type { TokenScope } from '../../../shared/domain/token-scopes.ts';
import { ApiTokenEntity, type ApiToken } from '../../entities/api-token.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { randomSecret, secretHash } from '../secret-hash.ts';

const maxTokens = 50;
const dayMs = 24 * 60 * 60 * 1000;
/** Tells a leaked token from other text. */
const mark = 'hmk_';
const shownCharacters = 8;

export async function listTokens(em: EntityManager, userId: string, now: Date): Promise<{ items: TokenWire[] }> {
  const tokens = await em.find(ApiTokenEntity, { user: userId, revokedAt: null }, { orderBy: { createdAt: 'desc', id: 'desc' } });
  return { items: tokens.map((token) => wire(token, now)) };
}

/** The answer is the only place where the token itself ever is. */
export async function createToken(
  em: EntityManager,
  { actor, now, requestId }: Acting,
  rng: (bytes: number) => Uint8Array,
  input: { readonly name: string; readonly scopes: readonly TokenScope[]; readonly expiresInDays: number },
): Promise<TokenWire & { token: string }> {
  if ((await em.count(ApiTokenEntity, { user: actor.id, revokedAt: null })) >= maxTokens) {
    throw new AppError('conflict', `An account holds at most ${maxTokens} tokens. Revoke one first.`);
  }
  const secret = `${mark}${randomSecret(rng)}`;
  const token = em.create(ApiTokenEntity, {
    id: randomUUID(),
    user: em.getReference(UserEntity, actor.id),
    name: input.name,
    tokenHash: secretHash(secret),
    prefix: secret.slice(0, shownCharacters),
    scopes: [...input.scopes],
    createdAt: now,
    lastUsedAt: null,
    expiresAt: new Date(now.getTime() + input.expiresInDays * dayMs),
    revokedAt: null,
  });
  recordAudit(em, {
    actor,
    at: now,
    requestId,
    action: 'token.created',
    subject: { type: 'token', id: token.id },
    after: { name: token.name, scopes: token.scopes, expiresAt: token.expiresAt.toISOString() },
  });
  await em.flush();
  return { ...wire(token, now), token: secret };
}

export async function revokeToken(em: EntityManager, { actor, now, requestId }: Acting, id: string): Promise<void> {
  const token = await em.findOne(ApiTokenEntity, { id, user: actor.id, revokedAt: null });
  if (!token) throw new AppError('not-found', 'You have no such token.');
  token.revokedAt = now;
  recordAudit(em, { actor, at: now, requestId, action: 'token.revoked', subject: { type: 'token', id }, before: { name: token.name } });
  await em.flush();
}

function wire(token: ApiToken, now: Date): TokenWire {
  return {
    id: token.id,
    name: token.name,
    prefix: token.prefix,
    scopes: token.scopes,
    createdAt: token.createdAt.toISOString(),
    lastUsedAt: token.lastUsedAt?.toISOString() ?? null,
    expiresAt: token.expiresAt.toISOString(),
    expired: token.expiresAt <= now,
  };
}
