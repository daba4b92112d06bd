import { runHash } from '../../solvers/campaign/trial';
import { RecomputationEntity, RunEntity, TrialEntity } from '../entities/run.ts';
import { recordAudit, siteActor } from '../services/audit/record-audit.ts';
import { codeVersion } from './code-version.ts';
import type { Job } from './job.ts';
import type { JobContext } from './run-job.ts';
import { loadRunInput } from './run-input.ts';
import { SliceSchedule } from './slice-schedule.ts';

/** Takes the oldest recomputation that waits. Null when none does. */
export async function claimRecomputation(context: JobContext): Promise<Job | null> {
  const { orm, clock, events } = context;
  const em = orm.em.fork();
  const next = await em.findOne(RecomputationEntity, { state: 'queued' }, { orderBy: { createdAt: 'asc', id: 'asc' } });
  if (!next) return null;
  const id = next.id;
  const runId = next.run.id;
  next.state = 'running';
  next.startedAt = clock();
  next.done = 0;
  next.codeVersion = codeVersion;
  await em.flush();
  events.changed(runId);

  const reader = orm.em.fork();
  const run = await reader.findOneOrFail(RunEntity, { id: runId }, { populate: ['entry', 'entry.bench', 'phantomVersion'] });
  const stored = await reader.find(TrialEntity, { run: runId }, { orderBy: { level: 'asc', draw: 'asc' }, fields: ['level', 'draw', 'imageHash'] });
  const found = new Map<string, string>();
  const at = (level: number, draw: number): string => `${level}/${draw}`;
  const input = await loadRunInput(reader, run, run.phantomVersion.$);
  return {
    id,
    input,
    schedule: new SliceSchedule(run.ladder.length, run.draws, () => false),
    store: async ({ trials }) => {
      for (const trial of trials) found.set(at(trial.level, trial.draw), trial.imageHash);
      await orm.em.fork().nativeUpdate(RecomputationEntity, { id }, { done: found.size, updatedAt: clock() });
      events.changed(runId);
      return true;
    },
    finish: async () => {
      const difference = stored.find((trial) => found.get(at(trial.level, trial.draw)) !== trial.imageHash);
      const resultHash = runHash(stored.map((trial) => found.get(at(trial.level, trial.draw)) ?? ''));
      await orm.em.fork().transactional(async (inner) => {
        const row = await inner.findOneOrFail(RecomputationEntity, { id });
        const equal = !difference && resultHash === run.resultHash;
        Object.assign(row, { state: 'finished' as const, finishedAt: clock(), equal, resultHash, firstDifference: difference ? { level: difference.level, draw: difference.draw } : null });
        recordAudit(inner, { actor: siteActor, at: clock(), action: 'run.recomputed', subject: { type: 'run', id: runId }, after: { equal, resultHash, codeVersion } });
      });
      events.changed(runId);
    },
    fail: async (reason) => {
      await orm.em.fork().nativeUpdate(RecomputationEntity, { id }, { state: 'failed', failure: reason.slice(0, 2000), finishedAt: clock(), updatedAt: clock() });
      events.changed(runId);
    },
  };
}

/** At start: recomputations that were interrupted begin anew. */
export async function requeueRecomputations(context: JobContext): Promise<void> {
  await context.orm.em.fork().nativeUpdate(RecomputationEntity, { state: 'running' }, { state: 'queued', done: 0 });
}
