import { z } from 'zod';
import { accountRefSchema, checkResultSchema, dateTimeSchema, familyKeySchema, groupRefSchema, hashSchema, idSchema, licenceSchema, markdownSchema, reasonSchema, slugSchema } from './common';
import { phantomDefinitionSchema, readableDefinitionSchema } from '../domain/phantom-definition';
import { phantomStates, reviewStates } from '../domain/states';

export const phantomStateSchema = z.enum(phantomStates);

/** Measured frames beside the simulated data, and the statement that their origin needs. */
export const measuredFramesSchema = z
  .strictObject({
    sha256: hashSchema, frames: z.int().min(1), valuesPerFrame: z.int().min(1),
    origin: z.enum(['tank', 'living']),
    instrument: z.string().trim().max(300).default(''),
    /** For people and animals: ethics reference and the three statements of the form. */
    ethicsReference: z.string().trim().max(200).default(''),
    ethicsApproved: z.boolean().default(false), deidentified: z.boolean().default(false), currentWithinStandard: z.boolean().default(false),
  })
  .superRefine((f, ctx) => {
    if (f.origin === 'tank' && !f.instrument) ctx.addIssue({ code: 'custom', path: ['instrument'], message: 'Say what was measured and with which instrument.' });
    if (f.origin !== 'living') return;
    if (!f.ethicsApproved) ctx.addIssue({ code: 'custom', path: ['ethicsApproved'], message: 'Frames measured on people or animals need an ethics approval.' });
    if (!f.deidentified) ctx.addIssue({ code: 'custom', path: ['deidentified'], message: 'The frames must be de-identified.' });
    if (!f.currentWithinStandard) ctx.addIssue({ code: 'custom', path: ['currentWithinStandard'], message: 'The current must have stayed within the applicable electrical-safety standard.' });
    if (!f.ethicsReference) ctx.addIssue({ code: 'custom', path: ['ethicsReference'], message: 'Give the board and the number.' });
  });
export type MeasuredFrames = z.infer<typeof measuredFramesSchema>;

const terms = {
  name: z.string().trim().min(3).max(80),
  description: markdownSchema.default(''),
  licence: licenceSchema,
  definition: phantomDefinitionSchema,
  frames: measuredFramesSchema.nullable().default(null),
  /** Ground truth sealed until this day (ISO date); null publishes it with the phantom. */
  sealedUntil: z.iso.date().nullable().default(null),
};
/** POST /phantoms: a new phantom with its first version as a draft. */
export const phantomCreateSchema = z.strictObject({ group: slugSchema, ...terms });
export type PhantomCreate = z.input<typeof phantomCreateSchema>;
/** PUT /phantoms/:slug/versions/:n, only while a draft or after changes were requested. */
export const phantomVersionUpdateSchema = z.strictObject({ ...terms, whatChanged: z.string().trim().max(300).default('') });
/** POST /phantoms/:slug/versions: the next version as a draft. */
export const phantomVersionCreateSchema = z.strictObject({ ...terms, whatChanged: z.string().trim().min(5, 'Say what changed.').max(300) });
/** POST /phantoms/:slug/versions/:n/verdict. */
export const phantomVerdictSchema = z.strictObject({ verdict: z.enum(['publish', 'request-changes']), reason: reasonSchema });
export const withdrawSchema = z.strictObject({ reason: reasonSchema });

export const phantomParamsSchema = z.strictObject({ slug: slugSchema });
export const phantomVersionParamsSchema = z.strictObject({ slug: slugSchema, n: z.coerce.number<string>().int().min(1).max(9999) });
export const phantomListQuerySchema = z.strictObject({
  q: z.string().max(100).optional(), family: familyKeySchema.optional(), group: slugSchema.optional(), state: phantomStateSchema.optional(),
  cursor: z.string().max(200).optional(), limit: z.coerce.number<string>().int().min(1).max(100).default(50),
});

export const phantomVersionSummarySchema = z.object({
  n: z.int(), state: phantomStateSchema, contentHash: hashSchema, whatChanged: z.string(),
  createdAt: dateTimeSchema, publishedAt: dateTimeSchema.nullable(), createdBy: accountRefSchema,
  sealed: z.boolean(), sealedUntil: z.iso.date().nullable(), runs: z.int(),
});
export const phantomSummarySchema = z.object({
  id: idSchema, slug: slugSchema, name: z.string(), family: familyKeySchema, group: groupRefSchema,
  /** One line: '16 electrodes, adjacent pairs, difference data'. */
  line: z.string(),
  current: phantomVersionSummarySchema,
});
export type PhantomSummary = z.infer<typeof phantomSummarySchema>;
export const phantomListSchema = z.object({ items: z.array(phantomSummarySchema), nextCursor: z.string().nullable() });

export const phantomVersionDetailSchema = phantomVersionSummarySchema.extend({
  name: z.string(), description: z.string(), licence: licenceSchema,
  /** The definition; `truth` is null while sealed and the reader may not see it. */
  definition: readableDefinitionSchema,
  frames: z.object({ sha256: hashSchema, frames: z.int(), valuesPerFrame: z.int(), origin: z.enum(['tank', 'living']), instrument: z.string() }).nullable(),
  checks: z.array(checkResultSchema),
  modelErrorFloor: z.number().nullable(),
  /** Reviewer's words so far, newest first. */
  verdicts: z.array(z.object({ verdict: z.enum(['publish', 'request-changes']), reason: z.string(), by: accountRefSchema, at: dateTimeSchema })),
  usedIn: z.array(z.object({ slug: slugSchema, id: idSchema, title: z.string() })),
  withdrawnReason: z.string().nullable(),
});
export type PhantomVersionDetail = z.infer<typeof phantomVersionDetailSchema>;
export const phantomDetailSchema = phantomSummarySchema.extend({
  versions: z.array(phantomVersionSummarySchema), version: phantomVersionDetailSchema,
  /** What the reader may do here. */
  may: z.object({ edit: z.boolean(), submit: z.boolean(), withdraw: z.boolean(), review: z.boolean(), newVersion: z.boolean() }),
});
export type PhantomDetail = z.infer<typeof phantomDetailSchema>;

/** GET /phantoms/:slug/versions/:n/best?noise=: runs on this version at a noise level, best first. */
export const phantomBestSchema = z.object({
  noise: z.number(), metric: z.string(), interpolated: z.boolean(),
  items: z.array(z.object({
    run: idSchema, solver: z.object({ slug: slugSchema, id: idSchema, name: z.string() }), group: groupRefSchema, glyph: z.int(),
    median: z.number(), p05: z.number(), p95: z.number(), review: z.enum(reviewStates), reservation: z.string().nullable(),
  })),
});
