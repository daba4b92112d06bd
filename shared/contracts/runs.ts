import { z } from 'zod';
import { accountRefSchema, checkResultSchema, dateTimeSchema, groupRefSchema, gridSchema, hashSchema, idSchema, levelStatisticsSchema, reasonSchema, slugSchema, stabilitySheetSchema } from './common';
import { encodedArraySchema } from '../domain/array-encoding';
import { problemDescriptorSchema } from '../domain/phantom-definition';
import { axisSettingSchema } from '../domain/axes';
import { reviewStates, runStates, verdicts } from '../domain/states';
import { configurationSchema } from './solvers';
import { targetSchema } from './simulations';

/*
 * Routes: GET /runs, GET /runs/:id, /runs/:id/trials, /runs/:id/images, /runs/:id/replay, /runs/:id/sensitivity,
 * /runs/:id/comments (GET, POST), POST /runs/:id/verdicts (answers with the run), POST /runs/:id/review (take it: in
 * review by me) and DELETE /runs/:id/review (give it back), both answering with the run; POST /runs/:id/cancel and
 * /runs/:id/requeue; POST and GET /runs/:id/recomputations; GET /runs/:id/events (server-sent `progress` events with
 * `progressSchema`); downloads /runs/:id/table.csv and /runs/:id/trials.csv; GET /review, GET /review/count.
 */
export const runParamsSchema = z.strictObject({ id: idSchema });
export const runListQuerySchema = z.strictObject({
  state: z.enum(runStates).optional(), review: z.enum(reviewStates).optional(), bench: slugSchema.optional(), solver: slugSchema.optional(), phantom: slugSchema.optional(), group: slugSchema.optional(),
  cursor: z.string().max(200).optional(), limit: z.coerce.number<string>().int().min(1).max(100).default(50),
});
export const progressSchema = z.object({
  state: z.enum(runStates), done: z.int(), total: z.int(),
  /** Ladder levels finished, and the one being worked on. */
  levelsDone: z.int(), currentLevel: z.int().nullable(), secondsLeft: z.number().nullable(), failure: z.string().nullable(),
  /** Median of the ranking metric at each level finished so far. */
  medians: z.array(z.number().nullable()),
});
export type Progress = z.infer<typeof progressSchema>;
export const runSummarySchema = z.object({
  id: idSchema, state: z.enum(runStates), review: z.enum(reviewStates), reservation: z.string().nullable(),
  bench: z.object({ slug: slugSchema, id: idSchema, title: z.string() }),
  solver: z.object({ slug: slugSchema, id: idSchema, name: z.string(), version: z.int(), methodName: z.string() }), group: groupRefSchema, glyph: z.int(),
  phantom: z.object({ slug: slugSchema, id: idSchema, name: z.string(), version: z.int(), sealed: z.boolean(), sealedUntil: z.iso.date().nullable() }),
  createdAt: dateTimeSchema, finishedAt: dateTimeSchema.nullable(), submittedBy: accountRefSchema, progress: progressSchema, resultHash: hashSchema.nullable(),
});
export type RunSummary = z.infer<typeof runSummarySchema>;
export const runListSchema = z.object({ items: z.array(runSummarySchema), nextCursor: z.string().nullable() });

export const levelMomentsSchema = z.object({
  biasSquared: z.number().nullable(), variance: z.number().nullable(), meanSquaredError: z.number().nullable(),
  /** Draws that entered: those with a finite image. */
  draws: z.int(), reason: z.string().nullable(),
});
export type LevelMomentsWire = z.infer<typeof levelMomentsSchema>;
export const runDetailSchema = runSummarySchema.extend({
  noiseModel: z.string(), axis: axisSettingSchema, ladder: z.array(z.number()), draws: z.int(), seed: z.int(), rankingMetric: z.string(),
  noiseReference: z.string(), dataKind: z.string(), unit: z.string(), background: z.number(),
  modelErrorFloor: z.number(), grid: gridSchema,
  /** The problem that was inverted: family, acquisition, data kind, background. */
  problem: problemDescriptorSchema,
  /** By metric key: one row a level. */
  table: z.record(z.string(), z.array(levelStatisticsSchema)),
  /** Trivial reconstruction's value by metric. */
  trivial: z.record(z.string(), z.number().nullable()),
  sheets: z.record(z.string(), stabilitySheetSchema),
  /** By level: squared bias and variance of the image over draws, relative to ||truth - background||^2; they add up to the mean squared error. Null where not computed. */
  moments: z.array(levelMomentsSchema.nullable()),
  checks: z.array(checkResultSchema),
  secondsPerReconstruction: z.number().nullable(), timeRatio: z.number().nullable(),
  configuration: configurationSchema,
  provenance: z.array(z.object({ what: z.string(), detail: z.string(), hash: z.string().nullable() })),
  verdicts: z.array(z.object({ verdict: z.enum(verdicts), reason: z.string(), by: accountRefSchema, at: dateTimeSchema, inspected: z.array(z.string()) })),
  reviewer: accountRefSchema.nullable(), openQuestions: z.int(),
  may: z.object({ cancel: z.boolean(), recompute: z.boolean(), review: z.boolean(), comment: z.boolean(), requeue: z.boolean() }),
});
export type RunDetail = z.infer<typeof runDetailSchema>;

/** GET /runs/:id/trials?level=: all figures of every draw (level index optional). */
export const trialQuerySchema = z.strictObject({ level: z.coerce.number<string>().int().min(0).max(23).optional() });
export const trialSchema = z.object({
  level: z.int(), draw: z.int(), noiseNorm: z.number(), parameter: z.number().nullable(), iterations: z.int(), forwardSolves: z.int(), stop: z.string(),
  metrics: z.record(z.string(), z.number().nullable()), supAt: z.tuple([z.number(), z.number()]).nullable(), seconds: z.number().nullable(), imageHash: hashSchema, imageStored: z.boolean(),
});
export type TrialWire = z.infer<typeof trialSchema>;
export const trialListSchema = z.object({ items: z.array(trialSchema) });

/** GET /runs/:id/images?level=&draw=: stored for the median and the worst draw of each level, else recomputed. */
export const runImageQuerySchema = z.strictObject({
  level: z.coerce.number<string>().int().min(0).max(23), draw: z.union([z.literal('median'), z.literal('worst'), z.coerce.number<string>().int().min(0).max(199)]),
});
export const runImageSchema = z.object({
  level: z.int(), draw: z.int(), image: encodedArraySchema,
  /** Null while the ground truth is sealed for the reader. */
  truth: encodedArraySchema.nullable(), imageHash: hashSchema, stored: z.boolean(), trial: trialSchema,
});
export type RunImage = z.infer<typeof runImageSchema>;

/** GET /runs/:id/replay: all that is needed to recompute the run elsewhere with the same code. */
export const replaySchema = z.object({
  run: idSchema, phantomHash: hashSchema, problem: problemDescriptorSchema,
  configuration: configurationSchema, noiseModel: z.string(), axis: axisSettingSchema,
  /** On another axis than the noise: the data of each level, and the indices of the data that are left. */
  cases: z.array(z.object({ clean: encodedArraySchema, noiseScale: z.number(), rows: z.array(z.int()).nullable() })).nullable(),
  ladder: z.array(z.number()), draws: z.int(), seed: z.int(), noiseScale: z.number(), clean: encodedArraySchema,
  truth: encodedArraySchema.nullable(), targets: z.array(targetSchema).nullable(),
  trials: z.array(z.object({ level: z.int(), draw: z.int(), imageHash: hashSchema })), resultHash: hashSchema.nullable(),
});
export type Replay = z.infer<typeof replaySchema>;

/** POST /runs/:id/recomputations; GET gives the newest. */
export const recomputationSchema = z.object({
  id: idSchema, state: z.enum(['queued', 'running', 'finished', 'failed']), requestedBy: accountRefSchema, at: dateTimeSchema,
  done: z.int(), total: z.int(), equal: z.boolean().nullable(), resultHash: hashSchema.nullable(), failure: z.string().nullable(),
  firstDifference: z.object({ level: z.int(), draw: z.int() }).nullable(),
});
export type Recomputation = z.infer<typeof recomputationSchema>;

/** GET /runs/:id/sensitivity?level=: error against the regularisation parameter at one draw, and the rule's choices over all. */
export const sensitivityQuerySchema = z.strictObject({ level: z.coerce.number<string>().int().min(0).max(23) });
export const sensitivitySchema = z.object({
  level: z.number(), draw: z.int(), parameterName: z.string(), parameters: z.array(z.number()), errors: z.array(z.number()),
  choices: z.array(z.object({ draw: z.int(), parameter: z.number(), error: z.number().nullable() })),
  oracle: z.object({ parameter: z.number(), error: z.number() }),
  /** |u_i^T y| and sigma_i of the same draw. */
  picard: z.object({ singularValues: z.array(z.number()), coefficients: z.array(z.number()), noisePerCoefficient: z.number(), crossing: z.int().nullable() }).nullable(),
});
export type Sensitivity = z.infer<typeof sensitivitySchema>;

export const commentCreateSchema = z.strictObject({
  text: z.string().trim().min(1, 'Write something.').max(5000),
  /** What the note is about: a cell of the table, a check, or the run as a whole. */
  anchor: z.string().trim().max(120).default(''), question: z.boolean().default(false),
});
export const commentSchema = z.object({ id: idSchema, by: accountRefSchema, at: dateTimeSchema, text: z.string(), anchor: z.string(), question: z.boolean(), answered: z.boolean() });
export const commentListSchema = z.object({ items: z.array(commentSchema) });
export const verdictCreateSchema = z.strictObject({
  verdict: z.enum(verdicts), reason: reasonSchema, inspected: z.array(z.enum(['table', 'images', 'checks', 'provenance'])).max(4),
}).refine((v) => v.inspected.length === 4, { path: ['inspected'], message: 'Inspect the table, the images, the checks and the provenance first.' });

/** GET /review: runs and phantom versions that wait, oldest first. */
export const reviewQueueSchema = z.object({
  runs: z.array(runSummarySchema.extend({
    axis: axisSettingSchema, checks: z.array(checkResultSchema), modelErrorFloor: z.number(),
    /** The ranking metric over the draws of each ladder level, its trivial value, and how many draws lie beyond 3 sd at each level. */
    metric: z.string(), levels: z.array(z.object({ level: z.number(), median: z.number().nullable(), p05: z.number().nullable(), p95: z.number().nullable(), outliers: z.int() })), trivial: z.number().nullable(),
    /** Best median of the same bench and phantom at each level, for 'to best on bench'. */
    best: z.array(z.number().nullable()),
    waitingDays: z.number(), mayReview: z.boolean(), reviewer: accountRefSchema.nullable(), waitsFor: z.enum(['reviewer', 'developer']), lastNote: z.object({ by: accountRefSchema, at: dateTimeSchema, text: z.string() }).nullable(), flags: z.array(z.string()),
  })),
  phantoms: z.array(z.object({ slug: slugSchema, id: idSchema, name: z.string(), version: z.int(), group: groupRefSchema, submittedAt: dateTimeSchema, submittedBy: accountRefSchema, waitingDays: z.number(), mayReview: z.boolean(), checks: z.array(checkResultSchema) })),
});
export type ReviewQueue = z.infer<typeof reviewQueueSchema>;
export const reviewCountSchema = z.object({ waiting: z.int() });
