import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { costEstimateSchema } from '../../../shared/contracts/benches';
import { AppError } from '../../../shared/errors.ts';
import { methods } from '../../../solvers/methods/registry';
import type { LoadedBench } from './find-bench.ts';

/** What an entry will take, from the time that runs of the same method took. */
export async function estimateCost(
  em: EntityManager,
  input: { readonly bench: LoadedBench; readonly method: string; readonly now: Date; readonly workers: number },
): Promise<z.input<typeof costEstimateSchema>> {
  const { bench, now, workers } = input;
  const method = methods.find((candidate) => candidate.key === input.method);
  if (!method) throw new AppError('validation-failed', `No method is called '${input.method}'.`, [{ path: ['method'], message: `There are: ${methods.map(({ key }) => key).join(', ')}.` }]);
  const reconstructions = bench.phantoms.length * bench.ladder.length * bench.draws;
  const timed: { here: number; runs: number; seconds: number }[] = await em.execute(
    `select e.bench_id = ? as here, count(*) as runs, avg(r.seconds_per_reconstruction) as seconds
     from run r join entry e on r.entry_id = e.id join solver_version v on e.solver_version_id = v.id
     where v.method = ? and r.state = 'finished' and r.seconds_per_reconstruction is not null group by 1 order by 1 desc`,
    [bench.id, method.key],
  );
  const waiting: { runs: number; seconds: number | null }[] = await em.execute(
    `select count(*) as runs, sum((r.total - r.done) * (
         select avg(o.seconds_per_reconstruction) from run o join entry oe on o.entry_id = oe.id join solver_version ov on oe.solver_version_id = ov.id
         where ov.method = v.method and o.seconds_per_reconstruction is not null)) as seconds
     from run r join entry e on r.entry_id = e.id join solver_version v on e.solver_version_id = v.id where r.state in ('queued', 'running')`,
  );
  const basis = timed[0];
  const queued = waiting[0] ?? { runs: 0, seconds: 0 };
  const processorSeconds = basis ? basis.seconds * reconstructions : null;
  return {
    reconstructions,
    processorSeconds,
    queuePosition: queued.runs + 1,
    readyAt: processorSeconds === null ? null : new Date(now.getTime() + (1000 * (processorSeconds + (queued.seconds ?? 0))) / workers).toISOString(),
    basis: basis
      ? `Mean of ${basis.runs} finished ${basis.runs === 1 ? 'run' : 'runs'} of ${method.name} ${basis.here ? 'on this bench' : 'on other benches'}; without the preparation of each phantom.`
      : `No run of ${method.name} has finished here yet, so the time is not known.`,
  };
}
