import { z } from 'zod';
import { accountRefSchema, dateTimeSchema, hashSchema, idSchema, slugSchema } from './common';
import { verdicts } from '../domain/states';

/** GET /recent-verdicts: the newest signed tables, for the front page. */
export const recentVerdictsSchema = z.object({
  items: z.array(z.object({
    run: idSchema, solver: z.string(), phantom: z.string(), sealed: z.boolean(), verdict: z.enum(verdicts), by: accountRefSchema, at: dateTimeSchema, resultHash: hashSchema,
  })),
});
/** GET /search?q= by name, identifier or hash. */
export const searchQuerySchema = z.strictObject({ q: z.string().trim().min(2).max(100) });
export const searchResultSchema = z.object({
  items: z.array(z.object({ kind: z.enum(['phantom', 'solver', 'bench', 'run', 'group']), id: idSchema, slug: z.union([slugSchema, idSchema]), name: z.string(), line: z.string(), path: z.string() })),
});
/** GET /queue: what the workers are doing, for the site's status line and administrators. */
export const queueSchema = z.object({ queued: z.int(), running: z.int(), workers: z.int(), seeding: z.boolean(), done: z.int(), total: z.int() });
