import type { EntityManager } from '@mikro-orm/sqlite';
import { mayMove } from '../../../shared/domain/states';
import { AppError } from '../../../shared/errors.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { findVersion, type LoadedSolver } from './find-solver.ts';

/** Draft to registered: from now on it never changes, and it may be entered in benches. */
export async function registerSolverVersion(em: EntityManager, input: Acting & { readonly solver: LoadedSolver; readonly n: number }): Promise<void> {
  const { actor, now, solver, n } = input;
  const version = findVersion(solver, n);
  if (!mayMove.solver(version.state, 'registered')) throw new AppError('conflict', `Version ${n} is ${version.state}: only a draft can be registered.`);
  version.state = 'registered';
  version.registeredAt = now;
  recordAudit(em, {
    actor, at: now, action: 'solver.registered', subject: { type: 'solver', id: solver.id }, groupId: solver.group.id,
    before: { version: n, state: 'draft' }, after: { version: n, state: 'registered', contentHash: version.contentHash }, requestId: input.requestId,
  });
  await em.flush();
}

/** A withdrawn version keeps its page and its runs; it cannot be entered any more. */
export async function withdrawSolverVersion(
  em: EntityManager,
  input: Acting & { readonly solver: LoadedSolver; readonly n: number; readonly reason: string },
): Promise<void> {
  const { actor, now, solver, n, reason } = input;
  const version = findVersion(solver, n);
  if (!mayMove.solver(version.state, 'withdrawn')) throw new AppError('conflict', `Version ${n} is withdrawn already.`);
  const before = version.state;
  version.state = 'withdrawn';
  version.withdrawnAt = now;
  version.withdrawnReason = reason;
  recordAudit(em, {
    actor, at: now, action: 'solver.withdrawn', subject: { type: 'solver', id: solver.id }, groupId: solver.group.id,
    before: { version: n, state: before }, after: { version: n, state: 'withdrawn' }, detail: reason, requestId: input.requestId,
  });
  await em.flush();
}
