import { defineEntity, p, type InferEntity } from '@mikro-orm/core';
import type { TokenScope } from '../../shared/domain/token-scopes.ts';
import { baseProperties } from './base.ts';
import { UserEntity } from './user.ts';

export const ApiTokenEntity = defineEntity({
  name: 'ApiToken',
  tableName: 'api_token',
  properties: {
    ...baseProperties,
    user: () => p.manyToOne(UserEntity).ref().index('api_token_user_index'),
    name: p.string(),
    /** SHA-256 of the token; the token itself is shown once and never stored. */
    tokenHash: p.string().hidden(),
    /** First characters, so that a holder can tell tokens apart. */
    prefix: p.string(),
    scopes: p.json().$type<TokenScope[]>(),
    lastUsedAt: p.datetime().nullable(),
    expiresAt: p.datetime(),
    revokedAt: p.datetime().nullable(),
  },
  uniques: [{ name: 'api_token_hash_unique', properties: ['tokenHash'] }],
});
export type ApiToken = InferEntity<typeof ApiTokenEntity>;
