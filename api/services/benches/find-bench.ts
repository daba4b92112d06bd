import type { AxisSetting } from '../../../shared/domain/axes';
import type { EntityManager, Loaded } from '@mikro-orm/sqlite';
import { distinctGlyphs, solverGlyph } from '../../../shared/domain/glyphs';
import type { Subject } from '../../../shared/domain/permissions.ts';
import { AppError } from '../../../shared/errors.ts';
import { contentHash } from '../../../solvers/core/hash';
import { BenchEntity, type Bench, type Entry } from '../../entities/bench.ts';
import type { Group } from '../../entities/group.ts';
import type { Phantom, PhantomVersion } from '../../entities/phantom.ts';
import type { Solver, SolverVersion } from '../../entities/solver.ts';

const parts = [
  'group', 'phantoms', 'phantoms.phantomVersion', 'phantoms.phantomVersion.phantom',
  'entries', 'entries.solverVersion', 'entries.solverVersion.solver', 'entries.solverVersion.solver.group',
] as const;
export type LoadedBench = Loaded<Bench, (typeof parts)[number]>;

/** Phantom versions of a bench in its order, with their phantoms. */
export function phantomsOf(bench: LoadedBench): { readonly version: PhantomVersion; readonly phantom: Phantom }[] {
  return bench.phantoms.getItems().map((row) => {
    const version = row.phantomVersion.getEntity();
    return { version, phantom: version.phantom.getEntity() };
  });
}

export interface BenchEntry {
  readonly entry: Entry;
  readonly version: SolverVersion;
  readonly solver: Solver;
  readonly group: Group;
  /** Mark of the solver on the pages of this bench. */
  readonly glyph: number;
}
/** Entries of a bench in the order of entry, with what was entered and by which group. */
export function entriesOf(bench: LoadedBench): BenchEntry[] {
  const entered = bench.entries.getItems().map((entry) => {
    const version = entry.solverVersion.getEntity();
    const solver = version.solver.getEntity();
    return { entry, version, solver, group: solver.group.getEntity() };
  });
  const glyphs = distinctGlyphs(entered.map(({ solver }) => solverGlyph(solver.glyph)));
  return entered.map((own, at) => ({ ...own, glyph: glyphs[at]! }));
}

export async function findBench(em: EntityManager, slug: string): Promise<LoadedBench> {
  const bench = await em.findOne(BenchEntity, { slug }, { populate: parts, strategy: 'select-in' });
  if (!bench) throw new AppError('not-found', `No bench has the address '${slug}'.`);
  return bench;
}

/** The row alone, for what is answered from memory. @throws AppError 'not-found' */
export async function findBenchRow(em: EntityManager, slug: string): Promise<Bench> {
  const bench = await em.findOne(BenchEntity, { slug });
  if (!bench) throw new AppError('not-found', `No bench has the address '${slug}'.`);
  return bench;
}

export function benchSubject(bench: Pick<Bench, 'state'> & { readonly group: { readonly id: string } }): Subject {
  return { groupId: bench.group.id, published: bench.state !== 'draft' };
}

export interface BenchTerms {
  readonly question: string;
  readonly phantomHashes: readonly string[];
  readonly axis: AxisSetting;
  readonly noiseModel: string;
  readonly ladder: readonly number[];
  readonly draws: number;
  readonly seed: number;
  readonly rankingMetric: string;
}

/** SHA-256 of what the bench asks. A closed bench adds what was answered. */
export function benchHash(terms: BenchTerms, results?: readonly { readonly solver: string; readonly phantom: string; readonly result: string }[]): string {
  const { question, phantomHashes, axis, noiseModel, ladder, draws, seed, rankingMetric } = terms;
  return contentHash({ question, phantoms: phantomHashes, ...(axis.key === 'noise' ? {} : { axis }), ...(noiseModel === 'gaussian' ? {} : { noiseModel }), ladder, draws, seed, rankingMetric, ...(results ? { results } : {}) });
}

export const termsOf = (bench: LoadedBench): BenchTerms => ({
  question: bench.question,
  phantomHashes: phantomsOf(bench).map(({ version }) => version.contentHash),
  axis: bench.axis,
  noiseModel: bench.noiseModel,
  ladder: bench.ladder,
  draws: bench.draws,
  seed: bench.seed,
  rankingMetric: bench.rankingMetric,
});
