import type { EntityManager } from '@mikro-orm/sqlite';
import type { AuditEntryWire } from '../../../shared/contracts/audit.ts';
import { defaultPageSize, type PageQuery } from '../../../shared/contracts/pagination.ts';
import { AppError } from '../../../shared/errors.ts';
import { AuditEntryEntity } from '../../entities/audit-entry.ts';

interface AuditFilter extends PageQuery {
  readonly action?: string | undefined;
  readonly actor?: string | undefined;
  readonly subjectType?: string | undefined;
  readonly subjectId?: string | undefined;
  readonly from?: string | undefined;
  readonly to?: string | undefined;
}

/** The trail, newest first. Its ids rise by one, so an id is a place in it. */
export async function listAudit(em: EntityManager, filter: AuditFilter): Promise<{ items: AuditEntryWire[]; nextCursor: string | null }> {
  const limit = filter.limit ?? defaultPageSize;
  if (filter.cursor !== undefined && !/^\d{1,15}$/.test(filter.cursor)) {
    throw new AppError('bad-request', 'The cursor cannot be read. Use the nextCursor of the page before.');
  }
  const found = await em.find(
    AuditEntryEntity,
    {
      $and: [
        filter.cursor === undefined ? {} : { id: { $lt: Number(filter.cursor) } },
        filter.action === undefined
          ? {}
          : filter.action.includes('.')
            ? { action: filter.action }
            : { action: { $like: `${filter.action.replaceAll(/[%_]/g, '')}.%` } },
        filter.actor === undefined ? {} : { actorHandle: filter.actor },
        filter.subjectType === undefined ? {} : { subjectType: filter.subjectType },
        filter.subjectId === undefined ? {} : { subjectId: filter.subjectId },
        filter.from === undefined ? {} : { at: { $gte: new Date(filter.from) } },
        filter.to === undefined ? {} : { at: { $lte: new Date(filter.to) } },
      ],
    },
    { orderBy: { id: 'desc' }, limit: limit + 1 },
  );
  const rows = found.slice(0, limit);
  const last = rows.at(-1);
  return {
    items: rows.map((entry) => ({
      id: String(entry.id),
      at: entry.at.toISOString(),
      actor: entry.actorHandle,
      action: entry.action,
      subjectType: entry.subjectType,
      subjectId: entry.subjectId,
      groupId: entry.groupId ?? null,
      before: entry.before ?? null,
      after: entry.after ?? null,
      detail: entry.detail,
      requestId: entry.requestId ?? null,
    })),
    nextCursor: found.length > limit && last ? String(last.id) : null,
  };
}
