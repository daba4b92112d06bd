import { defineEntity, p, type InferEntity } from '@mikro-orm/core';
import type { Configuration } from '../../shared/contracts/solvers';
import { solverStates } from '../../shared/domain/states';
import { baseProperties, timestamps } from './base.ts';
import { GroupEntity } from './group.ts';
import { UserEntity } from './user.ts';

export interface SolverDeclaration {
  readonly notTuned: boolean;
  readonly ownMesh: boolean;
  readonly sourceMayBePublished: boolean;
}

export const SolverEntity = defineEntity({
  name: 'Solver',
  tableName: 'solver',
  properties: {
    /** 'SV-012'. */
    id: p.string().primary(),
    ...timestamps,
    slug: p.string(),
    name: p.string(),
    description: p.text(),
    group: () => p.manyToOne(GroupEntity).ref().index('solver_group_index'),
    /** Number in the order in which solvers were made: its mark on every page follows it (shared/domain/glyphs.ts). */
    glyph: p.integer().default(0),
    versions: () => p.oneToMany(SolverVersionEntity).mappedBy('solver').orderBy({ n: 'asc' }),
  },
  uniques: [{ name: 'solver_slug_unique', properties: ['slug'] }],
});
export type Solver = InferEntity<typeof SolverEntity>;

/** A registered version never changes: an edit is the next version. */
export const SolverVersionEntity = defineEntity({
  name: 'SolverVersion',
  tableName: 'solver_version',
  properties: {
    ...baseProperties,
    solver: () => p.manyToOne(SolverEntity).ref(),
    n: p.integer(),
    state: p.enum([...solverStates]).index('solver_version_state_index'),
    /** Key of the method, for filters; the same as in `configuration`. */
    method: p.string().index('solver_version_method_index'),
    configuration: p.json().$type<Configuration>(),
    declaration: p.json().$type<SolverDeclaration>(),
    /** SHA-256 of the canonical configuration. Two groups may register the same one. */
    contentHash: p.string().index('solver_version_content_hash_index'),
    whatChanged: p.string().default(''),
    createdBy: () => p.manyToOne(UserEntity).ref(),
    registeredAt: p.datetime().nullable(),
    withdrawnAt: p.datetime().nullable(),
    withdrawnReason: p.text().nullable(),
  },
  uniques: [
    { name: 'solver_version_number_unique', properties: ['solver', 'n'] },
    { name: 'solver_version_content_unique', properties: ['solver', 'contentHash'] },
  ],
});
export type SolverVersion = InferEntity<typeof SolverVersionEntity>;
