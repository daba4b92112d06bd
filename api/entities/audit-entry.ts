import { defineEntity, p, type InferEntity } from '@mikro-orm/core';

/**
 * Append-only: triggers in the migration refuse UPDATE and DELETE. It holds no foreign keys, so that what it names can
 * change without touching it, and the handle stands as it was on the day.
 */
export const AuditEntryEntity = defineEntity({
  name: 'AuditEntry',
  tableName: 'audit_entry',
  properties: {
    id: p.integer().primary().autoincrement(),
    at: p.datetime(),
    /** Null when the site itself acted (a job, a seed). */
    actorId: p.string().nullable(),
    actorHandle: p.string(),
    action: p.string(),
    subjectType: p.string(),
    subjectId: p.string(),
    groupId: p.string().nullable(),
    before: p.json().$type<unknown>().nullable(),
    after: p.json().$type<unknown>().nullable(),
    detail: p.text().default(''),
    requestId: p.string().nullable(),
  },
  indexes: [
    { name: 'audit_entry_subject_index', properties: ['subjectType', 'subjectId'] },
    { name: 'audit_entry_action_index', properties: ['action'] },
    { name: 'audit_entry_actor_index', properties: ['actorId'] },
  ],
});
export type AuditEntry = InferEntity<typeof AuditEntryEntity>;
