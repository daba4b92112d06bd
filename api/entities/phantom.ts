import { defineEntity, p, type InferEntity } from '@mikro-orm/core';
import type { MeasuredFrames } from '../../shared/contracts/phantoms';
import type { licences } from '../../shared/contracts/common';
import { familyKeys } from '../../shared/domain/families';
import type { PhantomDefinition } from '../../shared/domain/phantom-definition';
import { phantomStates } from '../../shared/domain/states';
import { baseProperties, timestamps } from './base.ts';
import { GroupEntity } from './group.ts';
import { UserEntity } from './user.ts';

export type Licence = (typeof licences)[number];

export const PhantomEntity = defineEntity({
  name: 'Phantom',
  tableName: 'phantom',
  properties: {
    /** 'PH-031'. */
    id: p.string().primary(),
    ...timestamps,
    slug: p.string(),
    family: p.enum([...familyKeys]),
    group: () => p.manyToOne(GroupEntity).ref().index('phantom_group_index'),
    /** Name of the newest version, for lists and searches. */
    name: p.string(),
    versions: () => p.oneToMany(PhantomVersionEntity).mappedBy('phantom').orderBy({ n: 'asc' }),
  },
  uniques: [{ name: 'phantom_slug_unique', properties: ['slug'] }],
});
export type Phantom = InferEntity<typeof PhantomEntity>;

/** Content never changes once submitted: a correction is the next version. */
export const PhantomVersionEntity = defineEntity({
  name: 'PhantomVersion',
  tableName: 'phantom_version',
  properties: {
    ...baseProperties,
    phantom: () => p.manyToOne(PhantomEntity).ref(),
    n: p.integer(),
    state: p.enum([...phantomStates]).index('phantom_version_state_index'),
    name: p.string(),
    description: p.text(),
    licence: p.string().$type<Licence>(),
    definition: p.json().$type<PhantomDefinition>(),
    /** SHA-256 of the canonical definition: the key of its simulation. */
    definitionHash: p.string().index('phantom_version_definition_hash_index'),
    /** SHA-256 of the canonical definition together with the measured frames, where there are any. */
    contentHash: p.string(),
    whatChanged: p.string().default(''),
    frames: p.json().$type<MeasuredFrames>().nullable(),
    /** ISO day. Read with the clock: nothing has to run when the day comes. */
    sealedUntil: p.string().nullable(),
    createdBy: () => p.manyToOne(UserEntity).ref(),
    submittedBy: () => p.manyToOne(UserEntity).ref().nullable(),
    submittedAt: p.datetime().nullable(),
    publishedAt: p.datetime().nullable(),
    withdrawnAt: p.datetime().nullable(),
    withdrawnReason: p.text().nullable(),
    verdicts: () => p.oneToMany(PhantomVerdictEntity).mappedBy('version').orderBy({ createdAt: 'desc' }),
  },
  uniques: [
    { name: 'phantom_version_number_unique', properties: ['phantom', 'n'] },
    { name: 'phantom_version_content_unique', properties: ['contentHash'] },
  ],
});
export type PhantomVersion = InferEntity<typeof PhantomVersionEntity>;

export const phantomVerdicts = ['publish', 'request-changes'] as const;

export const PhantomVerdictEntity = defineEntity({
  name: 'PhantomVerdict',
  tableName: 'phantom_verdict',
  properties: {
    ...baseProperties,
    version: () => p.manyToOne(PhantomVersionEntity).ref().index('phantom_verdict_version_index'),
    verdict: p.enum([...phantomVerdicts]),
    reason: p.text(),
    by: () => p.manyToOne(UserEntity).ref(),
  },
});
export type PhantomVerdict = InferEntity<typeof PhantomVerdictEntity>;
