import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { reviewQueueSchema } from '../../../shared/contracts/runs';
import { can, type Actor } from '../../../shared/domain/permissions.ts';
import { getMetric } from '../../../solvers/metrics/registry';
import type { LevelStatistics } from '../../../shared/contracts/common';
import { lossOf } from '../../../solvers/statistics/loss';
import { MembershipEntity } from '../../entities/group.ts';
import { PhantomVersionEntity } from '../../entities/phantom.ts';
import { CommentEntity, RunEntity } from '../../entities/run.ts';
import { SimulationEntity } from '../../entities/simulation.ts';
import { floorsOf } from '../benches/show-bench.ts';
import { loadRunFigures } from '../figures/load-run-figures.ts';
import { levelTable } from '../figures/run-tables.ts';
import { runGroup, runParts, runSubject, type LoadedRun } from '../runs/find-run.ts';
import { axisOf } from '../runs/axis-of.ts';
import { toRunSummary } from '../runs/run-summary.ts';

type Queue = z.input<typeof reviewQueueSchema>;
const dayMs = 86_400_000;

/** Finished runs without a verdict and submitted phantom versions, the longest wait first. */
export async function readReviewQueue(em: EntityManager, input: { readonly actor: Actor; readonly now: Date }): Promise<Queue> {
  const { actor, now } = input;
  const runs = await waitingRuns(em);
  const comments = await em.find(CommentEntity, { run: { $in: runs.map((run) => run.id) } }, { populate: ['by'], orderBy: { createdAt: 'asc', id: 'asc' } });
  const members = new Map<string, Set<string>>();
  for (const membership of await em.find(MembershipEntity, { group: { $in: [...new Set(runs.map((run) => runGroup(run).id))] } })) {
    members.set(membership.group.id, (members.get(membership.group.id) ?? new Set()).add(membership.user.id));
  }
  const best = await bestMedians(em, runs);
  const floors = await floorsOf(em, runs.map((run) => run.phantomVersion.$.definitionHash));
  const rows: Queue['runs'] = [];
  for (const run of runs) {
    const notes = comments.filter((comment) => comment.run.id === run.id);
    const own = members.get(runGroup(run).id) ?? new Set();
    const last = notes.at(-1);
    rows.push({
      ...toRunSummary(run, now),
      waitingDays: waitingDays(run.finishedAt ?? run.createdAt, now),
      mayReview: can(actor, 'run.review', runSubject(run)),
      reviewer: run.reviewer ? { handle: run.reviewer.$.handle } : null,
      // A reviewer's question that nobody answered puts the run on the developer's side.
      waitsFor: notes.some((note) => note.question && !note.answered && !own.has(note.by.id)) ? 'developer' : 'reviewer',
      lastNote: last ? { by: { handle: last.by.$.handle }, at: last.createdAt.toISOString(), text: last.text } : null,
      axis: axisOf(run),
      checks: run.checks ?? [],
      modelErrorFloor: floors.get(run.phantomVersion.$.definitionHash) ?? 0,
      best: best.get(`${run.entry.$.bench.id}/${run.phantomVersion.id}`) ?? run.ladder.map(() => null),
      ...(await readingsOf(em, run)),
    });
  }
  return { runs: rows, phantoms: await waitingPhantoms(em, actor, now) };
}

/** What the actor can review now: runs that nobody else took up, and phantom versions. */
export async function countWaiting(em: EntityManager, actor: Actor): Promise<number> {
  const runs = await waitingRuns(em);
  const mine = runs.filter((run) => can(actor, 'run.review', runSubject(run)) && (run.reviewer === null || run.reviewer === undefined || run.reviewer.id === actor.id));
  const phantoms = await em.find(PhantomVersionEntity, { state: 'submitted' }, { populate: ['phantom'] });
  return mine.length + phantoms.filter((version) => can(actor, 'phantom.review', { groupId: version.phantom.$.group.id })).length;
}

const waitingRuns = (em: EntityManager): Promise<LoadedRun[]> =>
  em.find(RunEntity, { state: 'finished', review: { $in: ['unreviewed', 'in-review'] } }, { populate: runParts, orderBy: { finishedAt: 'asc', id: 'asc' }, strategy: 'select-in' });

const waitingDays = (since: Date, now: Date): number => Math.max(0, (now.getTime() - since.getTime()) / dayMs);

async function waitingPhantoms(em: EntityManager, actor: Actor, now: Date): Promise<Queue['phantoms']> {
  const versions = await em.find(PhantomVersionEntity, { state: 'submitted' }, { populate: ['phantom.group', 'submittedBy', 'createdBy'], orderBy: { submittedAt: 'asc', id: 'asc' } });
  const simulations = await em.find(SimulationEntity, { contentHash: { $in: versions.map((version) => version.definitionHash) } });
  return versions.map((version) => {
    const phantom = version.phantom.$;
    const since = version.submittedAt ?? version.createdAt;
    return {
      slug: phantom.slug,
      id: phantom.id,
      name: version.name,
      version: version.n,
      group: { slug: phantom.group.$.slug, name: phantom.group.$.name },
      submittedAt: since.toISOString(),
      submittedBy: { handle: (version.submittedBy ?? version.createdBy).$.handle },
      waitingDays: waitingDays(since, now),
      mayReview: can(actor, 'phantom.review', { groupId: phantom.group.id }),
      checks: simulations.find((simulation) => simulation.contentHash === version.definitionHash)?.checks ?? [],
    };
  });
}

/** Best median of the ranking metric by bench and phantom, at each level: what the run is held against. */
async function bestMedians(em: EntityManager, runs: readonly LoadedRun[]): Promise<Map<string, (number | null)[]>> {
  const rivals = await em.find(RunEntity, {
    state: 'finished', review: { $ne: 'declined' }, entry: { bench: { $in: [...new Set(runs.map((run) => run.entry.$.bench.id))] } },
  }, { populate: ['entry', 'entry.bench'] });
  const best = new Map<string, (number | null)[]>();
  for (const rival of rivals) {
    const key = `${rival.entry.$.bench.id}/${rival.phantomVersion.id}`;
    const { better } = getMetric(rival.entry.$.bench.$.rankingMetric);
    const so = best.get(key) ?? rival.ladder.map(() => null);
    best.set(key, so.map((value, level) => {
      const own = rival.levelMedians[level] ?? null;
      return lossOf(own, better) < lossOf(value, better) ? own : value;
    }));
  }
  return best;
}

/** Figures of the ranking metric, and what a reviewer looks at first, in words. */
async function readingsOf(em: EntityManager, run: LoadedRun): Promise<Pick<Queue['runs'][number], 'metric' | 'levels' | 'trivial' | 'flags'>> {
  const metric = run.entry.$.bench.$.rankingMetric;
  const figures = await loadRunFigures(em, run);
  const levels = levelTable(figures, run.ladder, metric).map((row) => ({ level: row.level, median: row.median, p05: row.p05, p95: row.p95, outliers: countOutliers(row) }));
  const trivial = run.trivial?.[metric] ?? null;
  // The checks have marks of their own in the queue; only a failed one is said again.
  const flags = (run.checks ?? []).filter(({ state }) => state === 'fail').map(({ name }) => `${name} fails`);
  const outliers = levels.reduce((sum, row) => sum + row.outliers, 0);
  if (outliers > 0) flags.push(`${outliers} ${outliers === 1 ? 'draw' : 'draws'} beyond 3 sd`);
  const lowest = levels[0]?.median ?? null;
  const { better } = getMetric(metric);
  if (trivial !== null && lowest !== null && lossOf(lowest, better) >= lossOf(trivial, better)) flags.push('trivial or worse at least noise');
  return { metric, levels, trivial, flags };
}

/** Draws further than three standard deviations above the mean of their level. */
export function countOutliers({ draws, mean, sd }: Pick<LevelStatistics, 'draws' | 'mean' | 'sd'>): number {
  if (mean === null || sd === null || sd === 0) return 0;
  return draws.filter((value) => value !== null && value - mean > 3 * sd).length;
}
