import type { EntityManager } from '@mikro-orm/sqlite';
import type { BenchDetail, BenchSummary } from '../../../shared/contracts/benches';
import { can, type Actor } from '../../../shared/domain/permissions.ts';
import type { Bench } from '../../entities/bench.ts';
import type { Group } from '../../entities/group.ts';
import { RunEntity } from '../../entities/run.ts';
import { SimulationEntity } from '../../entities/simulation.ts';
import { isSealed } from '../phantoms/phantom-access.ts';
import { methodName } from '../solvers/check-configuration.ts';
import { benchSubject, entriesOf, phantomsOf, type LoadedBench } from './find-bench.ts';
import { phantomLine } from './phantom-facts.ts';

export interface BenchCounts {
  readonly phantoms: number;
  readonly entries: number;
  readonly runs: number;
  readonly finished: number;
}

export async function countBenches(em: EntityManager, ids: readonly string[]): Promise<Map<string, BenchCounts>> {
  if (ids.length === 0) return new Map();
  const marks = ids.map(() => '?').join(', ');
  const rows: ({ id: string } & BenchCounts)[] = await em.execute(
    `select b.id,
       (select count(*) from bench_phantom p where p.bench_id = b.id) as phantoms,
       (select count(*) from entry e where e.bench_id = b.id) as entries,
       (select count(*) from run r join entry e on r.entry_id = e.id where e.bench_id = b.id) as runs,
       (select count(*) from run r join entry e on r.entry_id = e.id where e.bench_id = b.id and r.state = 'finished') as finished
     from bench b where b.id in (${marks})`,
    [...ids],
  );
  return new Map(rows.map((row) => [row.id, row]));
}

export function toBenchSummary(bench: Omit<Bench, 'group' | 'phantoms' | 'entries' | 'createdBy'>, group: Pick<Group, 'slug' | 'name'>, counts: BenchCounts | undefined): BenchSummary {
  return {
    id: bench.id,
    slug: bench.slug,
    title: bench.title,
    question: bench.question,
    family: bench.family,
    axis: bench.axis,
    state: bench.state,
    group: { slug: group.slug, name: group.name },
    phantomCount: counts?.phantoms ?? 0,
    entryCount: counts?.entries ?? 0,
    runsFinished: counts?.finished ?? 0,
    runsTotal: counts?.runs ?? 0,
    createdAt: bench.createdAt.toISOString(),
    closedAt: bench.closedAt?.toISOString() ?? null,
  };
}

/** Model-error floor by definition hash, where the definition was simulated. */
export async function floorsOf(em: EntityManager, definitionHashes: readonly string[]): Promise<Map<string, number>> {
  const simulations = await em.find(SimulationEntity, { contentHash: { $in: [...definitionHashes] } }, { fields: ['contentHash', 'modelErrorFloor'] });
  return new Map(simulations.map(({ contentHash, modelErrorFloor }) => [contentHash, modelErrorFloor]));
}

export async function showBench(em: EntityManager, input: { readonly bench: LoadedBench; readonly actor: Actor | null; readonly now: Date }): Promise<BenchDetail> {
  const { bench, actor, now } = input;
  const onBench = phantomsOf(bench);
  const [counts, floors, runs] = await Promise.all([
    countBenches(em, [bench.id]),
    floorsOf(em, onBench.map(({ version }) => version.definitionHash)),
    em.find(RunEntity, { entry: { bench: bench.id } }, { populate: ['phantomVersion.phantom'], orderBy: { id: 'asc' } }),
  ]);
  const phantoms = onBench.map(({ version, phantom }) => ({
    slug: phantom.slug,
    id: phantom.id,
    name: version.name,
    version: version.n,
    contentHash: version.contentHash,
    sealed: isSealed(version, now),
    sealedUntil: version.sealedUntil ?? null,
    modelErrorFloor: floors.get(version.definitionHash) ?? 0,
    line: phantomLine(version),
    noiseReference: version.definition.noiseReference,
    dataKind: version.definition.dataKind,
  }));
  const worst = phantoms.reduce((most, phantom) => (phantom.modelErrorFloor > most.modelErrorFloor ? phantom : most), phantoms[0] ?? { modelErrorFloor: 0, name: null });
  const subject = benchSubject(bench);
  const edit = can(actor, 'bench.edit', subject);
  return {
    ...toBenchSummary(bench, bench.group.$, counts.get(bench.id)),
    description: bench.description,
    noiseModel: bench.noiseModel,
    ladder: bench.ladder,
    draws: bench.draws,
    seed: bench.seed,
    rankingMetric: bench.rankingMetric,
    revision: bench.revision,
    contentHash: bench.contentHash,
    phantoms,
    entries: entriesOf(bench).map(({ entry, glyph, version, solver, group }) => ({
      glyph,
      solver: { slug: solver.slug, id: solver.id, name: solver.name, version: version.n, methodName: methodName(version.method) },
      group: { slug: group.slug, name: group.name },
      runs: runs
        .filter((run) => run.entry.id === entry.id)
        .map((run) => ({ run: run.id, phantom: run.phantomVersion.$.phantom.$.slug, state: run.state, review: run.review, done: run.done, total: run.total, failure: run.failure ?? null })),
    })),
    modelErrorFloor: worst.modelErrorFloor,
    floorPhantom: worst.name,
    may: {
      edit: edit && bench.state === 'draft',
      open: edit && bench.state === 'draft',
      close: edit && bench.state === 'open',
      enter: bench.state === 'open' && Object.keys(actor?.groups ?? {}).some((groupId) => can(actor, 'entry.create', { groupId })),
    },
  };
}
