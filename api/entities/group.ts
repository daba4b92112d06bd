import { defineEntity, p, type InferEntity } from '@mikro-orm/core';
import type { GroupRole } from '../../shared/domain/permissions.ts';
import { baseProperties } from './base.ts';
import { UserEntity } from './user.ts';

export const GroupEntity = defineEntity({
  name: 'Group',
  tableName: 'group',
  properties: {
    ...baseProperties,
    slug: p.string(),
    name: p.string(),
    description: p.text().default(''),
  },
  uniques: [{ name: 'group_slug_unique', properties: ['slug'] }],
});
export type Group = InferEntity<typeof GroupEntity>;

export const MembershipEntity = defineEntity({
  name: 'Membership',
  tableName: 'membership',
  properties: {
    ...baseProperties,
    group: () => p.manyToOne(GroupEntity).ref(),
    user: () => p.manyToOne(UserEntity).ref().index('membership_user_index'),
    /** At least one. */
    roles: p.json().$type<GroupRole[]>(),
  },
  uniques: [{ name: 'membership_group_user_unique', properties: ['group', 'user'] }],
});
export type Membership = InferEntity<typeof MembershipEntity>;

export const InvitationEntity = defineEntity({
  name: 'Invitation',
  tableName: 'invitation',
  properties: {
    ...baseProperties,
    group: () => p.manyToOne(GroupEntity).ref().index('invitation_group_index'),
    invitedBy: () => p.manyToOne(UserEntity).ref(),
    email: p.string(),
    roles: p.json().$type<GroupRole[]>(),
    tokenHash: p.string().hidden(),
    sentAt: p.datetime(),
    expiresAt: p.datetime(),
    acceptedAt: p.datetime().nullable(),
    acceptedBy: () => p.manyToOne(UserEntity).ref().nullable(),
    revokedAt: p.datetime().nullable(),
  },
  uniques: [{ name: 'invitation_token_hash_unique', properties: ['tokenHash'] }],
});
export type Invitation = InferEntity<typeof InvitationEntity>;
