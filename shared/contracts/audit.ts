import { z } from 'zod';
import { dateTimeSchema } from './common.ts';
import { pageOf, pageQuery } from './pagination.ts';

export const auditQuerySchema = z.strictObject({
  ...pageQuery,
  action: z.string().max(80).optional().describe("A whole action ('group.created') or its noun ('group')."),
  actor: z.string().max(80).optional().describe('Handle as it was on the day.'),
  subjectType: z.string().max(40).optional(),
  subjectId: z.string().max(80).optional(),
  from: z.iso.datetime().optional(),
  to: z.iso.datetime().optional(),
});

export const auditEntrySchema = z
  .object({
    id: z.string(),
    at: dateTimeSchema,
    actor: z.string(),
    action: z.string(),
    subjectType: z.string(),
    subjectId: z.string(),
    groupId: z.string().nullable(),
    before: z.unknown(),
    after: z.unknown(),
    detail: z.string(),
    requestId: z.string().nullable(),
  })
  .meta({ id: 'AuditEntry' });
export type AuditEntryWire = z.infer<typeof auditEntrySchema>;
export const auditPageSchema = pageOf(auditEntrySchema);
