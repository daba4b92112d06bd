import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { RunSummary, runListQuerySchema } from '../../../shared/contracts/runs';
import { RunEntity } from '../../entities/run.ts';
import { afterPlace, cutPage, newestFirst, readCursor } from '../paging.ts';
import { runParts } from './find-run.ts';
import { toRunSummary } from './run-summary.ts';

/** Runs, newest first. They exist on open and closed benches only, so everybody reads them. */
export async function listRuns(
  em: EntityManager,
  input: { readonly query: z.output<typeof runListQuerySchema>; readonly now: Date },
): Promise<{ items: RunSummary[]; nextCursor: string | null }> {
  const { query, now } = input;
  const found = await em.find(
    RunEntity,
    {
      $and: [
        query.state === undefined ? {} : { state: query.state },
        query.review === undefined ? {} : { review: query.review },
        query.bench === undefined ? {} : { entry: { bench: { slug: query.bench } } },
        query.solver === undefined ? {} : { entry: { solverVersion: { solver: { slug: query.solver } } } },
        query.phantom === undefined ? {} : { phantomVersion: { phantom: { slug: query.phantom } } },
        query.group === undefined ? {} : { entry: { solverVersion: { solver: { group: { slug: query.group } } } } },
        afterPlace(readCursor(query.cursor)),
      ],
    },
    { populate: runParts, orderBy: newestFirst, limit: query.limit + 1, strategy: 'select-in' },
  );
  const { rows, nextCursor } = cutPage(found, query.limit);
  return { items: rows.map((run) => toRunSummary(run, now)), nextCursor };
}
