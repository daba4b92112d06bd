import type { EntityManager } from '@mikro-orm/sqlite';
import type { SolverDetail, SolverSummary } from '../../../shared/contracts/solvers';
import { solverGlyph } from '../../../shared/domain/glyphs';
import { can, type Actor } from '../../../shared/domain/permissions.ts';
import { EntryEntity } from '../../entities/bench.ts';
import { RunEntity } from '../../entities/run.ts';
import type { SolverVersion } from '../../entities/solver.ts';
import { methods } from '../../../solvers/methods/registry';
import { methodName } from './check-configuration.ts';
import { solverSubject, type LoadedSolver } from './find-solver.ts';

interface Counts {
  readonly runs: number;
  readonly signedOff: number;
}

/** Runs and signed-off runs by solver version id. */
export async function countRuns(em: EntityManager, versionIds: readonly string[]): Promise<Map<string, Counts>> {
  if (versionIds.length === 0) return new Map();
  const rows: { version: string; runs: number; signedOff: number }[] = await em.execute(
    `select e.solver_version_id as version, count(*) as runs,
       sum(r.review in ('signed-off', 'signed-off-with-reservation')) as signedOff
     from entry e join run r on r.entry_id = e.id
     where e.solver_version_id in (${versionIds.map(() => '?').join(', ')}) group by e.solver_version_id`,
    [...versionIds],
  );
  return new Map(rows.map(({ version, runs, signedOff }) => [version, { runs, signedOff }]));
}

/** Versions the reader may see, by number: drafts are the group's own. */
export function visibleVersions(solver: LoadedSolver, actor: Actor | null): SolverVersion[] {
  const member = can(actor, 'content.read', { groupId: solver.group.id });
  return solver.versions.getItems().filter((version) => member || version.registeredAt !== null);
}

/** The newest registered version; where there is none, the newest the reader may see. */
function currentVersion(versions: readonly SolverVersion[]): SolverVersion {
  const newest = versions.findLast((version) => version.state === 'registered') ?? versions.at(-1);
  if (!newest) throw new Error('A solver without a visible version was shown.');
  return newest;
}

export function toSolverSummary(solver: LoadedSolver, actor: Actor | null, counts: ReadonlyMap<string, Counts>): SolverSummary {
  const current = currentVersion(visibleVersions(solver, actor));
  return {
    id: solver.id,
    slug: solver.slug,
    name: solver.name,
    group: { slug: solver.group.$.slug, name: solver.group.$.name },
    methodName: methodName(current.method),
    families: [...(methods.find((method) => method.key === current.method)?.capabilities.families ?? [])],
    glyph: solverGlyph(solver.glyph),
    current: toVersion(current, counts),
  };
}

function toVersion(version: SolverVersion, counts: ReadonlyMap<string, Counts>): SolverSummary['current'] {
  const { runs, signedOff } = counts.get(version.id) ?? { runs: 0, signedOff: 0 };
  return {
    n: version.n,
    state: version.state,
    contentHash: version.contentHash,
    whatChanged: version.whatChanged,
    configuration: version.configuration,
    declaration: { ...version.declaration },
    createdAt: version.createdAt.toISOString(),
    createdBy: { handle: version.createdBy.getEntity().handle },
    registeredAt: version.registeredAt?.toISOString() ?? null,
    withdrawnReason: version.withdrawnReason ?? null,
    runs,
    signedOff,
  };
}

export async function showSolver(em: EntityManager, solver: LoadedSolver, actor: Actor | null): Promise<SolverDetail> {
  const versions = visibleVersions(solver, actor);
  const counts = await countRuns(em, versions.map((version) => version.id));
  const entries = await em.find(
    EntryEntity,
    { solverVersion: { solver: solver.id } },
    { populate: ['bench', 'solverVersion'], orderBy: { createdAt: 'desc' } },
  );
  const runs = await em.find(RunEntity, { entry: { $in: entries.map((entry) => entry.id) } }, { populate: ['phantomVersion.phantom'], orderBy: { id: 'asc' } });
  const subject = solverSubject(solver);
  const edit = can(actor, 'solver.edit', subject);
  return {
    ...toSolverSummary(solver, actor, counts),
    description: solver.description,
    versions: versions.map((version) => toVersion(version, counts)),
    entries: entries.map((entry) => ({
      bench: { slug: entry.bench.$.slug, id: entry.bench.id, title: entry.bench.$.title, state: entry.bench.$.state, axis: entry.bench.$.axis },
      version: entry.solverVersion.$.n,
      runs: runs
        .filter((run) => run.entry.id === entry.id)
        .map((run) => ({ run: run.id, phantom: run.phantomVersion.$.phantom.$.slug, state: run.state, review: run.review })),
    })),
    may: {
      edit,
      withdraw: edit && versions.some((version) => version.state !== 'withdrawn'),
      newVersion: edit,
      enter: can(actor, 'entry.create', subject) && versions.some((version) => version.state === 'registered'),
    },
  };
}
