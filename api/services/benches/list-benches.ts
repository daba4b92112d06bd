import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { BenchSummary, benchListQuerySchema } from '../../../shared/contracts/benches';
import type { Actor } from '../../../shared/domain/permissions.ts';
import { BenchEntity } from '../../entities/bench.ts';
import { afterPlace, cutPage, newestFirst, readCursor } from '../paging.ts';
import { countBenches, toBenchSummary } from './show-bench.ts';

/** Open and closed benches, and the drafts of the reader's own groups, newest first. */
export async function listBenches(
  em: EntityManager,
  input: { readonly actor: Actor | null; readonly query: z.output<typeof benchListQuerySchema> },
): Promise<{ items: BenchSummary[]; nextCursor: string | null }> {
  const { actor, query } = input;
  const found = await em.find(
    BenchEntity,
    {
      $and: [
        { $or: [{ state: { $ne: 'draft' } }, { group: { $in: Object.keys(actor?.groups ?? {}) } }] },
        query.q === undefined ? {} : { $or: [{ title: { $like: `%${query.q}%` } }, { question: { $like: `%${query.q}%` } }, { id: query.q.toUpperCase() }] },
        query.state === undefined ? {} : { state: query.state },
        query.family === undefined ? {} : { family: query.family },
        query.group === undefined ? {} : { group: { slug: query.group } },
        afterPlace(readCursor(query.cursor)),
      ],
    },
    { populate: ['group'], orderBy: newestFirst, limit: query.limit + 1 },
  );
  const { rows, nextCursor } = cutPage(found, query.limit);
  const counts = await countBenches(em, rows.map((bench) => bench.id));
  return { items: rows.map((bench) => toBenchSummary(bench, bench.group.$, counts.get(bench.id))), nextCursor };
}
