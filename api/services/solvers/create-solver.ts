import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { Configuration, solverCreateSchema, solverVersionCreateSchema } from '../../../shared/contracts/solvers';
import { AppError } from '../../../shared/errors.ts';
import { GroupEntity, type Group } from '../../entities/group.ts';
import { SolverEntity, SolverVersionEntity, type Solver } from '../../entities/solver.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { freeSlug, nextId } from '../identifiers.ts';
import { checkConfiguration, configurationHash } from './check-configuration.ts';
import type { LoadedSolver } from './find-solver.ts';

/**
 * A new configuration with its first version.
 * @throws AppError 'validation-failed' at the field at fault, 'duplicate' when the group has the same content already
 */
export async function createSolver(em: EntityManager, input: Acting & { readonly group: Group; readonly solver: z.output<typeof solverCreateSchema> }): Promise<string> {
  const { actor, now, group, solver: given } = input;
  const configuration = checkConfiguration(given.configuration);
  const hash = configurationHash(configuration);
  return em.transactional(async (inner) => {
    await refuseDuplicate(inner, group.id, hash);
    const solver = inner.create(SolverEntity, {
      id: await nextId(inner, 'solver'),
      slug: await freeSlug(given.name, async (slug) => slug === 'new' || (await inner.count(SolverEntity, { slug })) > 0),
      name: given.name,
      description: given.description,
      group: inner.getReference(GroupEntity, group.id),
      glyph: await nextGlyph(inner),
    });
    addVersion(inner, { ...input, solver, n: 1, configuration, hash, declaration: given.declaration, whatChanged: '', register: given.register });
    recordAudit(inner, {
      actor, at: now, action: given.register ? 'solver.registered' : 'solver.drafted', subject: { type: 'solver', id: solver.id }, groupId: group.id,
      after: { name: given.name, version: 1, contentHash: hash }, requestId: input.requestId,
    });
    await inner.flush();
    return solver.slug;
  });
}

/** Marks are given in order: as long as there are no more than eight solvers, every one has a shape and a colour of its own. */
async function nextGlyph(em: EntityManager): Promise<number> {
  const [last] = await em.find(SolverEntity, {}, { orderBy: { glyph: 'desc' }, limit: 1 });
  return last ? last.glyph + 1 : 0;
}

/** The next version. The one before stays as it is. */
export async function createSolverVersion(
  em: EntityManager,
  input: Acting & { readonly solver: LoadedSolver; readonly version: z.output<typeof solverVersionCreateSchema> },
): Promise<number> {
  const { actor, now, solver, version: given } = input;
  const configuration = checkConfiguration(given.configuration);
  const hash = configurationHash(configuration);
  return em.transactional(async (inner) => {
    await refuseDuplicate(inner, solver.group.id, hash);
    const n = 1 + Math.max(...solver.versions.getItems().map((version) => version.n));
    addVersion(inner, { ...input, solver, n, configuration, hash, declaration: given.declaration, whatChanged: given.whatChanged, register: given.register });
    recordAudit(inner, {
      actor, at: now, action: given.register ? 'solver.registered' : 'solver.drafted', subject: { type: 'solver', id: solver.id }, groupId: solver.group.id,
      after: { version: n, contentHash: hash, whatChanged: given.whatChanged }, requestId: input.requestId,
    });
    await inner.flush();
    return n;
  });
}

interface NewVersion extends Acting {
  readonly solver: Pick<Solver, 'id'>;
  readonly n: number;
  readonly configuration: Configuration;
  readonly hash: string;
  readonly declaration: { readonly notTuned: boolean; readonly ownMesh: boolean; readonly sourceMayBePublished: boolean };
  readonly whatChanged: string;
  readonly register: boolean;
}

function addVersion(em: EntityManager, v: NewVersion): void {
  em.create(SolverVersionEntity, {
    solver: em.getReference(SolverEntity, v.solver.id),
    n: v.n,
    state: v.register ? 'registered' : 'draft',
    method: v.configuration.method,
    configuration: v.configuration,
    declaration: { ...v.declaration },
    contentHash: v.hash,
    whatChanged: v.whatChanged,
    createdBy: em.getReference(UserEntity, v.actor.id),
    registeredAt: v.register ? v.now : null,
    withdrawnAt: null,
    withdrawnReason: null,
  });
}

async function refuseDuplicate(em: EntityManager, groupId: string, hash: string): Promise<void> {
  const same = await em.findOne(
    SolverVersionEntity,
    { contentHash: hash, state: { $ne: 'withdrawn' }, solver: { group: groupId } },
    { populate: ['solver'] },
  );
  if (!same) return;
  const solver = same.solver.$;
  throw new AppError(
    'duplicate',
    `Your group has this configuration already: '${solver.name}', version ${same.n}. Change a parameter, or use that one.`,
    [{ path: ['configuration'], message: `The same as '${solver.name}', version ${same.n}.` }],
    { extra: { slug: solver.slug, version: same.n } },
  );
}
