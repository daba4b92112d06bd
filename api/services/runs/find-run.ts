import type { EntityManager, Loaded } from '@mikro-orm/sqlite';
import type { Subject } from '../../../shared/domain/permissions.ts';
import { AppError } from '../../../shared/errors.ts';
import { RunEntity, type Run } from '../../entities/run.ts';

export const runParts = [
  'entry', 'entry.bench', 'entry.solverVersion', 'entry.solverVersion.solver', 'entry.solverVersion.solver.group',
  'phantomVersion', 'phantomVersion.phantom', 'submittedBy', 'reviewer',
] as const;
export type LoadedRun = Loaded<Run, (typeof runParts)[number]>;

export async function findRun(em: EntityManager, id: string): Promise<LoadedRun> {
  const run = await em.findOne(RunEntity, { id: id.toUpperCase() }, { populate: runParts });
  if (!run) throw new AppError('not-found', `No run is called '${id}'.`);
  return run;
}

/** Runs exist on open and closed benches only, which everybody reads. Whoever owns the solver or the phantom may not review. */
export function runSubject(run: LoadedRun): Subject {
  const groupId = run.entry.$.solverVersion.$.solver.$.group.id;
  return {
    groupId,
    published: run.entry.$.bench.$.state !== 'draft',
    interestedGroupIds: [groupId, run.phantomVersion.$.phantom.$.group.id],
  };
}

/** The run's own group, as facts for the developer's side. */
export const runGroup = (run: LoadedRun) => run.entry.$.solverVersion.$.solver.$.group.$;

/** @throws AppError 'conflict' */
export function requireFinished(run: Pick<LoadedRun, 'state'>): void {
  if (run.state !== 'finished') throw new AppError('conflict', `The run is ${run.state}: this needs a finished one.`);
}
