import { defineEntity, p, type InferEntity } from '@mikro-orm/core';
import type { AxisSetting } from '../../shared/domain/axes';
import { familyKeys } from '../../shared/domain/families';
import { benchStates } from '../../shared/domain/states';
import type { Target } from '../../solvers/core/types';
import { baseProperties, timestamps } from './base.ts';
import { GroupEntity } from './group.ts';
import { PhantomVersionEntity } from './phantom.ts';
import { SolverVersionEntity } from './solver.ts';
import { UserEntity } from './user.ts';

/** A fixed question: phantom versions, ladder, draws and seed do not change once it is open. */
export const BenchEntity = defineEntity({
  name: 'Bench',
  tableName: 'bench',
  properties: {
    /** 'BN-003'. */
    id: p.string().primary(),
    ...timestamps,
    slug: p.string(),
    title: p.string(),
    question: p.string(),
    description: p.text(),
    family: p.enum([...familyKeys]),
    group: () => p.manyToOne(GroupEntity).ref().index('bench_group_index'),
    createdBy: () => p.manyToOne(UserEntity).ref(),
    /** Levels of the axis, ascending: relative noise levels as fractions, where the axis is the noise. */
    ladder: p.json().$type<number[]>(),
    draws: p.integer(),
    /** 0 to 4 294 967 295. */
    seed: p.integer(),
    rankingMetric: p.string(),
    state: p.enum([...benchStates]).index('bench_state_index'),
    /** Grows with every entry, so that a cached ranking can tell that it is stale. */
    revision: p.integer().default(1),
    contentHash: p.string(),
    openedAt: p.datetime().nullable(),
    closedAt: p.datetime().nullable(),
    /** What the levels of the ladder vary. */
    axis: p.json().$type<AxisSetting>(),
    /** Key of a noise model. */
    noiseModel: p.string().default('gaussian'),
    phantoms: () => p.oneToMany(BenchPhantomEntity).mappedBy('bench').orderBy({ position: 'asc' }),
    entries: () => p.oneToMany(EntryEntity).mappedBy('bench').orderBy({ place: 'asc' }),
  },
  uniques: [{ name: 'bench_slug_unique', properties: ['slug'] }],
});
export type Bench = InferEntity<typeof BenchEntity>;

export const BenchPhantomEntity = defineEntity({
  name: 'BenchPhantom',
  tableName: 'bench_phantom',
  properties: {
    ...baseProperties,
    bench: () => p.manyToOne(BenchEntity).ref(),
    phantomVersion: () => p.manyToOne(PhantomVersionEntity).ref().index('bench_phantom_version_index'),
    position: p.integer(),
  },
  uniques: [
    { name: 'bench_phantom_unique', properties: ['bench', 'phantomVersion'] },
    { name: 'bench_phantom_position_unique', properties: ['bench', 'position'] },
  ],
});
export type BenchPhantom = InferEntity<typeof BenchPhantomEntity>;

/** One level of a bench whose axis is not the noise: the data of its own experiment, the same for every entry. */
export const AxisCaseEntity = defineEntity({
  name: 'AxisCase',
  tableName: 'axis_case',
  properties: {
    id: p.integer().primary().autoincrement(),
    bench: () => p.manyToOne(BenchEntity).ref(),
    phantomVersion: () => p.manyToOne(PhantomVersionEntity).ref().index('axis_case_phantom_version_index'),
    /** Index in the ladder, from 0. */
    level: p.integer(),
    noiseScale: p.float().$type<number>(),
    /** Indices of the data that are left; null for all. */
    rows: p.json().$type<number[]>().nullable(),
    /** Targets with the contrast of the level. */
    targets: p.json().$type<Target[]>(),
    /** Little-endian Float64: clean data, and the ground truth on the inside pixels. */
    clean: p.blob().lazy().hidden(),
    truthImage: p.blob().lazy().hidden(),
  },
  uniques: [{ name: 'axis_case_level_unique', properties: ['bench', 'phantomVersion', 'level'] }],
});
export type AxisCaseRow = InferEntity<typeof AxisCaseEntity>;

export const EntryEntity = defineEntity({
  name: 'Entry',
  tableName: 'entry',
  properties: {
    ...baseProperties,
    bench: () => p.manyToOne(BenchEntity).ref(),
    solverVersion: () => p.manyToOne(SolverVersionEntity).ref().index('entry_solver_version_index'),
    /** Order of entry, from 0; the column has the name of what it first stood for. */
    place: p.integer().fieldName('glyph'),
    createdBy: () => p.manyToOne(UserEntity).ref(),
  },
  uniques: [
    { name: 'entry_bench_solver_unique', properties: ['bench', 'solverVersion'] },
    { name: 'entry_bench_glyph_unique', properties: ['bench', 'place'] },
  ],
});
export type Entry = InferEntity<typeof EntryEntity>;
