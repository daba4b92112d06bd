import type { EntityManager } from '@mikro-orm/sqlite';
import { mayMove } from '../../../shared/domain/states';
import { AppError } from '../../../shared/errors.ts';
import { RunEntity } from '../../entities/run.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { benchHash, phantomsOf, termsOf, type LoadedBench } from './find-bench.ts';

/** From now on what it asks never changes and configurations may be entered. */
export async function openBench(em: EntityManager, input: Acting & { readonly bench: LoadedBench }): Promise<void> {
  const { actor, now, bench } = input;
  if (!mayMove.bench(bench.state, 'open')) throw new AppError('conflict', `The bench is ${bench.state}: only a draft can be opened.`);
  const unpublished = phantomsOf(bench).filter(({ version }) => version.state !== 'published');
  if (unpublished.length > 0) {
    throw new AppError(
      'conflict',
      `Publish the phantoms first: ${unpublished.map(({ version }) => `'${version.name}', version ${version.n}, is ${version.state}`).join('; ')}.`,
    );
  }
  bench.state = 'open';
  bench.openedAt = now;
  recordAudit(em, {
    actor, at: now, action: 'bench.opened', subject: { type: 'bench', id: bench.id }, groupId: bench.group.id,
    before: { state: 'draft' }, after: { state: 'open', contentHash: bench.contentHash }, requestId: input.requestId,
  });
  await em.flush();
}

/** Freezes it: no more entries, and the hash covers the results. Runs must have ended. */
export async function closeBench(em: EntityManager, input: Acting & { readonly bench: LoadedBench }): Promise<void> {
  const { actor, now, bench } = input;
  if (!mayMove.bench(bench.state, 'closed')) throw new AppError('conflict', `The bench is ${bench.state}: only an open one can be closed.`);
  const runs = await em.find(RunEntity, { entry: { bench: bench.id } }, { populate: ['entry.solverVersion'], orderBy: { id: 'asc' } });
  const pending = runs.filter((run) => run.state === 'queued' || run.state === 'running');
  if (pending.length > 0) {
    throw new AppError('conflict', `${pending.length} of its runs have not ended. Wait for them, or cancel them: ${pending.slice(0, 5).map((run) => run.id).join(', ')}${pending.length > 5 ? ', …' : ''}.`);
  }
  const before = bench.contentHash;
  bench.contentHash = benchHash(
    termsOf(bench),
    runs.flatMap((run) => (run.resultHash ? [{ solver: run.entry.$.solverVersion.$.contentHash, phantom: run.phantomHash, result: run.resultHash }] : [])),
  );
  bench.state = 'closed';
  bench.closedAt = now;
  recordAudit(em, {
    actor, at: now, action: 'bench.closed', subject: { type: 'bench', id: bench.id }, groupId: bench.group.id,
    before: { state: 'open', contentHash: before }, after: { state: 'closed', contentHash: bench.contentHash }, requestId: input.requestId,
  });
  await em.flush();
}
