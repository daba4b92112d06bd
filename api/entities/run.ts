import { defineEntity, p, type InferEntity } from '@mikro-orm/core';
import type { AxisSetting } from '../../shared/domain/axes';
import type { CheckResultWire } from '../../shared/contracts/common';
import type { Configuration } from '../../shared/contracts/solvers';
import { reviewStates, runStates } from '../../shared/domain/states';
import type { LevelMoments } from '../../solvers/campaign/level-moments';
import { baseProperties, timestamps } from './base.ts';
import { EntryEntity } from './bench.ts';
import { PhantomVersionEntity } from './phantom.ts';
import { UserEntity } from './user.ts';

/** One solver version on one phantom version over the whole ladder, with all that is needed to replay it. */
export const RunEntity = defineEntity({
  name: 'Run',
  tableName: 'run',
  properties: {
    /** 'RN-0123'. */
    id: p.string().primary(),
    ...timestamps,
    entry: () => p.manyToOne(EntryEntity).ref(),
    phantomVersion: () => p.manyToOne(PhantomVersionEntity).ref().index('run_phantom_version_index'),
    submittedBy: () => p.manyToOne(UserEntity).ref(),
    state: p.enum([...runStates]),
    review: p.enum([...reviewStates]).index('run_review_index'),
    /** The words of a sign-off with a reservation, shown beside every figure. */
    reservation: p.text().nullable(),
    /** Who took it up for review. */
    reviewer: () => p.manyToOne(UserEntity).ref().nullable(),
    // Copies of what decides the result, so that the run can be replayed whatever happens to the rest.
    configuration: p.json().$type<Configuration>(),
    ladder: p.json().$type<number[]>(),
    draws: p.integer(),
    seed: p.integer(),
    /** Phantom content hash: with the seed, the key of every noise draw. */
    phantomHash: p.string(),
    /** Of the code that computed it; set when it starts. */
    codeVersion: p.string().nullable(),
    /** Higher goes first. */
    priority: p.integer(),
    attempts: p.integer().default(0),
    done: p.integer().default(0),
    total: p.integer(),
    /** Median of the ranking metric at each level finished so far. */
    levelMedians: p.json().$type<(number | null)[]>(),
    failure: p.text().nullable(),
    queuedAt: p.datetime(),
    startedAt: p.datetime().nullable(),
    heartbeatAt: p.datetime().nullable(),
    finishedAt: p.datetime().nullable(),
    /** SHA-256 over the image hashes of all trials, in order. */
    resultHash: p.string().nullable().index('run_result_hash_index'),
    secondsPerReconstruction: p.float().$type<number>().nullable(),
    /** Seconds per reconstruction over those of truncated SVD timed in the same worker. */
    timeRatio: p.float().$type<number>().nullable(),
    checks: p.json().$type<CheckResultWire[]>().nullable(),
    /** Figures of the trivial reconstruction (the background), by metric key. */
    trivial: p.json().$type<Record<string, number | null>>().nullable(),
    /** Bias and variance of the image by level; null for levels that are not complete, and for runs older than this. */
    levelMoments: p.json().$type<(LevelMoments | null)[]>().nullable(),
    /** Copy of the bench's; null in runs older than other axes: the noise. */
    axis: p.json().$type<AxisSetting>().nullable(),
    /** Copy of the bench's. */
    noiseModel: p.string().default('gaussian'),
    trials: () => p.oneToMany(TrialEntity).mappedBy('run'),
    verdicts: () => p.oneToMany(VerdictEntity).mappedBy('run').orderBy({ createdAt: 'desc' }),
  },
  uniques: [{ name: 'run_entry_phantom_unique', properties: ['entry', 'phantomVersion'] }],
  indexes: [{ name: 'run_queue_index', properties: ['state', 'priority', 'queuedAt'] }],
});
export type Run = InferEntity<typeof RunEntity>;

/** One draw of a run. */
export const TrialEntity = defineEntity({
  name: 'Trial',
  tableName: 'trial',
  properties: {
    id: p.integer().primary().autoincrement(),
    run: () => p.manyToOne(RunEntity).ref(),
    /** Index in the ladder, from 0. */
    level: p.integer(),
    draw: p.integer(),
    /** By metric key; null where undefined. */
    metrics: p.json().$type<Record<string, number | null>>(),
    /** Why a metric is undefined, by metric key. */
    reasons: p.json().$type<Record<string, string>>().nullable(),
    /** Where the largest error sits, m. */
    supAt: p.json().$type<[number, number]>().nullable(),
    parameter: p.float().$type<number>().nullable(),
    iterations: p.integer(),
    forwardSolves: p.integer(),
    stop: p.string(),
    noiseNorm: p.float().$type<number>(),
    seconds: p.float().$type<number>().nullable(),
    /** SHA-256 of the image's little-endian Float64 values. */
    imageHash: p.string(),
  },
  uniques: [{ name: 'trial_draw_unique', properties: ['run', 'level', 'draw'] }],
});
export type Trial = InferEntity<typeof TrialEntity>;

/** Images of the median and the worst draw of each level; the others are recomputed on demand. */
export const RunImageEntity = defineEntity({
  name: 'RunImage',
  tableName: 'run_image',
  properties: {
    id: p.integer().primary().autoincrement(),
    run: () => p.manyToOne(RunEntity).ref(),
    level: p.integer(),
    draw: p.integer(),
    /** Little-endian Float64 on the inside pixels of the evaluation grid. */
    values: p.blob().lazy().hidden(),
  },
  uniques: [{ name: 'run_image_draw_unique', properties: ['run', 'level', 'draw'] }],
});
export type RunImage = InferEntity<typeof RunImageEntity>;

/** A reviewer's word on a run. Never edited. */
export const VerdictEntity = defineEntity({
  name: 'Verdict',
  tableName: 'verdict',
  properties: {
    ...baseProperties,
    run: () => p.manyToOne(RunEntity).ref().index('verdict_run_index'),
    verdict: p.enum(['signed-off', 'signed-off-with-reservation', 'returned', 'declined']),
    reason: p.text(),
    /** What the reviewer says to have inspected. */
    inspected: p.json().$type<string[]>(),
    by: () => p.manyToOne(UserEntity).ref(),
  },
});
export type VerdictRow = InferEntity<typeof VerdictEntity>;

export const CommentEntity = defineEntity({
  name: 'Comment',
  tableName: 'comment',
  properties: {
    ...baseProperties,
    run: () => p.manyToOne(RunEntity).ref().index('comment_run_index'),
    by: () => p.manyToOne(UserEntity).ref(),
    text: p.text(),
    /** What the note is about: a cell of the table, a check; empty for the run as a whole. */
    anchor: p.string().default(''),
    question: p.boolean().default(false),
    answered: p.boolean().default(false),
  },
});
export type Comment = InferEntity<typeof CommentEntity>;

export const recomputationStates = ['queued', 'running', 'finished', 'failed'] as const;

/** A run computed again, compared bit for bit with what is stored. */
export const RecomputationEntity = defineEntity({
  name: 'Recomputation',
  tableName: 'recomputation',
  properties: {
    ...baseProperties,
    run: () => p.manyToOne(RunEntity).ref().index('recomputation_run_index'),
    requestedBy: () => p.manyToOne(UserEntity).ref(),
    state: p.enum([...recomputationStates]).index('recomputation_state_index'),
    done: p.integer().default(0),
    total: p.integer(),
    codeVersion: p.string().nullable(),
    /** Null until it is finished. */
    equal: p.boolean().nullable(),
    resultHash: p.string().nullable(),
    firstDifference: p.json().$type<{ level: number; draw: number }>().nullable(),
    failure: p.text().nullable(),
    startedAt: p.datetime().nullable(),
    finishedAt: p.datetime().nullable(),
  },
});
export type Recomputation = InferEntity<typeof RecomputationEntity>;
