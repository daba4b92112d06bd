import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { queueSchema } from '../../../shared/contracts/site';

/** What the workers are doing. `done` and `total` count reconstructions of the runs that have not ended. */
export async function readQueue(em: EntityManager, input: { readonly workers: number; readonly seeding: boolean }): Promise<z.input<typeof queueSchema>> {
  const rows: { state: string; runs: number; done: number; total: number }[] = await em.execute(
    "select state, count(*) as runs, sum(done) as done, sum(total) as total from run where state in ('queued', 'running') group by state",
  );
  const of = (state: string): number => rows.find((row) => row.state === state)?.runs ?? 0;
  return {
    queued: of('queued'),
    running: of('running'),
    workers: input.workers,
    seeding: input.seeding,
    done: rows.reduce((sum, row) => sum + row.done, 0),
    total: rows.reduce((sum, row) => sum + row.total, 0),
  };
}
