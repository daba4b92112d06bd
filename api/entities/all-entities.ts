import { domainEntities } from './all-domain-entities.ts';
import { ApiTokenEntity } from './api-token.ts';
import { AuditEntryEntity } from './audit-entry.ts';
import { GroupEntity, InvitationEntity, MembershipEntity } from './group.ts';
import { OutboxMessageEntity } from './outbox-message.ts';
import { SessionEntity } from './session.ts';
import { UserEntity } from './user.ts';

/** Every table. An entity that is not listed here has none. */
export const allEntities = [
  ApiTokenEntity,
  AuditEntryEntity,
  GroupEntity,
  InvitationEntity,
  MembershipEntity,
  OutboxMessageEntity,
  SessionEntity,
  UserEntity,
  ...domainEntities,
];
