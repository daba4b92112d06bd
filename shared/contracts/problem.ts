import { z } from 'zod';
import { errorTable, type ErrorCode } from '../errors.ts';

const codes = Object.keys(errorTable) as [ErrorCode, ...ErrorCode[]];

export const issueSchema = z
  .object({
    path: z.array(z.union([z.string(), z.number()])),
    message: z.string(),
    row: z.int().optional(),
    column: z.int().optional(),
  })
  .meta({ id: 'Issue' });

/** Problem details (RFC 9457) with the code of `shared/errors.ts` and one issue per faulty field or cell. */
export const problemSchema = z
  .object({
    type: z.string(),
    title: z.string(),
    status: z.int(),
    detail: z.string(),
    code: z.enum(codes),
    instance: z.string(),
    requestId: z.string(),
    issues: z.array(issueSchema).optional(),
    extra: z.record(z.string(), z.unknown()).optional(),
  })
  .meta({ id: 'Problem' });
export type Problem = z.infer<typeof problemSchema>;
