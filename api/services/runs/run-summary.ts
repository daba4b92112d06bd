import type { Progress, RunSummary } from '../../../shared/contracts/runs';
import { solverGlyph } from '../../../shared/domain/glyphs';
import { isSealed } from '../phantoms/phantom-access.ts';
import { methodName } from '../solvers/check-configuration.ts';
import type { Run } from '../../entities/run.ts';
import type { LoadedRun } from './find-run.ts';

/** How far a run is, from its own row; `secondsLeft` where the workers know it. */
export function progressOf(run: Pick<Run, 'state' | 'done' | 'total' | 'draws' | 'ladder' | 'levelMedians' | 'startedAt' | 'failure'>, now: Date, secondsLeft?: number | null): Progress {
  const levelsDone = run.draws > 0 ? Math.min(run.ladder.length, Math.floor(run.done / run.draws)) : 0;
  const running = run.state === 'running';
  const elapsed = running && run.startedAt ? (now.getTime() - run.startedAt.getTime()) / 1000 : null;
  return {
    state: run.state,
    done: run.done,
    total: run.total,
    levelsDone,
    currentLevel: running && levelsDone < run.ladder.length ? levelsDone : null,
    secondsLeft: secondsLeft ?? (elapsed !== null && run.done > 0 ? Math.max(0, (elapsed / run.done) * (run.total - run.done)) : null),
    failure: run.failure ?? null,
    medians: run.ladder.map((_, level) => run.levelMedians[level] ?? null),
  };
}

export function toRunSummary(run: LoadedRun, now: Date, secondsLeft?: number | null): RunSummary {
  const entry = run.entry.$;
  const version = entry.solverVersion.$;
  const solver = version.solver.$;
  const group = solver.group.$;
  const phantom = run.phantomVersion.$;
  return {
    id: run.id,
    state: run.state,
    review: run.review,
    reservation: run.reservation ?? null,
    bench: { slug: entry.bench.$.slug, id: entry.bench.id, title: entry.bench.$.title },
    solver: { slug: solver.slug, id: solver.id, name: solver.name, version: version.n, methodName: methodName(version.method) },
    group: { slug: group.slug, name: group.name },
    glyph: solverGlyph(solver.glyph),
    phantom: {
      slug: phantom.phantom.$.slug, id: phantom.phantom.id, name: phantom.name, version: phantom.n, sealed: isSealed(phantom, now), sealedUntil: phantom.sealedUntil ?? null,
    },
    createdAt: run.createdAt.toISOString(),
    finishedAt: run.finishedAt?.toISOString() ?? null,
    submittedBy: { handle: run.submittedBy.$.handle },
    progress: progressOf(run, now, secondsLeft),
    resultHash: run.resultHash ?? null,
  };
}
