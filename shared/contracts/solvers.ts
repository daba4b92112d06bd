import { z } from 'zod';
import { axisSettingSchema } from '../domain/axes';
import { accountRefSchema, dateTimeSchema, familyKeySchema, groupRefSchema, hashSchema, idSchema, levelStatisticsSchema, markdownSchema, reasonSchema, slugSchema, stabilitySheetSchema } from './common';
import { reviewStates, runStates, solverStates } from '../domain/states';

export const solverStateSchema = z.enum(solverStates);
export const ruleSettingSchema = z.discriminatedUnion('key', [
  z.strictObject({ key: z.literal('fixed'), value: z.number().positive() }),
  z.strictObject({ key: z.literal('discrepancy'), safetyFactor: z.number().min(1, 'At least 1.').max(10, 'At most 10.') }),
  z.strictObject({ key: z.literal('gcv') }),
  z.strictObject({ key: z.literal('l-curve') }),
  z.strictObject({ key: z.literal('quasi-optimality') }),
  z.strictObject({ key: z.literal('cumulative-periodogram') }),
]);
/** A method with its parameters; the parameters are checked against the method's own schema through the registry. */
export const configurationSchema = z.strictObject({
  method: z.string().max(60), parameters: z.record(z.string(), z.union([z.number(), z.string().max(60)])), rule: ruleSettingSchema.nullable(),
});
export type Configuration = z.infer<typeof configurationSchema>;

const declaration = z.strictObject({
  notTuned: z.boolean(), ownMesh: z.boolean(), sourceMayBePublished: z.boolean().default(false),
});
export const solverCreateSchema = z.strictObject({
  group: slugSchema, name: z.string().trim().min(3).max(80), description: markdownSchema.default(''), configuration: configurationSchema, declaration,
  /** false keeps a draft. */
  register: z.boolean().default(true),
});
export type SolverCreate = z.input<typeof solverCreateSchema>;
export const solverVersionCreateSchema = z.strictObject({
  configuration: configurationSchema, declaration, whatChanged: z.string().trim().min(5, 'Say what changed.').max(300), register: z.boolean().default(true),
});
export const solverWithdrawSchema = z.strictObject({ reason: reasonSchema });
export const solverParamsSchema = z.strictObject({ slug: slugSchema });
export const solverVersionParamsSchema = z.strictObject({ slug: slugSchema, n: z.coerce.number<string>().int().min(1).max(9999) });
export const solverListQuerySchema = z.strictObject({
  q: z.string().max(100).optional(), method: z.string().max(60).optional(), group: slugSchema.optional(),
  cursor: z.string().max(200).optional(), limit: z.coerce.number<string>().int().min(1).max(100).default(50),
});

export const solverVersionSchema = z.object({
  n: z.int(), state: solverStateSchema, contentHash: hashSchema, whatChanged: z.string(), configuration: configurationSchema,
  declaration: z.object({ notTuned: z.boolean(), ownMesh: z.boolean(), sourceMayBePublished: z.boolean() }),
  createdAt: dateTimeSchema, createdBy: accountRefSchema, registeredAt: dateTimeSchema.nullable(), withdrawnReason: z.string().nullable(), runs: z.int(), signedOff: z.int(),
});
export const solverSummarySchema = z.object({
  id: idSchema, slug: slugSchema, name: z.string(), group: groupRefSchema, methodName: z.string(), families: z.array(familyKeySchema),
  /** Its mark (shared/domain/glyphs.ts), the same on every page but for a colour that another one there has. */
  glyph: z.int(),
  current: solverVersionSchema,
});
export type SolverSummary = z.infer<typeof solverSummarySchema>;
export const solverListSchema = z.object({ items: z.array(solverSummarySchema), nextCursor: z.string().nullable() });
export const solverDetailSchema = solverSummarySchema.extend({
  description: z.string(), versions: z.array(solverVersionSchema),
  entries: z.array(z.object({
    bench: z.object({ slug: slugSchema, id: idSchema, title: z.string(), state: z.string(), axis: axisSettingSchema }), version: z.int(),
    runs: z.array(z.object({ run: idSchema, phantom: z.string(), state: z.enum(runStates), review: z.enum(reviewStates) })),
  })),
  may: z.object({ edit: z.boolean(), withdraw: z.boolean(), newVersion: z.boolean(), enter: z.boolean() }),
});
export type SolverDetail = z.infer<typeof solverDetailSchema>;

export const solverStabilityQuerySchema = z.strictObject({ metric: z.string().max(60).default('relative-l2-error') });
/** GET /solvers/:slug/versions/:n/stability?metric=: one sheet a finished run (phantom). */
export const solverStabilitySchema = z.object({
  metric: z.string(),
  items: z.array(z.object({
    run: idSchema, phantom: z.object({ slug: slugSchema, id: idSchema, name: z.string(), version: z.int(), sealed: z.boolean(), sealedUntil: z.iso.date().nullable() }),
    axis: axisSettingSchema, sheet: stabilitySheetSchema, levels: z.array(levelStatisticsSchema), trivial: z.number().nullable(), modelErrorFloor: z.number(),
    secondsPerReconstruction: z.number().nullable(), timeRatio: z.number().nullable(),
  })),
});
export type SolverStability = z.infer<typeof solverStabilitySchema>;
