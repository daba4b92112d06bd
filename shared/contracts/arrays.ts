import { z } from 'zod';
import { hashSchema } from './common';
import { encodedArraySchema } from '../domain/array-encoding';

/** POST /arrays, multipart field `file`: PNG (grey values 0 to 1), .npy (2-D numeric), or CSV (rows of numbers, top row first). */
export const arrayUploadResponseSchema = z.object({
  sha256: hashSchema, rows: z.int(), cols: z.int(), min: z.number(), max: z.number(), mean: z.number(),
  format: z.enum(['png', 'npy', 'csv']), fileName: z.string(), fileSize: z.int(),
});
export type ArrayUploadResponse = z.infer<typeof arrayUploadResponseSchema>;

/** POST /frames, multipart `file` (CSV, one row a frame, the reference frame first) and `valuesPerFrame`. */
export const frameUploadRequestSchema = z.strictObject({ valuesPerFrame: z.coerce.number<string>().int().min(1).max(5000) });
export const frameUploadResponseSchema = z.object({
  sha256: hashSchema, frames: z.int(), valuesPerFrame: z.int(), min: z.number(), max: z.number(), fileName: z.string(), fileSize: z.int(),
  /** Norm of the reference frame and of the largest change from it, in V. */
  referenceNorm: z.number(), largestChange: z.number(),
});
export type FrameUploadResponse = z.infer<typeof frameUploadResponseSchema>;
/** GET /arrays/:sha256. */
export const arrayResponseSchema = z.object({ sha256: hashSchema, values: encodedArraySchema });
