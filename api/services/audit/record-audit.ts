import type { EntityManager } from '@mikro-orm/sqlite';
import { AuditEntryEntity } from '../../entities/audit-entry.ts';

/** The site itself, where no account acts. */
export const siteActor = { id: null, handle: 'site' } as const;

export interface AuditRecord {
  readonly actor: { readonly id: string | null; readonly handle: string };
  readonly at: Date;
  /** Noun and past verb: 'run.signed-off', 'group.role-given'. */
  readonly action: string;
  readonly subject: { readonly type: string; readonly id: string };
  readonly groupId?: string;
  readonly before?: unknown;
  readonly after?: unknown;
  readonly detail?: string;
  readonly requestId?: string;
}

/** Adds an entry to the caller's unit of work, so that the change and its trace are written by the same flush or not at all. */
export function recordAudit(em: EntityManager, record: AuditRecord): void {
  em.create(AuditEntryEntity, {
    at: record.at,
    actorId: record.actor.id,
    actorHandle: record.actor.handle,
    action: record.action,
    subjectType: record.subject.type,
    subjectId: record.subject.id,
    groupId: record.groupId ?? null,
    before: record.before ?? null,
    after: record.after ?? null,
    detail: record.detail ?? '',
    requestId: record.requestId ?? null,
  });
}
