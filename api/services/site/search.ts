import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { searchResultSchema } from '../../../shared/contracts/site';
import type { Actor } from '../../../shared/domain/permissions.ts';
import { BenchEntity } from '../../entities/bench.ts';
import { GroupEntity } from '../../entities/group.ts';
import { PhantomVersionEntity } from '../../entities/phantom.ts';
import { RunEntity } from '../../entities/run.ts';
import { SolverVersionEntity } from '../../entities/solver.ts';
import { phantomLine } from '../benches/phantom-facts.ts';
import { runParts } from '../runs/find-run.ts';
import { methodName } from '../solvers/check-configuration.ts';

type Hit = z.input<typeof searchResultSchema>['items'][number];
const perKind = 8;
/** Shorter ones would match too much. */
const hashPrefix = /^[0-9a-f]{6,64}$/;

/** By name, by identifier (PH-031) or by the first six or more digits of a hash, among what the reader may read. */
export async function search(em: EntityManager, input: { readonly q: string; readonly actor: Actor | null }): Promise<Hit[]> {
  const q = input.q.trim();
  const own = Object.keys(input.actor?.groups ?? {});
  const like = { $like: `%${q}%` };
  const id = q.toUpperCase();
  const hash = hashPrefix.test(q.toLowerCase()) ? { $like: `${q.toLowerCase()}%` } : null;
  const found = await Promise.all([
    findPhantoms(em, { like, id, hash, own }),
    findSolvers(em, { like, id, hash, own }),
    findBenches(em, { like, id, hash, own }),
    findRuns(em, { like, id, hash, own }),
    findGroups(em, { like, id, hash, own }),
  ]);
  return found.flat();
}

interface Wanted {
  readonly like: { readonly $like: string };
  readonly id: string;
  readonly hash: { readonly $like: string } | null;
  readonly own: readonly string[];
}

async function findPhantoms(em: EntityManager, { like, id, hash, own }: Wanted): Promise<Hit[]> {
  const versions = await em.find(
    PhantomVersionEntity,
    {
      $and: [
        { $or: [{ publishedAt: { $ne: null } }, { phantom: { group: { $in: [...own] } } }] },
        { $or: [{ name: like }, { phantom: { slug: like } }, { phantom: { id } }, ...(hash ? [{ contentHash: hash }, { definitionHash: hash }] : [])] },
      ],
    },
    { populate: ['phantom'], orderBy: { n: 'desc' }, limit: 4 * perKind },
  );
  return firstOfEach(versions, (version) => version.phantom.id).map((version) => ({
    kind: 'phantom', id: version.phantom.id, slug: version.phantom.$.slug, name: version.name, line: phantomLine(version), path: `/phantoms/${version.phantom.$.slug}`,
  }));
}

async function findSolvers(em: EntityManager, { like, id, hash, own }: Wanted): Promise<Hit[]> {
  const versions = await em.find(
    SolverVersionEntity,
    {
      $and: [
        { $or: [{ registeredAt: { $ne: null } }, { solver: { group: { $in: [...own] } } }] },
        { $or: [{ solver: { name: like } }, { solver: { slug: like } }, { solver: { id } }, ...(hash ? [{ contentHash: hash }] : [])] },
      ],
    },
    { populate: ['solver'], orderBy: { n: 'desc' }, limit: 4 * perKind },
  );
  return firstOfEach(versions, (version) => version.solver.id).map((version) => ({
    kind: 'solver', id: version.solver.id, slug: version.solver.$.slug, name: version.solver.$.name, line: methodName(version.method), path: `/solvers/${version.solver.$.slug}`,
  }));
}

async function findBenches(em: EntityManager, { like, id, hash, own }: Wanted): Promise<Hit[]> {
  const benches = await em.find(
    BenchEntity,
    {
      $and: [
        { $or: [{ state: { $ne: 'draft' } }, { group: { $in: [...own] } }] },
        { $or: [{ title: like }, { question: like }, { slug: like }, { id }, ...(hash ? [{ contentHash: hash }] : [])] },
      ],
    },
    { limit: perKind },
  );
  return benches.map((bench) => ({ kind: 'bench', id: bench.id, slug: bench.slug, name: bench.title, line: bench.question, path: `/benches/${bench.slug}` }));
}

async function findRuns(em: EntityManager, { id, hash }: Wanted): Promise<Hit[]> {
  const runs = await em.find(RunEntity, { $or: [{ id }, ...(hash ? [{ resultHash: hash }] : [])] }, { populate: runParts, limit: perKind, strategy: 'select-in' });
  return runs.map((run) => ({
    kind: 'run', id: run.id, slug: run.id, name: `${run.entry.$.solverVersion.$.solver.$.name} on ${run.phantomVersion.$.name}`, line: run.entry.$.bench.$.title, path: `/runs/${run.id}`,
  }));
}

async function findGroups(em: EntityManager, { like }: Wanted): Promise<Hit[]> {
  const groups = await em.find(GroupEntity, { $or: [{ name: like }, { slug: like }] }, { limit: perKind });
  return groups.map((group) => ({ kind: 'group', id: group.id, slug: group.slug, name: group.name, line: 'group', path: `/groups/${group.slug}` }));
}

function firstOfEach<T>(rows: readonly T[], key: (row: T) => string): T[] {
  const seen = new Set<string>();
  const first = rows.filter((row) => !seen.has(key(row)) && seen.add(key(row)));
  return first.slice(0, perKind);
}
