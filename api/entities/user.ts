import { defineEntity, p, type InferEntity } from '@mikro-orm/core';
import type { NotificationSettings } from '../../shared/domain/notifications.ts';
import type { SiteRole } from '../../shared/domain/permissions.ts';
import { baseProperties } from './base.ts';

/** `.hidden()` would take the null out of the inferred type. */
const unserialised = () => undefined;

export const UserEntity = defineEntity({
  name: 'User',
  tableName: 'user',
  properties: {
    ...baseProperties,
    handle: p.string(),
    /** Account number at the sign-in provider; null once the account is closed. */
    githubId: p.string().nullable().serializer(unserialised),
    about: p.string().default(''),
    /** Confirmed address. Never leaves the account's own page. */
    email: p.string().nullable().serializer(unserialised),
    pendingEmail: p.string().nullable().serializer(unserialised),
    emailTokenHash: p.string().nullable().serializer(unserialised),
    emailTokenExpiresAt: p.datetime().nullable().serializer(unserialised),
    /** Roles beyond 'member', which every account has. */
    siteRoles: p.json().$type<SiteRole[]>(),
    siteRolesSince: p.datetime().nullable(),
    notifications: p.json().$type<Partial<NotificationSettings>>(),
    closedAt: p.datetime().nullable(),
  },
  uniques: [
    { name: 'user_handle_unique', properties: ['handle'] },
    { name: 'user_github_id_unique', properties: ['githubId'] },
  ],
});
export type User = InferEntity<typeof UserEntity>;
