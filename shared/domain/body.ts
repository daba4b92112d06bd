import { z } from 'zod';
import { starOutline } from './star-outline';

/* Where a problem lives. Lengths in m. */

/** Bounds of a star-shaped outline, in radii: its distance from the centre, and its radius of curvature. */
export const starBounds = { nearest: 0.3, farthest: 2, sharpest: 0.04 } as const;
export const discBodySchema = z.strictObject({ kind: z.literal('disc'), radius: z.number().min(1e-3).max(10) });
const coefficients = z.array(z.number().min(-0.5).max(0.5)).max(8).default([]);
/** r(theta) = radius (1 + sum_k cosine[k-1] cos k theta + sine[k-1] sin k theta), theta counter-clockwise from the x axis. */
export const starBodySchema = z
  .strictObject({ kind: z.literal('star'), radius: z.number().min(1e-3).max(10), cosine: coefficients, sine: coefficients })
  .superRefine((body, ctx) => {
    const { smallest, largest, sharpest } = starOutline(body.cosine, body.sine);
    const fault = (message: string) => ctx.addIssue({ code: 'custom', path: ['cosine'], message });
    if (smallest < starBounds.nearest) fault(`The outline must stay at least ${starBounds.nearest} of the radius away from the centre; with these coefficients it comes to ${smallest.toFixed(3)}.`);
    else if (largest > starBounds.farthest) fault(`The outline must stay within ${starBounds.farthest} radii of the centre; with these coefficients it reaches ${largest.toFixed(3)}.`);
    else if (sharpest < starBounds.sharpest) fault(`The outline bends too sharply: its radius of curvature must be at least ${starBounds.sharpest} of the radius, with these coefficients it falls to ${sharpest.toFixed(4)}.`);
  });
export const rectangleBodySchema = z.strictObject({ kind: z.literal('rectangle'), width: z.number().min(1e-3).max(20), height: z.number().min(1e-3).max(20) });
/** The line from `from` to `to`, in the unit of the equation's variable. */
export const intervalBodySchema = z.strictObject({ kind: z.literal('interval'), from: z.number(), to: z.number() });
export const bodySchema = z.discriminatedUnion('kind', [discBodySchema, starBodySchema, rectangleBodySchema, intervalBodySchema]);
export type Body = z.infer<typeof bodySchema>;
export type StarBody = z.infer<typeof starBodySchema>;
