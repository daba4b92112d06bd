import type { EntityManager } from '@mikro-orm/sqlite';
import type { PhantomDetail, PhantomSummary, PhantomVersionDetail } from '../../../shared/contracts/phantoms';
import { can, type Actor } from '../../../shared/domain/permissions.ts';
import { mayMove } from '../../../shared/domain/states';
import { BenchPhantomEntity } from '../../entities/bench.ts';
import { SimulationEntity } from '../../entities/simulation.ts';
import { phantomLine } from '../benches/phantom-facts.ts';
import { currentVersion, mayEdit, readableVersions, type LoadedPhantom, type LoadedVersion } from './find-phantom.ts';
import { isSealed, maySeeTruth, versionSubject } from './phantom-access.ts';

export interface Reader {
  readonly actor: Actor | null;
  readonly now: Date;
}

/** Runs by phantom version id. */
export async function countVersionRuns(em: EntityManager, versionIds: readonly string[]): Promise<Map<string, number>> {
  if (versionIds.length === 0) return new Map();
  const rows: { version: string; runs: number }[] = await em.execute(
    `select phantom_version_id as version, count(*) as runs from run where phantom_version_id in (${versionIds.map(() => '?').join(', ')}) group by phantom_version_id`,
    [...versionIds],
  );
  return new Map(rows.map(({ version, runs }) => [version, runs]));
}

function toVersionSummary(version: LoadedVersion, now: Date, runs: ReadonlyMap<string, number>): PhantomSummary['current'] {
  return {
    n: version.n,
    state: version.state,
    contentHash: version.contentHash,
    whatChanged: version.whatChanged,
    createdAt: version.createdAt.toISOString(),
    publishedAt: version.publishedAt?.toISOString() ?? null,
    createdBy: { handle: version.createdBy.getEntity().handle },
    sealed: isSealed(version, now),
    sealedUntil: version.sealedUntil ?? null,
    runs: runs.get(version.id) ?? 0,
  };
}

export function toPhantomSummary(phantom: LoadedPhantom, reader: Reader, runs: ReadonlyMap<string, number>): PhantomSummary {
  const current = currentVersion(phantom, reader.actor);
  return {
    id: phantom.id,
    slug: phantom.slug,
    name: current.name,
    family: phantom.family,
    group: { slug: phantom.group.$.slug, name: phantom.group.$.name },
    line: phantomLine(current),
    current: toVersionSummary(current, reader.now, runs),
  };
}

/** A phantom with one of its versions in full: the given one, or the current one. */
export async function showPhantom(em: EntityManager, phantom: LoadedPhantom, reader: Reader, shown?: LoadedVersion): Promise<PhantomDetail> {
  const { actor } = reader;
  const versions = readableVersions(phantom, actor);
  const version = shown ?? currentVersion(phantom, actor);
  const runs = await countVersionRuns(em, versions.map(({ id }) => id));
  const edit = mayEdit(phantom, actor);
  const open = versions.some(({ state }) => state === 'draft' || state === 'submitted' || state === 'changes-requested');
  return {
    ...toPhantomSummary(phantom, reader, runs),
    versions: versions.map((each) => toVersionSummary(each, reader.now, runs)),
    version: await toVersionDetail(em, phantom, version, reader, runs),
    may: {
      edit: edit && (version.state === 'draft' || version.state === 'changes-requested'),
      submit: edit && mayMove.phantom(version.state, 'submitted'),
      withdraw: edit && mayMove.phantom(version.state, 'withdrawn'),
      review: version.state === 'submitted' && can(actor, 'phantom.review', versionSubject(phantom, version)),
      newVersion: edit && !open,
    },
  };
}

async function toVersionDetail(em: EntityManager, phantom: LoadedPhantom, version: LoadedVersion, reader: Reader, runs: ReadonlyMap<string, number>): Promise<PhantomVersionDetail> {
  const simulation = await em.findOne(SimulationEntity, { contentHash: version.definitionHash });
  const member = can(reader.actor, 'content.read', { groupId: phantom.group.id });
  const uses = await em.find(BenchPhantomEntity, { phantomVersion: version.id, ...(member ? {} : { bench: { state: { $ne: 'draft' } } }) }, { populate: ['bench'] });
  const { name, description, licence, definition, frames } = version;
  return {
    ...toVersionSummary(version, reader.now, runs),
    name,
    description,
    licence,
    // Family, geometry and truth stay together; the spread loses that.
    definition: { ...definition, truth: maySeeTruth(reader.actor, phantom, version, reader.now) ? definition.truth : null } as PhantomVersionDetail['definition'],
    frames: frames ? { sha256: frames.sha256, frames: frames.frames, valuesPerFrame: frames.valuesPerFrame, origin: frames.origin, instrument: frames.instrument } : null,
    checks: simulation?.checks ?? [],
    modelErrorFloor: simulation?.modelErrorFloor ?? null,
    verdicts: version.verdicts.getItems().map(({ verdict, reason, by, createdAt }) => ({ verdict, reason, by: { handle: by.getEntity().handle }, at: createdAt.toISOString() })),
    usedIn: uses.map(({ bench }) => ({ slug: bench.$.slug, id: bench.$.id, title: bench.$.title })),
    withdrawnReason: version.withdrawnReason ?? null,
  };
}
