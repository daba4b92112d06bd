import type { EntityManager } from '@mikro-orm/sqlite';
import type { OutboxMessageWire, outboxStates } from '../../../shared/contracts/outbox.ts';
import { defaultPageSize, type PageQuery } from '../../../shared/contracts/pagination.ts';
import { OutboxMessageEntity } from '../../entities/outbox-message.ts';
import { afterPlace, cutPage, newestFirst, readCursor } from '../paging.ts';

export async function listOutbox(
  em: EntityManager,
  query: PageQuery & { readonly state?: (typeof outboxStates)[number] | undefined },
): Promise<{ items: OutboxMessageWire[]; nextCursor: string | null }> {
  const limit = query.limit ?? defaultPageSize;
  const found = await em.find(
    OutboxMessageEntity,
    { $and: [query.state === undefined ? {} : { state: query.state }, afterPlace(readCursor(query.cursor))] },
    { orderBy: newestFirst, limit: limit + 1 },
  );
  const { rows, nextCursor } = cutPage(found, limit);
  return {
    items: rows.map((message) => ({
      id: message.id,
      kind: message.kind,
      recipient: message.recipient,
      subject: message.subject,
      text: message.text,
      state: message.state,
      attempts: message.attempts,
      createdAt: message.createdAt.toISOString(),
      sentAt: message.sentAt?.toISOString() ?? null,
      failure: message.failure ?? null,
    })),
    nextCursor,
  };
}
