import type { EntityManager, MikroORM } from '@mikro-orm/sqlite';
import { AppError } from '../../shared/errors.ts';
import type { Metric } from '../../solvers/core/types';
import type { LevelMoments } from '../../solvers/campaign/level-moments';
import { runHash } from '../../solvers/campaign/trial';
import { metrics } from '../../solvers/metrics/registry';
import type { CheckResultWire } from '../../shared/contracts/common';
import { toBlob } from '../entities/float64-blob.ts';
import { RunEntity, RunImageEntity, TrialEntity } from '../entities/run.ts';
import { SimulationEntity } from '../entities/simulation.ts';
import { recordAudit, siteActor } from '../services/audit/record-audit.ts';
import { announceRunEnd } from '../services/runs/announce-run-end.ts';
import { codeVersion } from './code-version.ts';
import type { Job } from './job.ts';
import { changedBits, fillMoments, momentsOf } from './level-moments.ts';
import { pickDraws } from './level-picks.ts';
import type { RunEvents } from './run-events.ts';
import { ensureAxisCases } from './axis-cases.ts';
import { loadRunInput } from './run-input.ts';
import { SliceSchedule } from './slice-schedule.ts';
import type { RunChecksOutput, RunInput, TrialOutput } from './tasks.ts';
import { WorkerFailure, type WorkerPool } from './worker-pool.ts';

/** Draws recomputed at the end of a run, to show that they give the stored bits. */
const recheckedDraws = 3;

export interface JobContext {
  readonly orm: MikroORM;
  readonly clock: () => Date;
  readonly events: RunEvents;
  /** Address of the site for links in mails. */
  readonly origin: string;
  readonly mailWaits: () => void;
  readonly timeLimitMs: number;
  readonly pool: Pick<WorkerPool, 'run'>;
}

const runParts = ['entry.bench', 'entry.solverVersion.solver.group', 'phantomVersion.phantom.group', 'submittedBy'] as const;

/** Takes the queued run that comes first: by priority, then by age. Null when none waits. */
export async function claimRun(context: JobContext): Promise<Job | null> {
  const { orm, clock } = context;
  const em = orm.em.fork();
  const id = await em.transactional(async (inner) => {
    const next = await inner.findOne(RunEntity, { state: 'queued' }, { orderBy: { priority: 'desc', queuedAt: 'asc', id: 'asc' }, populate: ['entry.solverVersion.solver'] });
    if (!next) return null;
    // Trials of other code are not mixed with those to come.
    if (next.codeVersion && next.codeVersion !== codeVersion) {
      await forgetTrials(inner, next.id);
      next.levelMoments = null;
    }
    next.state = 'running';
    next.codeVersion = codeVersion;
    next.attempts += 1;
    next.failure = null;
    next.startedAt ??= clock();
    next.heartbeatAt = clock();
    recordAudit(inner, {
      actor: siteActor, at: clock(), action: 'run.started', subject: { type: 'run', id: next.id }, groupId: next.entry.$.solverVersion.$.solver.$.group.id,
      before: { state: 'queued' }, after: { state: 'running', codeVersion },
    });
    await inner.flush();
    return next.id;
  });
  if (id === null) return null;
  context.events.changed(id);
  try {
    return await openRunJob(context, id);
  } catch (error) {
    // Its data are missing or broken: it must neither stay 'running' nor hold the queue up.
    await failRun(context, id, error instanceof AppError ? error.detail : error instanceof WorkerFailure ? error.message : 'The data of this run cannot be read. Tell an administrator.');
    return claimRun(context);
  }
}

async function forgetTrials(em: EntityManager, runId: string): Promise<void> {
  await em.nativeDelete(RunImageEntity, { run: runId });
  await em.nativeDelete(TrialEntity, { run: runId });
}

async function openRunJob(context: JobContext, id: string): Promise<Job> {
  const { orm, clock, events } = context;
  const em = orm.em.fork();
  const run = await em.findOneOrFail(RunEntity, { id }, { populate: runParts });
  const fail = (reason: string): Promise<void> => failRun(context, id, reason);
  const stored = await em.find(TrialEntity, { run: id }, { fields: ['level', 'draw'] });
  const have = new Set(stored.map((trial) => `${trial.level}/${trial.draw}`));
  const schedule = new SliceSchedule(run.ladder.length, run.draws, (level, draw) => have.has(`${level}/${draw}`));
  const metricKey = run.entry.$.bench.$.rankingMetric;
  /** Images of unfinished levels, until it is known which two are kept. */
  const images = new Map<number, Map<number, Float64Array>>();
  await ensureAxisCases(context, run);
  const input = await loadRunInput(em, run, run.phantomVersion.$);
  return {
    id,
    input,
    schedule,
    store: async ({ trials, seconds }) => {
      for (const trial of trials) {
        const level = images.get(trial.level) ?? new Map<number, Float64Array>();
        images.set(trial.level, level.set(trial.draw, trial.image));
      }
      const kept = await orm.em.fork().transactional(async (inner) => {
        const row = await inner.findOneOrFail(RunEntity, { id });
        if (row.state !== 'running') return false;
        await insertTrials(inner, id, trials, seconds);
        const moments = await closeLevels(inner, { id, metricKey, draws: row.draws, levels: new Set(trials.map((trial) => trial.level)), images, input });
        if (moments.size > 0) row.levelMoments = row.ladder.map((_, level) => moments.get(level) ?? row.levelMoments?.[level] ?? null);
        row.done = await inner.count(TrialEntity, { run: id });
        row.levelMedians = await leadingMedians(inner, id, row.ladder.length, row.draws, metricKey);
        row.heartbeatAt = clock();
        // It moves: an interruption does not count against it.
        row.attempts = 1;
        return true;
      });
      if (kept) events.changed(id);
      return kept;
    },
    finish: async (pool, signal) => {
      await storeMissingImages(context, { id, metricKey, input, pool, signal });
      await fillMoments(context, { id, input, pool, signal });
      const reader = orm.em.fork();
      const trials = await reader.find(TrialEntity, { run: id }, { orderBy: { level: 'asc', draw: 'asc' } });
      const answer = await pool.run('checkRun', {
        run: input,
        lowestErrors: trials.filter((trial) => trial.level === 0).map((trial) => trial.metrics['relative-l2-error'] ?? null),
        stored: spread(trials, recheckedDraws).map(({ level, draw, imageHash }) => ({ level, draw, imageHash })),
      }, { timeLimitMs: context.timeLimitMs, signal });
      if (!answer.ok) throw new WorkerFailure('threw', answer.message);
      await finishRun(context, id, answer, runHash(trials.map((trial) => trial.imageHash)));
    },
    fail,
  };
}

async function insertTrials(em: EntityManager, runId: string, trials: readonly TrialOutput[], seconds: number): Promise<void> {
  if (trials.length === 0) return;
  const run = em.getReference(RunEntity, runId);
  const perTrial = seconds / trials.length;
  // A draw that is stored already stays as it is: the constraint, not this code, keeps it single.
  await em.upsertMany(
    TrialEntity,
    trials.map(({ image: _image, ...trial }) => ({ run, seconds: perTrial, ...trial })),
    { onConflictFields: ['run', 'level', 'draw'], onConflictAction: 'ignore' },
  );
}

const betterOf = (key: string): Metric['better'] => metrics.find((metric) => metric.key === key)?.better ?? 'lower';

function byLevel<T extends { readonly level: number }>(rows: readonly T[]): Map<number, T[]> {
  const groups = new Map<number, T[]>();
  for (const row of rows) {
    const group = groups.get(row.level);
    if (group) group.push(row);
    else groups.set(row.level, [row]);
  }
  return groups;
}

/** Keeps the images of the median and the worst draw of each level that is complete, and gives bias and variance over all its draws. */
async function closeLevels(
  em: EntityManager,
  input: { readonly id: string; readonly metricKey: string; readonly draws: number; readonly levels: ReadonlySet<number>; readonly images: Map<number, Map<number, Float64Array>>; readonly input: RunInput },
): Promise<Map<number, LevelMoments>> {
  const { id, metricKey, draws, levels, images } = input;
  const found = new Map<number, LevelMoments>();
  for (const level of levels) {
    const rows = await em.find(TrialEntity, { run: id, level }, { fields: ['draw', 'metrics'] });
    if (rows.length < draws) continue;
    const picks = pickDraws(rows.map((row) => ({ draw: row.draw, value: row.metrics[metricKey] ?? null })), betterOf(metricKey));
    for (const draw of new Set([picks.medianDraw, picks.worstDraw])) {
      const image = images.get(level)?.get(draw);
      if (image) await storeImage(em, id, level, draw, image);
    }
    const moments = momentsOf(rows, images.get(level) ?? new Map<number, Float64Array>(), input.input, level);
    if (moments) found.set(level, moments);
    images.delete(level);
  }
  return found;
}

async function storeImage(em: EntityManager, runId: string, level: number, draw: number, image: Float64Array): Promise<void> {
  if ((await em.count(RunImageEntity, { run: runId, level, draw })) > 0) return;
  em.create(RunImageEntity, { run: em.getReference(RunEntity, runId), level, draw, values: toBlob(image) });
}

/** Medians of the levels finished without a gap, from the lowest noise up. */
async function leadingMedians(em: EntityManager, runId: string, levels: number, draws: number, metricKey: string): Promise<(number | null)[]> {
  const rows = await em.find(TrialEntity, { run: runId }, { fields: ['level', 'draw', 'metrics'] });
  const grouped = byLevel(rows);
  const medians: (number | null)[] = [];
  for (let level = 0; level < levels; level++) {
    const of = grouped.get(level) ?? [];
    if (of.length < draws) break;
    medians.push(pickDraws(of.map((row) => ({ draw: row.draw, value: row.metrics[metricKey] ?? null })), betterOf(metricKey)).median);
  }
  return medians;
}

/** Images that a stop of the server lost are computed again; their hash says whether they are the same. */
async function storeMissingImages(
  context: JobContext,
  input: { readonly id: string; readonly metricKey: string; readonly input: Job['input']; readonly pool: Parameters<Job['finish']>[0]; readonly signal: AbortSignal },
): Promise<void> {
  const { id, metricKey, pool, signal } = input;
  const em = context.orm.em.fork();
  const rows = await em.find(TrialEntity, { run: id }, { fields: ['level', 'draw', 'metrics', 'imageHash'] });
  for (const [level, of] of byLevel(rows)) {
    const picks = pickDraws(of.map((row) => ({ draw: row.draw, value: row.metrics[metricKey] ?? null })), betterOf(metricKey));
    for (const draw of new Set([picks.medianDraw, picks.worstDraw])) {
      if ((await em.count(RunImageEntity, { run: id, level, draw })) > 0) continue;
      const answer = await pool.run('runSlice', { run: input.input, level, draws: [draw] }, { timeLimitMs: context.timeLimitMs, signal });
      if (!answer.ok) throw new WorkerFailure('threw', answer.message);
      const trial = answer.trials[0];
      const expected = of.find((row) => row.draw === draw)?.imageHash;
      if (!trial || trial.imageHash !== expected) throw new WorkerFailure('threw', changedBits(level, draw));
      await context.orm.em.fork().transactional((inner) => storeImage(inner, id, level, draw, trial.image));
    }
  }
}

/** Evenly spaced elements, the first and the last among them. */
function spread<T>(items: readonly T[], count: number): T[] {
  if (items.length <= count) return [...items];
  return Array.from({ length: count }, (_, i) => items[Math.round((i * (items.length - 1)) / (count - 1))]!);
}

async function finishRun(context: JobContext, id: string, answer: RunChecksOutput, resultHash: string): Promise<void> {
  const { orm, clock, events } = context;
  const done = await orm.em.fork().transactional(async (em) => {
    const run = await em.findOneOrFail(RunEntity, { id }, { populate: runParts });
    if (run.state !== 'running') return false;
    Object.assign(run, {
      state: 'finished' as const,
      finishedAt: clock(),
      resultHash,
      checks: [...answer.checks, ...(await inverseCrimeCheck(em, run.phantomVersion.$.definitionHash))],
      trivial: answer.trivial,
      secondsPerReconstruction: answer.secondsPerReconstruction,
      timeRatio: answer.timeRatio,
    });
    await announceRunEnd(em, { run, now: clock(), origin: context.origin });
    return true;
  });
  if (!done) return;
  context.mailWaits();
  events.changed(id);
}

/** Whether simulation and inversion share a discretisation was measured with the phantom; a run's table shows it again. */
async function inverseCrimeCheck(em: EntityManager, definitionHash: string): Promise<CheckResultWire[]> {
  const simulation = await em.findOne(SimulationEntity, { contentHash: definitionHash });
  return (simulation?.checks ?? []).filter((check) => check.key === 'discretisations-differ');
}

async function failRun(context: JobContext, id: string, reason: string): Promise<void> {
  const { orm, clock, events } = context;
  const done = await orm.em.fork().transactional(async (em) => {
    const run = await em.findOneOrFail(RunEntity, { id }, { populate: runParts });
    if (run.state !== 'running' && run.state !== 'queued') return false;
    run.state = 'failed';
    run.failure = reason.slice(0, 2000);
    run.finishedAt = clock();
    await announceRunEnd(em, { run, now: clock(), origin: context.origin });
    return true;
  });
  if (!done) return;
  context.mailWaits();
  events.changed(id);
}

const interruptionsAllowed = 5;

/** At start: runs that were being worked on wait again, with the trials they have. One that stops the server every time is failed. */
export async function requeueInterrupted(context: JobContext): Promise<void> {
  const em = context.orm.em.fork();
  for (const run of await em.find(RunEntity, { state: 'running' }, { populate: ['entry.solverVersion.solver'] })) {
    if (run.attempts >= interruptionsAllowed)
      await failRun(context, run.id, `The server stopped ${run.attempts} times while it worked on this run, without a new trial. Choose parameters that need less time or memory, then queue it again.`);
    else {
      run.state = 'queued';
      recordAudit(em, {
        actor: siteActor, at: context.clock(), action: 'run.queued', subject: { type: 'run', id: run.id }, groupId: run.entry.$.solverVersion.$.solver.$.group.id,
        before: { state: 'running' }, after: { state: 'queued', done: run.done }, detail: 'The server stopped while it was computed.',
      });
      await em.flush();
    }
  }
}
