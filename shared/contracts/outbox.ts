import { z } from 'zod';
import { dateTimeSchema } from './common.ts';
import { pageOf, pageQuery } from './pagination.ts';

/** 'kept' means no SMTP server is set and the message stays here. */
export const outboxStates = ['waiting', 'kept', 'sent', 'failed'] as const;

export const outboxQuerySchema = z.strictObject({ ...pageQuery, state: z.enum(outboxStates).optional() });
export const outboxMessageSchema = z
  .object({
    id: z.string(),
    kind: z.string(),
    recipient: z.string(),
    subject: z.string(),
    /** Empty once an SMTP server has taken the message. */
    text: z.string(),
    state: z.enum(outboxStates),
    attempts: z.int(),
    createdAt: dateTimeSchema,
    sentAt: dateTimeSchema.nullable(),
    failure: z.string().nullable(),
  })
  .meta({ id: 'OutboxMessage' });
export type OutboxMessageWire = z.infer<typeof outboxMessageSchema>;
export const outboxPageSchema = pageOf(outboxMessageSchema).extend({
  /** False when messages only stay in the outbox. */
  delivers: z.boolean(),
});
