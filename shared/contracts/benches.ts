import { z } from 'zod';
import { dateTimeSchema, familyKeySchema, groupRefSchema, hashSchema, idSchema, levelStatisticsSchema, markdownSchema, slugSchema, stabilitySheetSchema } from './common';
import { axisSettingSchema, levelsFault, type AxisSetting } from '../domain/axes';
import { benchStates, reviewStates, runStates } from '../domain/states';
import { defaultDraws, defaultLadder } from '../domain/ladder';

export const benchStateSchema = z.enum(benchStates);
export const metricKeySchema = z.string().regex(/^[a-z0-9-]{1,60}$/);
/** Levels of the axis, ascending; each axis has its own range. */
export const ladderSchema = z.array(z.number().min(1e-8).max(10)).min(1).max(24)
  .refine((levels) => levels.every((level, i) => i === 0 || level > levels[i - 1]!), 'Levels must increase.');
const benchTerms = z.strictObject({
  group: slugSchema,
  /** The short name in lists. */
  title: z.string().trim().min(3).max(80),
  /** The question the bench answers, a sentence. */
  question: z.string().trim().min(10).max(200),
  description: markdownSchema.default(''),
  phantoms: z.array(z.strictObject({ slug: slugSchema, version: z.int().min(1) })).min(1).max(50),
  /** Key of a noise model that the family of the phantoms has. */
  noiseModel: z.string().max(60).default('gaussian'), axis: axisSettingSchema.default({ key: 'noise' }),
  ladder: ladderSchema.default([...defaultLadder]), draws: z.int().min(1).max(200).default(defaultDraws),
  seed: z.int().min(0).max(4_294_967_295), rankingMetric: metricKeySchema.default('relative-l2-error'),
});
const levelsInRange = (bench: { axis: AxisSetting; ladder: number[] }, ctx: z.RefinementCtx): void => {
  const fault = levelsFault(bench.axis.key, bench.ladder);
  if (fault) ctx.addIssue({ code: 'custom', path: ['ladder'], message: fault });
};
export const benchCreateSchema = benchTerms.superRefine(levelsInRange);
export type BenchCreate = z.input<typeof benchCreateSchema>;
/** PUT /benches/:slug, while it is a draft. */
export const benchUpdateSchema = benchTerms.omit({ group: true }).superRefine(levelsInRange);
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
  id: idSchema, slug: slugSchema, title: z.string(), question: z.string(), family: familyKeySchema, axis: axisSettingSchema, state: benchStateSchema, group: groupRefSchema,
  phantomCount: z.int(), entryCount: z.int(), runsFinished: z.int(), runsTotal: z.int(), createdAt: dateTimeSchema, closedAt: dateTimeSchema.nullable(),
});
export type BenchSummary = z.infer<typeof benchSummarySchema>;
export const benchListSchema = z.object({ items: z.array(benchSummarySchema), nextCursor: z.string().nullable() });

export const benchPhantomSchema = z.object({
  slug: slugSchema, id: idSchema, name: z.string(), version: z.int(), contentHash: hashSchema, sealed: z.boolean(), sealedUntil: z.iso.date().nullable(),
  modelErrorFloor: z.number(), line: z.string(), noiseReference: z.string(), dataKind: z.string(),
});
export const benchEntrySchema = z.object({
  /** Mark of the solver (shared/domain/glyphs.ts); its colour gives way where another entry of the bench has it. */
  glyph: z.int(),
  solver: z.object({ slug: slugSchema, id: idSchema, name: z.string(), version: z.int(), methodName: z.string() }), group: groupRefSchema,
  runs: z.array(z.object({ run: idSchema, phantom: slugSchema, state: z.enum(runStates), review: z.enum(reviewStates), done: z.int(), total: z.int(), failure: z.string().nullable() })),
});
export const benchDetailSchema = benchSummarySchema.extend({
  description: z.string(), noiseModel: z.string(), ladder: z.array(z.number()), draws: z.int(), seed: z.int(), rankingMetric: metricKeySchema, revision: z.int(), contentHash: hashSchema,
  phantoms: z.array(benchPhantomSchema), entries: z.array(benchEntrySchema),
  /** Largest model-error floor of the phantoms, and whose it is. */
  modelErrorFloor: z.number(), floorPhantom: z.string().nullable(),
  may: z.object({ edit: z.boolean(), open: z.boolean(), close: z.boolean(), enter: z.boolean() }),
});
export type BenchDetail = z.infer<typeof benchDetailSchema>;

/** What a phantom's figure is: the median over draws at the level nearest to the noise, or the mean of the medians over the ladder above the model-error floor. */
export const rankedOver = ['level', 'ladder'] as const;
export const rankingQuerySchema = z.strictObject({ noise: z.coerce.number<string>().min(1e-8).max(10).default(0.01), metric: metricKeySchema.optional(), over: z.enum(rankedOver).default('level') });
/** Friedman's test with Nemenyi's distance over blocks. */
export const separationTestSchema = z.object({
  /** 'Friedman with Nemenyi distance over n phantoms', or 'No test'. */
  name: z.string(), blocks: z.int(),
  /** Blocks with which the tests can reach 5 % at all; below it `enough` is false, and no winner is named. */
  fewest: z.int().nullable(), enough: z.boolean(),
  chiSquare: z.number().nullable(),
  /** F of Iman and Davenport; null where it is infinite or there is no test. */
  statistic: z.number().nullable(), pValue: z.number().nullable(),
  /** p is counted over all orders, not approximated by F. */
  exact: z.boolean(), criticalDifference: z.number().nullable(), separable: z.boolean(), words: z.string(),
});
export type SeparationTestWire = z.infer<typeof separationTestSchema>;
/** GET /benches/:slug/ranking?noise=&metric=&over= */
export const rankingSchema = z.object({
  noise: z.number(), metric: metricKeySchema, interpolated: z.boolean(),
  /** Nearest ladder level: pairs, wins and images are of this level. */
  level: z.number(), belowFloor: z.boolean(),
  /** Ranks are over these levels; figures are at the noise. */
  over: z.enum(rankedOver), levels: z.array(z.number()),
  rows: z.array(z.object({
    glyph: z.int(), solver: z.object({ slug: slugSchema, id: idSchema, name: z.string(), version: z.int() }), group: groupRefSchema,
    /** Rank shared by a tie group; null below the floor, where runs are missing, or where the phantoms are too few for a winner. Mean ranks are over phantoms. */
    rank: z.int().nullable(), tieGroup: z.int().nullable(), meanRank: z.number().nullable(),
    /** Of the ranking metric over all phantoms and draws. */
    median: z.number().nullable(), p05: z.number().nullable(), p95: z.number().nullable(),
    /** Medians of every metric at this noise, by key. */
    medians: z.record(z.string(), z.number().nullable()),
    breakdown: z.number().nullable(), breakdownNote: z.enum(['beyond', 'throughout']).nullable(),
    exponent: z.number().nullable(),
    secondsPerReconstruction: z.number().nullable(), timeRatio: z.number().nullable(),
    /** On the front of median error and time; null where either is unknown. And the place of a row that is at least as good in both. */
    onFront: z.boolean().nullable(), dominatedBy: z.int().nullable(),
    review: z.enum(reviewStates), reservations: z.array(z.string()),
    runs: z.array(z.object({ run: idSchema, phantom: slugSchema, state: z.enum(runStates), review: z.enum(reviewStates) })),
    complete: z.boolean(),
  })),
  /** The trivial reconstruction's figure, the baseline. */
  trivial: z.number().nullable(),
  /** Blocks are phantoms. */
  test: separationTestSchema,
  /** Share of paired draws, over all phantoms, that the row's solver wins against the column's, rows and columns in row order. */
  wins: z.array(z.array(z.number().nullable())),
});
export type Ranking = z.infer<typeof rankingSchema>;

/** One run a phantom is a block; with `phantom` its draws are the blocks, and the result speaks about that phantom only. */
export const comparisonQuerySchema = rankingQuerySchema.extend({ phantom: slugSchema.optional() });
/** GET /benches/:slug/comparison?noise=&metric=&over=&phantom= */
export const comparisonSchema = z.object({
  noise: z.number(), metric: metricKeySchema, over: z.enum(rankedOver), level: z.number(), levels: z.array(z.number()), belowFloor: z.boolean(),
  blocks: z.enum(['phantoms', 'draws']), phantom: z.object({ slug: slugSchema, name: z.string() }).nullable(),
  /** Complete entries, best first: the order of the ranking. Pairs and profiles name them by their place here. */
  solvers: z.array(z.object({
    glyph: z.int(), solver: z.object({ slug: slugSchema, id: idSchema, name: z.string(), version: z.int() }), meanRank: z.number().nullable(), tieGroup: z.int().nullable(),
  })),
  test: separationTestSchema,
  /** Signed ranks of Wilcoxon with Holm's correction over all pairs. */
  pairs: z.array(z.object({
    first: z.int(), second: z.int(),
    /** Share of the blocks that the first wins; a tie is half a win. */
    wins: z.number(), pValue: z.number(), pHolm: z.number(), separable: z.boolean(),
    /** First error over second, geometric mean over phantoms of the ratio of medians; 95 % by a paired bootstrap over phantoms and draws. */
    ratio: z.object({ value: z.number(), low: z.number(), high: z.number(), firstBetter: z.number(), separable: z.boolean() }).nullable(), reason: z.string().nullable(),
  })),
  /** Blocks that a pair needs so that its corrected p can reach 5 %; `pairWords` says whether there are as many. */
  fewestPairs: z.int(), pairWords: z.string(), resamples: z.int(),
  /** Over every phantom and level above the floor; ascending ratios to the best. Null within one phantom, and for scores. */
  profile: z.object({ problems: z.int(), unsolved: z.int(), items: z.array(z.object({ solver: z.int(), ratios: z.array(z.number()) })) }).nullable(),
  profileWords: z.string(),
});
export type BenchComparison = z.infer<typeof comparisonSchema>;

export const seriesQuerySchema = z.strictObject({ metric: metricKeySchema.optional(), phantom: slugSchema.optional() });
/** GET /benches/:slug/series?metric=: the stability chart, over all phantoms or one. */
export const seriesSchema = z.object({
  metric: metricKeySchema, axis: axisSettingSchema, ladder: z.array(z.number()), trivial: z.number().nullable(), modelErrorFloor: z.number(),
  items: z.array(z.object({
    glyph: z.int(), solver: z.object({ slug: slugSchema, id: idSchema, name: z.string(), version: z.int() }), group: groupRefSchema,
    levels: z.array(levelStatisticsSchema.omit({ draws: true })), sheet: stabilitySheetSchema,
  })),
});
export type Series = z.infer<typeof seriesSchema>;

/** GET /benches/:slug/citation: how to cite the bench as it stands. */
export const citationSchema = z.object({ bibtex: z.string(), plain: z.string(), contentHash: hashSchema, revision: z.int(), caution: z.array(z.string()) });
export type Citation = z.infer<typeof citationSchema>;
