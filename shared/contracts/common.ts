import { z } from 'zod';
import { bodySchema } from '../domain/body';
import { familyKeySchema } from '../domain/families';

export const slugSchema = z.string().min(1).max(80).regex(/^[a-z0-9]+(?:-[a-z0-9]+)*$/, 'Lower-case letters, digits and single hyphens.');
/** Short readable identifiers: PH- phantom, SV- solver configuration, BN- bench, RN- run. */
export const idSchema = z.string().min(1).max(40);
export const dateTimeSchema = z.iso.datetime();
export const hashSchema = z.string().regex(/^[0-9a-f]{64}$/);
export const markdownSchema = z.string().max(20_000);
export const reasonSchema = z.string().trim().min(10, 'Write at least 10 characters.').max(5000);

export const groupRefSchema = z.object({ slug: slugSchema, name: z.string() });
export const accountRefSchema = z.object({ handle: z.string() });
export type GroupRef = z.infer<typeof groupRefSchema>;

export const licences = ['CC0-1.0', 'CC-BY-4.0', 'CC-BY-SA-4.0', 'ODbL-1.0'] as const;
export const licenceSchema = z.enum(licences);

export const checkResultSchema = z.object({
  key: z.string(), name: z.string(), state: z.enum(['pass', 'warning', 'fail', 'not-applicable']),
  figure: z.number().nullable(), bound: z.number().nullable(), comparison: z.enum(['at-most', 'at-least', 'equal']).nullable(),
  unit: z.string(), meaning: z.string(), source: z.string(),
});
export type CheckResultWire = z.infer<typeof checkResultSchema>;

export const gridSchema = z.object({
  nx: z.int(), ny: z.int(), xMin: z.number(), xMax: z.number(), yMin: z.number(), yMax: z.number(), bodyRadius: z.number(),
  /** Absent in simulations stored before bodies other than discs: a disc. */
  body: bodySchema.optional(),
});

/** A metric's value at one place of a table: null with the reason when it is not defined. */
export const levelStatisticsSchema = z.object({
  level: z.number(), count: z.int(),
  median: z.number().nullable(), mean: z.number().nullable(), sd: z.number().nullable(),
  p05: z.number().nullable(), p95: z.number().nullable(), worst: z.number().nullable(),
  medianDraw: z.int().nullable(), worstDraw: z.int().nullable(),
  /** Values of all draws in draw order, null where undefined. */
  draws: z.array(z.number().nullable()),
  /** Why values are null, where any is. */
  reason: z.string().nullable(),
});
export type LevelStatistics = z.infer<typeof levelStatisticsSchema>;

export const intervalSchema = z.object({ value: z.number(), low: z.number(), high: z.number() });
/** How the error grows with the noise: E = b + C delta^nu or E = C |ln delta|^-kappa, by AICc; 90 % bootstrap intervals over draws. */
export const stabilitySheetSchema = z.object({
  metric: z.string(), model: z.enum(['power', 'logarithmic', 'none']),
  exponent: intervalSchema.nullable(), floor: intervalSchema.nullable(), constant: z.number().nullable(),
  /** Relative noise at which the median first crosses the trivial reconstruction; null when it does not within the ladder. */
  breakdown: intervalSchema.nullable(),
  /** Set where breakdown is null: 'beyond' the ladder, or worse than trivial 'throughout'. */
  breakdownNote: z.enum(['beyond', 'throughout']).nullable(),
  reason: z.string().nullable(),
});
export type StabilitySheetWire = z.infer<typeof stabilitySheetSchema>;
export { familyKeySchema };
