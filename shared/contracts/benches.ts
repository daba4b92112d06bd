import { z } from 'zod';
import { dateTimeSchema, familyKeySchema, groupRefSchema, hashSchema, idSchema, levelStatisticsSchema, markdownSchema, slugSchema, stabilitySheetSchema } from './common';
import { benchStates, reviewStates, runStates } from '../domain/states';
import { defaultDraws, defaultLadder } from '../domain/ladder';

export const benchStateSchema = z.enum(benchStates);
export const metricKeySchema = z.string().regex(/^[a-z0-9-]{1,60}$/);
export const ladderSchema = z.array(z.number().min(1e-8).max(1)).min(1).max(24)
  .refine((levels) => levels.every((level, i) => i === 0 || level > levels[i - 1]!), 'Levels must increase.');
export const benchCreateSchema = z.strictObject({
  group: slugSchema,
  /** The short name in lists. */
  title: z.string().trim().min(3).max(80),
  /** The question the bench answers, a sentence. */
  question: z.string().trim().min(10).max(200),
  description: markdownSchema.default(''),
  phantoms: z.array(z.strictObject({ slug: slugSchema, version: z.int().min(1) })).min(1).max(50),
  ladder: ladderSchema.default([...defaultLadder]), draws: z.int().min(1).max(200).default(defaultDraws),
  seed: z.int().min(0).max(4_294_967_295), rankingMetric: metricKeySchema.default('relative-l2-error'),
});
export type BenchCreate = z.input<typeof benchCreateSchema>;
/** PUT /benches/:slug, while it is a draft. */
export const benchUpdateSchema = benchCreateSchema.omit({ group: true });
export type BenchUpdate = z.input<typeof benchUpdateSchema>;
export const benchParamsSchema = z.strictObject({ slug: slugSchema });
export const benchListQuerySchema = z.strictObject({
  q: z.string().max(100).optional(), state: benchStateSchema.optional(), family: familyKeySchema.optional(), group: slugSchema.optional(),
  cursor: z.string().max(200).optional(), limit: z.coerce.number<string>().int().min(1).max(100).default(50),
});
/** POST /benches/:slug/entries answers with the bench. */
export const entryCreateSchema = z.strictObject({ solver: slugSchema, version: z.int().min(1) });
export const costQuerySchema = z.strictObject({ method: z.string().max(60) });
/** GET /benches/:slug/cost?method=...: what an entry will take, from runs of the same method here and elsewhere. */
export const costEstimateSchema = z.object({
  reconstructions: z.int(), processorSeconds: z.number().nullable(), queuePosition: z.int(), readyAt: dateTimeSchema.nullable(), basis: z.string(),
});

export const benchSummarySchema = z.object({
  id: idSchema, slug: slugSchema, title: z.string(), question: z.string(), family: familyKeySchema, state: benchStateSchema, group: groupRefSchema,
  phantomCount: z.int(), entryCount: z.int(), runsFinished: z.int(), runsTotal: z.int(), createdAt: dateTimeSchema, closedAt: dateTimeSchema.nullable(),
});
export type BenchSummary = z.infer<typeof benchSummarySchema>;
export const benchListSchema = z.object({ items: z.array(benchSummarySchema), nextCursor: z.string().nullable() });

export const benchPhantomSchema = z.object({
  slug: slugSchema, id: idSchema, name: z.string(), version: z.int(), contentHash: hashSchema, sealed: z.boolean(), sealedUntil: z.iso.date().nullable(),
  modelErrorFloor: z.number(), line: z.string(), noiseReference: z.string(), dataKind: z.string(),
});
export const benchEntrySchema = z.object({
  /** Stable index of the entry in the bench: colour and marker follow it. */
  glyph: z.int(),
  solver: z.object({ slug: slugSchema, id: idSchema, name: z.string(), version: z.int(), methodName: z.string() }), group: groupRefSchema,
  runs: z.array(z.object({ run: idSchema, phantom: slugSchema, state: z.enum(runStates), review: z.enum(reviewStates), done: z.int(), total: z.int(), failure: z.string().nullable() })),
});
export const benchDetailSchema = benchSummarySchema.extend({
  description: z.string(), ladder: z.array(z.number()), draws: z.int(), seed: z.int(), rankingMetric: metricKeySchema, revision: z.int(), contentHash: hashSchema,
  phantoms: z.array(benchPhantomSchema), entries: z.array(benchEntrySchema),
  /** Largest model-error floor of the phantoms, and whose it is. */
  modelErrorFloor: z.number(), floorPhantom: z.string().nullable(),
  may: z.object({ edit: z.boolean(), open: z.boolean(), close: z.boolean(), enter: z.boolean() }),
});
export type BenchDetail = z.infer<typeof benchDetailSchema>;

export const rankingQuerySchema = z.strictObject({ noise: z.coerce.number<string>().min(1e-8).max(1).default(0.01), metric: metricKeySchema.optional() });
/** GET /benches/:slug/ranking?noise=&metric= */
export const rankingSchema = z.object({
  noise: z.number(), metric: metricKeySchema, interpolated: z.boolean(),
  /** Nearest ladder level: pairs, wins and images are of this level. */
  level: z.number(), belowFloor: z.boolean(),
  rows: z.array(z.object({
    glyph: z.int(), solver: z.object({ slug: slugSchema, id: idSchema, name: z.string(), version: z.int() }), group: groupRefSchema,
    /** Rank shared by a tie group; null below the floor or where runs are missing. */
    rank: z.int().nullable(), tieGroup: z.int().nullable(), meanRank: z.number().nullable(),
    /** Of the ranking metric over all phantoms and draws. */
    median: z.number().nullable(), p05: z.number().nullable(), p95: z.number().nullable(),
    /** Medians of every metric at this noise, by key. */
    medians: z.record(z.string(), z.number().nullable()),
    breakdown: z.number().nullable(), breakdownNote: z.enum(['beyond', 'throughout']).nullable(),
    exponent: z.number().nullable(),
    secondsPerReconstruction: z.number().nullable(), timeRatio: z.number().nullable(),
    review: z.enum(reviewStates), reservations: z.array(z.string()),
    runs: z.array(z.object({ run: idSchema, phantom: slugSchema, state: z.enum(runStates), review: z.enum(reviewStates) })),
    complete: z.boolean(),
  })),
  /** The trivial reconstruction's figure, the baseline. */
  trivial: z.number().nullable(),
  test: z.object({
    /** 'Friedman with Nemenyi distance over n paired draws', or why there is none. */
    name: z.string(), blocks: z.int(), phantoms: z.int(), statistic: z.number().nullable(), pValue: z.number().nullable(), criticalDifference: z.number().nullable(),
    separable: z.boolean(), words: z.string(),
  }),
  /** Share of paired draws that the row's solver wins against the column's, rows and columns in row order. */
  wins: z.array(z.array(z.number().nullable())),
});
export type Ranking = z.infer<typeof rankingSchema>;

export const seriesQuerySchema = z.strictObject({ metric: metricKeySchema.optional(), phantom: slugSchema.optional() });
/** GET /benches/:slug/series?metric=: the stability chart, over all phantoms or one. */
export const seriesSchema = z.object({
  metric: metricKeySchema, ladder: z.array(z.number()), trivial: z.number().nullable(), modelErrorFloor: z.number(),
  items: z.array(z.object({
    glyph: z.int(), solver: z.object({ slug: slugSchema, id: idSchema, name: z.string(), version: z.int() }), group: groupRefSchema,
    levels: z.array(levelStatisticsSchema.omit({ draws: true })), sheet: stabilitySheetSchema,
  })),
});
export type Series = z.infer<typeof seriesSchema>;

/** GET /benches/:slug/citation: how to cite the bench as it stands. */
export const citationSchema = z.object({ bibtex: z.string(), plain: z.string(), contentHash: hashSchema, revision: z.int(), caution: z.array(z.string()) });
export type Citation = z.infer<typeof citationSchema>;
