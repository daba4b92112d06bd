import { z } from 'zod';
import { dateTimeSchema, hashSchema } from './common';
import { runDetailSchema } from './runs';

/** GET /runs/:id/certificate: all that a printed certificate of a run says. */
export const certificateSchema = z.object({
  run: runDetailSchema,
  bench: z.object({ question: z.string(), revision: z.int(), contentHash: hashSchema }),
  phantomHash: hashSchema, solverHash: hashSchema,
  /** The verdict that stands, null while there is none. */
  standing: z.string().nullable(),
  citation: z.string(),
  caution: z.array(z.string()), issuedAt: dateTimeSchema, url: z.string(),
});
export type Certificate = z.infer<typeof certificateSchema>;
