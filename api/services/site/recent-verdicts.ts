import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { recentVerdictsSchema } from '../../../shared/contracts/site';
import { VerdictEntity } from '../../entities/run.ts';
import { isSealed } from '../phantoms/phantom-access.ts';

/** The newest signed tables. */
export async function recentVerdicts(em: EntityManager, now: Date): Promise<z.input<typeof recentVerdictsSchema>['items']> {
  const verdicts = await em.find(
    VerdictEntity,
    { verdict: { $in: ['signed-off', 'signed-off-with-reservation'] } },
    { populate: ['by', 'run.entry.solverVersion.solver', 'run.phantomVersion'], orderBy: { createdAt: 'desc', id: 'desc' }, limit: 8 },
  );
  return verdicts.flatMap(({ run: { $: run }, verdict, by, createdAt }) =>
    run.resultHash
      ? [{
          run: run.id, solver: run.entry.$.solverVersion.$.solver.$.name, phantom: run.phantomVersion.$.name, sealed: isSealed(run.phantomVersion.$, now),
          verdict, by: { handle: by.$.handle }, at: createdAt.toISOString(), resultHash: run.resultHash,
        }]
      : [],
  );
}
