import type { EntityManager, Loaded } from '@mikro-orm/sqlite';
import type { Subject } from '../../../shared/domain/permissions.ts';
import { AppError } from '../../../shared/errors.ts';
import { SolverEntity, type Solver, type SolverVersion } from '../../entities/solver.ts';

export type LoadedSolver = Loaded<Solver, 'group' | 'versions' | 'versions.createdBy'>;

export async function findSolver(em: EntityManager, slug: string): Promise<LoadedSolver> {
  const solver = await em.findOne(SolverEntity, { slug }, { populate: ['group', 'versions', 'versions.createdBy'] });
  if (!solver) throw new AppError('not-found', `No solver configuration has the address '${slug}'.`);
  return solver;
}

/** A configuration is public once one of its versions was registered, withdrawn ones included. */
export function solverSubject(solver: LoadedSolver): Subject {
  return { groupId: solver.group.id, published: solver.versions.getItems().some((version) => version.registeredAt !== null) };
}

export function findVersion(solver: LoadedSolver, n: number): SolverVersion {
  const version = solver.versions.getItems().find((candidate) => candidate.n === n);
  if (!version) throw new AppError('not-found', `'${solver.name}' has no version ${n}.`);
  return version;
}
