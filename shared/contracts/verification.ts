import { z } from 'zod';
import { dateTimeSchema, hashSchema } from './common';
import { sourceSchema } from './catalogue';

export const verificationStates = ['pass', 'fail', 'not-run'] as const;

export const verificationItemSchema = z.object({
  key: z.string(), group: z.string(), name: z.string(), line: z.string(),
  /** As printed at the source. */
  published: z.string(), unit: z.string(),
  /** Largest gap that passes, and why it is what it is. */
  bound: z.number(), reason: z.string(), source: sourceSchema, cost: z.enum(['light', 'heavy']),
  state: z.enum(verificationStates),
  /** Null until it ran, or where no number came out. */
  measured: z.union([z.number(), z.string()]).nullable(), gap: z.number().nullable(),
  /** What the figures leave unsaid, or why there are none. */
  words: z.string().nullable(),
  /** SHA-256 over the bits that were computed. */
  digest: hashSchema.nullable(), seconds: z.number().nullable(), at: dateTimeSchema.nullable(),
});
export type VerificationItem = z.infer<typeof verificationItemSchema>;

/** GET /verification */
export const verificationSchema = z.object({
  codeVersion: z.string(),
  /** Checks are being computed, or wait for their turn. */
  running: z.boolean(),
  /** When the last check that ran ended. */
  at: dateTimeSchema.nullable(),
  /** SHA-256 over the digests of all checks, one a line in their order; null until all have one. */
  resultHash: hashSchema.nullable(),
  items: z.array(verificationItemSchema),
});
export type Verification = z.infer<typeof verificationSchema>;
