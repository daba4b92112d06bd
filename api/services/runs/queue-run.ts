import type { EntityManager } from '@mikro-orm/sqlite';
import { mayMove } from '../../../shared/domain/states';
import { AppError } from '../../../shared/errors.ts';
import { getMethod } from '../../../solvers/methods/registry';
import { EntryEntity, type Bench, type Entry } from '../../entities/bench.ts';
import { PhantomVersionEntity, type PhantomVersion } from '../../entities/phantom.ts';
import { RecomputationEntity, RunEntity, TrialEntity, type Recomputation, type Run } from '../../entities/run.ts';
import type { SolverVersion } from '../../entities/solver.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Jobs } from '../../jobs/jobs.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { nextId } from '../identifiers.ts';
import type { LoadedRun } from './find-run.ts';

/** Quick ones first, so that nobody waits an hour for a second of work. */
export function runPriority(methodKey: string): number {
  const { capabilities, class: kind } = getMethod(methodKey);
  if (kind === 'baseline') return 40;
  if (capabilities.nonlinear || capabilities.statistical) return 10;
  return capabilities.direct || kind === 'spectral' ? 30 : 20;
}

/**
 * Queues one run in the caller's transaction. After the commit, `jobs.kick()` starts it.
 * @throws AppError 'duplicate' through the constraint when the entry has a run on this version
 */
export async function enqueueRun(
  em: EntityManager,
  input: Acting & {
    readonly bench: Pick<Bench, 'axis' | 'noiseModel' | 'ladder' | 'draws' | 'seed'>;
    readonly entry: Pick<Entry, 'id'>;
    readonly solverVersion: Pick<SolverVersion, 'configuration' | 'method'>;
    readonly phantomVersion: Pick<PhantomVersion, 'id' | 'contentHash'>;
    /** Group of the solver, for the trail. */
    readonly groupId: string;
  },
): Promise<Run> {
  const { actor, now, bench, entry, solverVersion, phantomVersion, groupId } = input;
  const run = em.create(RunEntity, {
    id: await nextId(em, 'run'),
    entry: em.getReference(EntryEntity, entry.id),
    phantomVersion: em.getReference(PhantomVersionEntity, phantomVersion.id),
    submittedBy: em.getReference(UserEntity, actor.id),
    state: 'queued',
    review: 'unreviewed',
    reservation: null,
    reviewer: null,
    configuration: solverVersion.configuration,
    axis: bench.axis,
    noiseModel: bench.noiseModel,
    ladder: [...bench.ladder],
    draws: bench.draws,
    seed: bench.seed,
    phantomHash: phantomVersion.contentHash,
    codeVersion: null,
    priority: runPriority(solverVersion.method),
    total: bench.ladder.length * bench.draws,
    levelMedians: [],
    failure: null,
    queuedAt: now,
    startedAt: null,
    heartbeatAt: null,
    finishedAt: null,
    resultHash: null,
    secondsPerReconstruction: null,
    timeRatio: null,
    checks: null,
    trivial: null,
  });
  recordAudit(em, {
    actor, at: now, action: 'run.queued', subject: { type: 'run', id: run.id }, groupId,
    after: { state: 'queued', entry: entry.id, phantom: phantomVersion.contentHash }, requestId: input.requestId,
  });
  return run;
}

/** Stops a run that waits or computes. What it has computed stays, in case it is queued again. */
export async function cancelRun(em: EntityManager, jobs: Pick<Jobs, 'drop' | 'events'>, input: Acting & { readonly run: LoadedRun }): Promise<void> {
  await moveRun(em, input, 'cancelled', (run) => {
    run.finishedAt = input.now;
  });
  jobs.drop(input.run.id);
  jobs.events.changed(input.run.id);
}

/** Queues a failed or cancelled run again; it goes on with the draws it has. */
export async function requeueRun(em: EntityManager, jobs: Pick<Jobs, 'kick' | 'events'>, input: Acting & { readonly run: LoadedRun }): Promise<void> {
  await moveRun(em, input, 'queued', (run) => {
    run.queuedAt = input.now;
    run.finishedAt = null;
    run.failure = null;
    run.attempts = 0;
  });
  jobs.events.changed(input.run.id);
  jobs.kick();
}

async function moveRun(em: EntityManager, input: Acting & { readonly run: LoadedRun }, to: 'cancelled' | 'queued', change: (run: Run) => void): Promise<void> {
  const { actor, now, run } = input;
  await em.transactional(async (inner) => {
    // The queue may have moved it since it was loaded.
    const fresh = await inner.findOneOrFail(RunEntity, { id: run.id }, { refresh: true });
    if (!mayMove.run(fresh.state, to) || (to === 'queued' && fresh.state === 'running'))
      throw new AppError('conflict', to === 'cancelled' ? `The run is ${fresh.state}: there is nothing to cancel.` : `The run is ${fresh.state}: only a failed or cancelled one is queued again.`);
    const before = fresh.state;
    fresh.state = to;
    change(fresh);
    recordAudit(inner, {
      actor, at: now, action: to === 'cancelled' ? 'run.cancelled' : 'run.queued', subject: { type: 'run', id: run.id },
      groupId: run.entry.$.solverVersion.$.solver.$.group.id, before: { state: before, failure: run.failure ?? null }, after: { state: to }, requestId: input.requestId,
    });
  });
}

/** Asks for a finished run to be computed again. One that waits or runs already is answered as it is. */
export async function requestRecomputation(em: EntityManager, jobs: Pick<Jobs, 'kick'>, input: Acting & { readonly run: LoadedRun }): Promise<Recomputation> {
  const { actor, now, run } = input;
  if (run.state !== 'finished') throw new AppError('conflict', `The run is ${run.state}: only a finished one is recomputed.`);
  const recomputation = await em.transactional(async (inner) => {
    const open = await inner.findOne(RecomputationEntity, { run: run.id, state: { $in: ['queued', 'running'] } }, { populate: ['requestedBy'] });
    if (open) return open;
    recordAudit(inner, {
      actor, at: now, action: 'run.recomputation-requested', subject: { type: 'run', id: run.id },
      groupId: run.entry.$.solverVersion.$.solver.$.group.id, requestId: input.requestId,
    });
    return inner.create(RecomputationEntity, {
      run: inner.getReference(RunEntity, run.id),
      requestedBy: inner.getReference(UserEntity, actor.id),
      state: 'queued',
      total: await inner.count(TrialEntity, { run: run.id }),
      codeVersion: null,
      equal: null,
      resultHash: null,
      firstDifference: null,
      failure: null,
      startedAt: null,
      finishedAt: null,
    });
  });
  jobs.kick();
  return recomputation;
}
