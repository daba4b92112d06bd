import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { PhantomSummary, phantomListQuerySchema } from '../../../shared/contracts/phantoms';
import { PhantomEntity } from '../../entities/phantom.ts';
import { afterPlace, cutPage, newestFirst, readCursor } from '../paging.ts';
import { phantomParts, readableVersions } from './find-phantom.ts';
import { countVersionRuns, toPhantomSummary, type Reader } from './show-phantom.ts';

/** Phantoms with a version the reader may see, newest first. The state is that of the version shown. */
export async function listPhantoms(em: EntityManager, input: Reader & { readonly query: z.output<typeof phantomListQuerySchema> }): Promise<{ items: PhantomSummary[]; nextCursor: string | null }> {
  const { actor, query } = input;
  const readable = [
    { versions: { $some: { publishedAt: { $ne: null } } } },
    ...(actor ? [{ group: { $in: Object.keys(actor.groups) } }] : []),
    ...(actor?.siteRoles.includes('reviewer') ? [{ versions: { $some: { state: { $in: ['submitted' as const, 'changes-requested' as const] } } } }] : []),
  ];
  const found = await em.find(
    PhantomEntity,
    {
      $and: [
        { $or: readable },
        query.q === undefined ? {} : { $or: [{ name: { $like: `%${query.q}%` } }, { slug: { $like: `%${query.q}%` } }, { id: query.q.toUpperCase() }] },
        query.family === undefined ? {} : { family: query.family },
        query.group === undefined ? {} : { group: { slug: query.group } },
        query.state === undefined ? {} : { versions: { $some: { state: query.state } } },
        afterPlace(readCursor(query.cursor)),
      ],
    },
    { populate: phantomParts, orderBy: newestFirst, limit: query.limit + 1 },
  );
  const { rows, nextCursor } = cutPage(found, query.limit);
  // A filter by state must not tell of a version that the reader may not see.
  const visible = rows.filter((phantom) => readableVersions(phantom, actor).some((version) => query.state === undefined || version.state === query.state));
  const runs = await countVersionRuns(em, visible.flatMap((phantom) => readableVersions(phantom, actor).map(({ id }) => id)));
  return { items: visible.map((phantom) => toPhantomSummary(phantom, input, runs)), nextCursor };
}
