import { z } from 'zod';

/** Where a problem lives. Lengths in m. A star-shaped body has r(theta) = radius (1 + sum_k cosine[k-1] cos k theta + sine[k-1] sin k theta). */
export const discBodySchema = z.strictObject({ kind: z.literal('disc'), radius: z.number().min(1e-3).max(10) });
const coefficients = z.array(z.number().min(-0.5).max(0.5)).max(8).default([]);
export const starBodySchema = z.strictObject({ kind: z.literal('star'), radius: z.number().min(1e-3).max(10), cosine: coefficients, sine: coefficients });
export const rectangleBodySchema = z.strictObject({ kind: z.literal('rectangle'), width: z.number().min(1e-3).max(20), height: z.number().min(1e-3).max(20) });
/** The line from `from` to `to`, in the unit of the equation's variable. */
export const intervalBodySchema = z.strictObject({ kind: z.literal('interval'), from: z.number(), to: z.number() });
export const bodySchema = z.discriminatedUnion('kind', [discBodySchema, starBodySchema, rectangleBodySchema, intervalBodySchema]);
export type Body = z.infer<typeof bodySchema>;
export type StarBody = z.infer<typeof starBodySchema>;
