import type { EntityManager, Loaded } from '@mikro-orm/sqlite';
import type { Subject } from '../../../shared/domain/permissions.ts';
import { AppError } from '../../../shared/errors.ts';
import { contentHash } from '../../../solvers/core/hash';
import { BenchEntity, type Bench } from '../../entities/bench.ts';

const parts = [
  'group', 'phantoms', 'phantoms.phantomVersion', 'phantoms.phantomVersion.phantom',
  'entries', 'entries.solverVersion', 'entries.solverVersion.solver', 'entries.solverVersion.solver.group',
] as const;
export type LoadedBench = Loaded<Bench, (typeof parts)[number]>;

export async function findBench(em: EntityManager, slug: string): Promise<LoadedBench> {
  const bench = await em.findOne(BenchEntity, { slug }, { populate: parts, strategy: 'select-in' });
  if (!bench) throw new AppError('not-found', `No bench has the address '${slug}'.`);
  return bench;
}

export function benchSubject(bench: Pick<Bench, 'state'> & { readonly group: { readonly id: string } }): Subject {
  return { groupId: bench.group.id, published: bench.state !== 'draft' };
}

export interface BenchTerms {
  readonly question: string;
  readonly phantomHashes: readonly string[];
  readonly ladder: readonly number[];
  readonly draws: number;
  readonly seed: number;
  readonly rankingMetric: string;
}

/** SHA-256 of what the bench asks. A closed bench adds what was answered. */
export function benchHash(terms: BenchTerms, results?: readonly { readonly solver: string; readonly phantom: string; readonly result: string }[]): string {
  const { question, phantomHashes, ladder, draws, seed, rankingMetric } = terms;
  return contentHash({ question, phantoms: phantomHashes, ladder, draws, seed, rankingMetric, ...(results ? { results } : {}) });
}

export const termsOf = (bench: LoadedBench): BenchTerms => ({
  question: bench.question,
  phantomHashes: bench.phantoms.getItems().map((phantom) => phantom.phantomVersion.$.contentHash),
  ladder: bench.ladder,
  draws: bench.draws,
  seed: bench.seed,
  rankingMetric: bench.rankingMetric,
});
