import { defineEntity, p, type InferEntity } from '@mikro-orm/core';
import { outboxStates } from '../../shared/contracts/outbox.ts';
import { baseProperties } from './base.ts';

/** A message is written in the transaction of the change that causes it, and delivered afterwards. */
export const OutboxMessageEntity = defineEntity({
  name: 'OutboxMessage',
  tableName: 'outbox_message',
  properties: {
    ...baseProperties,
    kind: p.string(),
    recipient: p.string(),
    subject: p.string(),
    /** Emptied once an SMTP server has taken the message: it may hold a link that gives access. */
    text: p.text(),
    state: p.enum([...outboxStates]),
    attempts: p.integer().default(0),
    nextAttemptAt: p.datetime(),
    sentAt: p.datetime().nullable(),
    failure: p.text().nullable(),
  },
  indexes: [{ name: 'outbox_message_state_index', properties: ['state', 'nextAttemptAt'] }],
});
export type OutboxMessage = InferEntity<typeof OutboxMessageEntity>;
