import type { EntityManager, Loaded } from '@mikro-orm/sqlite';
import { can, type Actor, type Subject } from '../../../shared/domain/permissions.ts';
import { AppError } from '../../../shared/errors.ts';
import { PhantomEntity, type Phantom, type PhantomVersion } from '../../entities/phantom.ts';
import { mayReadVersion, versionSubject } from './phantom-access.ts';

export const phantomParts = ['group', 'versions', 'versions.createdBy', 'versions.verdicts', 'versions.verdicts.by'] as const;
export type LoadedPhantom = Loaded<Phantom, (typeof phantomParts)[number]>;
export type LoadedVersion = PhantomVersion;

/** @throws AppError 'not-found' */
export async function findPhantom(em: EntityManager, slug: string): Promise<LoadedPhantom> {
  const phantom = await em.findOne(PhantomEntity, { slug }, { populate: phantomParts });
  if (!phantom) throw new AppError('not-found', `No phantom has the address '${slug}'.`);
  return phantom;
}

export interface PhantomAt {
  readonly phantom: LoadedPhantom;
  readonly version: LoadedVersion;
}
/** @throws AppError 'not-found' */
export async function findPhantomVersion(em: EntityManager, slug: string, n: number): Promise<PhantomAt> {
  const phantom = await findPhantom(em, slug);
  return { phantom, version: versionOf(phantom, n) };
}

export function versionOf(phantom: LoadedPhantom, n: number): LoadedVersion {
  const version = phantom.versions.getItems().find((candidate) => candidate.n === n);
  if (!version) throw new AppError('not-found', `'${phantom.name}' has no version ${n}.`);
  return version;
}

export const subjectOf = ({ phantom, version }: PhantomAt): Subject => versionSubject(phantom, version);

/** Readable as a whole where any version is. */
export function phantomSubject(phantom: LoadedPhantom): Subject {
  const subjects = phantom.versions.getItems().map((version) => versionSubject(phantom, version));
  return { groupId: phantom.group.id, published: subjects.some((s) => s.published), submitted: subjects.some((s) => s.submitted) };
}

/** Versions the reader may see, by number. */
export const readableVersions = (phantom: LoadedPhantom, actor: Actor | null): LoadedVersion[] =>
  phantom.versions.getItems().filter((version) => mayReadVersion(actor, phantom, version));

/** The newest published version the reader may see; where there is none, the newest of all. */
export function currentVersion(phantom: LoadedPhantom, actor: Actor | null): LoadedVersion {
  const versions = readableVersions(phantom, actor);
  const current = versions.findLast((version) => version.state === 'published') ?? versions.at(-1);
  if (!current) throw new AppError('not-found', 'Nothing is registered here, or you may not read it.');
  return current;
}

export const mayEdit = (phantom: LoadedPhantom, actor: Actor | null): boolean => can(actor, 'phantom.edit', { groupId: phantom.group.id });
