import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { SolverSummary, solverListQuerySchema } from '../../../shared/contracts/solvers';
import type { Actor } from '../../../shared/domain/permissions.ts';
import { SolverEntity } from '../../entities/solver.ts';
import { afterPlace, cutPage, newestFirst, readCursor } from '../paging.ts';
import { countRuns, toSolverSummary, visibleVersions } from './show-solver.ts';

/** Configurations with a registered or withdrawn version, and the reader's own groups' drafts, newest first. */
export async function listSolvers(
  em: EntityManager,
  input: { readonly actor: Actor | null; readonly query: z.output<typeof solverListQuerySchema> },
): Promise<{ items: SolverSummary[]; nextCursor: string | null }> {
  const { actor, query } = input;
  const found = await em.find(
    SolverEntity,
    {
      $and: [
        { $or: [{ versions: { $some: { registeredAt: { $ne: null } } } }, { group: { $in: Object.keys(actor?.groups ?? {}) } }] },
        query.q === undefined ? {} : { $or: [{ name: { $like: `%${query.q}%` } }, { slug: { $like: `%${query.q}%` } }, { id: query.q.toUpperCase() }] },
        query.method === undefined ? {} : { versions: { $some: { method: query.method } } },
        query.group === undefined ? {} : { group: { slug: query.group } },
        afterPlace(readCursor(query.cursor)),
      ],
    },
    { populate: ['group', 'versions', 'versions.createdBy'], orderBy: newestFirst, limit: query.limit + 1 },
  );
  const { rows, nextCursor } = cutPage(found, query.limit);
  const counts = await countRuns(em, rows.flatMap((solver) => visibleVersions(solver, actor).map((version) => version.id)));
  return { items: rows.map((solver) => toSolverSummary(solver, actor, counts)), nextCursor };
}
