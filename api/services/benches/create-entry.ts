import type { EntityManager } from '@mikro-orm/sqlite';
import { AppError, type Issue } from '../../../shared/errors.ts';
import { BenchEntity, EntryEntity } from '../../entities/bench.ts';
import { SolverVersionEntity } from '../../entities/solver.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { enqueueRun } from '../runs/queue-run.ts';
import { whyUnfit } from '../solvers/check-configuration.ts';
import { findVersion, type LoadedSolver } from '../solvers/find-solver.ts';
import { phantomsOf, type LoadedBench } from './find-bench.ts';

/**
 * Enters a registered solver version and queues one run for each phantom. After it, `jobs.kick()` starts them.
 * @throws AppError 'conflict' where the states do not allow it, 'validation-failed' with the reason where the method does not fit a phantom
 */
export async function createEntry(em: EntityManager, input: Acting & { readonly bench: LoadedBench; readonly solver: LoadedSolver; readonly version: number }): Promise<void> {
  const { actor, now, bench, solver } = input;
  if (bench.state !== 'open') throw new AppError('conflict', `The bench is ${bench.state}: only an open one takes entries.`);
  const version = findVersion(solver, input.version);
  if (version.state !== 'registered') throw new AppError('conflict', `Version ${version.n} is ${version.state}: register it first.`);
  const phantoms = phantomsOf(bench).map(({ version: phantom }) => phantom);
  const issues: Issue[] = phantoms.flatMap((phantom) => {
    const reason = whyUnfit(version.method, phantom.definition);
    return reason === null ? [] : [{ path: ['solver'], message: `On '${phantom.name}': ${reason}` }];
  });
  if (issues.length > 0) throw new AppError('validation-failed', 'The method does not fit every phantom of this bench.', issues);
  await em.transactional(async (inner) => {
    const entries = await inner.find(EntryEntity, { bench: bench.id });
    if (entries.some((entry) => entry.solverVersion.id === version.id)) throw new AppError('duplicate', `'${solver.name}', version ${version.n}, is entered already.`);
    const place = 1 + Math.max(-1, ...entries.map((entry) => entry.place));
    const entry = inner.create(EntryEntity, {
      bench: inner.getReference(BenchEntity, bench.id), solverVersion: inner.getReference(SolverVersionEntity, version.id), place, createdBy: inner.getReference(UserEntity, actor.id),
    });
    const row = await inner.findOneOrFail(BenchEntity, bench.id);
    row.revision += 1;
    await inner.flush();
    for (const phantomVersion of phantoms) await enqueueRun(inner, { ...input, bench, entry, solverVersion: version, phantomVersion, groupId: solver.group.id });
    recordAudit(inner, {
      actor, at: now, action: 'bench.entered', subject: { type: 'bench', id: bench.id }, groupId: solver.group.id,
      after: { solver: solver.id, version: version.n, place, revision: row.revision }, requestId: input.requestId,
    });
    await inner.flush();
  });
}
