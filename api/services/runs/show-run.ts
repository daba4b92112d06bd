import type { EntityManager } from '@mikro-orm/sqlite';
import type { RunDetail } from '../../../shared/contracts/runs';
import { axisWords } from '../../../shared/domain/axes';
import { can, type Actor } from '../../../shared/domain/permissions.ts';
import { mayMove, verdicts } from '../../../shared/domain/states';
import { VerdictEntity } from '../../entities/run.ts';
import { SimulationEntity, type Simulation } from '../../entities/simulation.ts';
import { levelTable, runSheets } from '../figures/run-tables.ts';
import { loadRunFigures } from '../figures/load-run-figures.ts';
import { countOpenQuestions } from '../review/comments.ts';
import { metrics } from '../../../solvers/metrics/registry';
import { describeProblem } from '../../../solvers/problems/registry';
import { noiseModelName } from '../benches/noise-words.ts';
import { axisOf } from './axis-of.ts';
import { runSubject, type LoadedRun } from './find-run.ts';
import { toRunSummary } from './run-summary.ts';

/** In words, as the pages write dates; the exact instant is in finishedAt. */
const written = new Intl.DateTimeFormat('en-GB', { dateStyle: 'long', timeStyle: 'short', timeZone: 'UTC' });

/** A run with every table of figures. One that is under way shows the trials it has. */
export async function showRun(em: EntityManager, input: { readonly run: LoadedRun; readonly actor: Actor | null; readonly now: Date; readonly secondsLeft?: number | null }): Promise<RunDetail> {
  const { run, actor, now } = input;
  const version = run.phantomVersion.$;
  const [simulation, figures, given, questions] = await Promise.all([
    em.findOneOrFail(SimulationEntity, { contentHash: version.definitionHash }),
    loadRunFigures(em, run),
    em.find(VerdictEntity, { run: run.id }, { populate: ['by'], orderBy: { createdAt: 'desc' } }),
    countOpenQuestions(em, [run.id]),
  ]);
  const trivial = run.trivial ?? {};
  return {
    ...toRunSummary(run, now, input.secondsLeft),
    noiseModel: run.noiseModel,
    axis: axisOf(run),
    ladder: run.ladder,
    draws: run.draws,
    seed: run.seed,
    rankingMetric: run.entry.$.bench.$.rankingMetric,
    noiseReference: version.definition.noiseReference,
    dataKind: version.definition.dataKind,
    unit: simulation.summary.unit,
    background: simulation.summary.background,
    modelErrorFloor: simulation.modelErrorFloor,
    grid: simulation.summary.grid,
    problem: describeProblem(version.definition),
    table: Object.fromEntries(metrics.map(({ key }) => [key, levelTable(figures, run.ladder, key)])),
    trivial: Object.fromEntries(metrics.map(({ key }) => [key, trivial[key] ?? null])),
    sheets: runSheets(run, figures),
    moments: run.ladder.map((_, level) => run.levelMoments?.[level] ?? null),
    checks: run.checks ?? [],
    secondsPerReconstruction: run.secondsPerReconstruction ?? null,
    timeRatio: run.timeRatio ?? null,
    configuration: run.configuration,
    provenance: provenanceOf(run, simulation),
    verdicts: given.map((row) => ({ verdict: row.verdict, reason: row.reason, by: { handle: row.by.$.handle }, at: row.createdAt.toISOString(), inspected: row.inspected })),
    reviewer: run.reviewer ? { handle: run.reviewer.$.handle } : null,
    openQuestions: questions.get(run.id) ?? 0,
    may: mayDo(run, actor),
  };
}

function mayDo(run: LoadedRun, actor: Actor | null): RunDetail['may'] {
  const subject = runSubject(run);
  const owns = can(actor, 'run.cancel', subject);
  const free = run.review !== 'in-review' || !run.reviewer || run.reviewer.id === actor?.id;
  return {
    cancel: owns && mayMove.run(run.state, 'cancelled'),
    requeue: owns && (run.state === 'failed' || run.state === 'cancelled'),
    recompute: can(actor, 'run.recompute', subject) && run.state === 'finished',
    review: can(actor, 'run.review', subject) && run.state === 'finished' && free && verdicts.some((verdict) => mayMove.review(run.review, verdict)),
    comment: can(actor, 'run.comment', subject),
  };
}

/** Everything needed to repeat the run. */
function provenanceOf(run: LoadedRun, simulation: Simulation): RunDetail['provenance'] {
  const entry = run.entry.$;
  const bench = entry.bench.$;
  const solver = entry.solverVersion.$;
  const phantom = run.phantomVersion.$;
  const { summary } = simulation;
  return [
    { what: 'Phantom', detail: `${phantom.phantom.id}, ${phantom.name}, version ${phantom.n}`, hash: phantom.contentHash },
    {
      what: 'Simulation',
      detail: `${[summary.simulation.kind, ...(summary.simulation.unknowns > 0 ? [`${summary.simulation.unknowns} unknowns`] : [])].join(', ')}, by this registry, code ${simulation.codeVersion}; it never inverts`,
      hash: simulation.contentHash,
    },
    { what: 'Inversion model', detail: phantom.definition.family === 'electrical-impedance' ? `${summary.inversion.cells} cells, ${summary.inversion.nodes} nodes, another mesh than the simulation` : `${summary.inversion.cells} unknowns, another model than the simulation`, hash: null },
    { what: 'Solver', detail: `${solver.solver.$.id}, ${solver.solver.$.name}, version ${solver.n}`, hash: solver.contentHash },
    { what: 'Bench', detail: `${bench.id}, ${bench.title}, revision ${bench.revision}`, hash: bench.contentHash },
    { what: 'Noise', detail: `${noiseModelName(run.noiseModel)}, relative to the ${phantom.definition.noiseReference}; ${levelsWords(run)}, ${run.draws} draws each, seed ${run.seed}`, hash: null },
    { what: 'Code', detail: run.codeVersion ? `Version ${run.codeVersion}` : 'Not started', hash: null },
    { what: 'Result', detail: run.finishedAt ? `Over the images of ${run.total} draws, finished ${written.format(run.finishedAt)} UTC` : 'Not finished', hash: run.resultHash ?? null },
  ];
}

function levelsWords(run: Pick<LoadedRun, 'axis' | 'ladder'>): string {
  const axis = axisOf(run);
  return axis.key === 'noise' ? `${run.ladder.length} levels` : `${Number((100 * axis.noise).toPrecision(3))} % at ${run.ladder.length} levels of another axis: ${axisWords[axis.key].name.toLowerCase()}`;
}
