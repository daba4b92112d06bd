import type { EntityManager } from '@mikro-orm/sqlite';
import type { z } from 'zod';
import type { phantomCreateSchema, phantomVersionCreateSchema, phantomVersionUpdateSchema } from '../../../shared/contracts/phantoms';
import { AppError } from '../../../shared/errors.ts';
import { GroupEntity, type Group } from '../../entities/group.ts';
import { PhantomEntity, PhantomVersionEntity, type Phantom } from '../../entities/phantom.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import { freeSlug, nextId } from '../identifiers.ts';
import { checkUploads, contentHashes, refuseDuplicate } from './check-content.ts';
import { mayReadVersion } from './phantom-access.ts';
import type { LoadedPhantom, PhantomAt } from './find-phantom.ts';

type Terms = z.output<typeof phantomVersionUpdateSchema>;

/**
 * A new phantom with its first version as a draft.
 * @throws AppError 'validation-failed', or 'duplicate' when the same content is registered already
 */
export async function createPhantom(em: EntityManager, input: Acting & { readonly group: Pick<Group, 'id'>; readonly phantom: z.output<typeof phantomCreateSchema> }): Promise<string> {
  const { actor, now, group } = input;
  const { group: _slug, ...terms } = input.phantom;
  await checkUploads(em, { actor, now, content: terms });
  return em.transactional(async (inner) => {
    const phantom = inner.create(PhantomEntity, {
      id: await nextId(inner, 'phantom'),
      slug: await freeSlug(terms.name, async (slug) => reservedSlugs.has(slug) || (await inner.count(PhantomEntity, { slug })) > 0),
      family: terms.definition.family,
      group: inner.getReference(GroupEntity, group.id),
      name: terms.name,
    });
    await addVersion(inner, { ...input, phantom, n: 1, terms: { ...terms, whatChanged: '' } });
    await inner.flush();
    return phantom.slug;
  });
}
/** Addresses of pages that lie beside those of phantoms. */
const reservedSlugs = new Set(['new']);

/** The next version as a draft. One draft at a time; the versions before stay as they are. */
export async function createPhantomVersion(em: EntityManager, input: Acting & { readonly phantom: LoadedPhantom; readonly terms: z.output<typeof phantomVersionCreateSchema> }): Promise<number> {
  const { actor, now, phantom, terms } = input;
  const open = phantom.versions.getItems().find((version) => version.state !== 'published' && version.state !== 'withdrawn');
  if (open) throw new AppError('conflict', `Version ${open.n} is ${open.state === 'submitted' ? 'with a reviewer' : 'still a draft'}. Change that one, or withdraw it first.`);
  if (terms.definition.family !== phantom.family)
    throw new AppError('validation-failed', 'A version stays in the family of its phantom.', [{ path: ['definition', 'family'], message: `Must be ${phantom.family}.` }]);
  await checkUploads(em, { actor, now, content: terms });
  return em.transactional(async (inner) => {
    const n = 1 + Math.max(0, ...phantom.versions.getItems().map((version) => version.n));
    await addVersion(inner, { ...input, phantom, n, terms });
    await inner.flush();
    return n;
  });
}

/** Changes a draft, or a version for which changes were requested (it becomes a draft again). */
export async function updateDraft(em: EntityManager, input: Acting & PhantomAt & { readonly terms: Terms }): Promise<void> {
  const { actor, now, phantom, version, terms } = input;
  if (version.state !== 'draft' && version.state !== 'changes-requested')
    throw new AppError('conflict', `Version ${version.n} is ${version.state}: it never changes again. Make the next version.`);
  await checkUploads(em, { actor, now, content: terms });
  const hashes = contentHashes(terms);
  await em.transactional(async (inner) => {
    await refuseDuplicate(inner, hashes.contentHash, readableBy(inner, actor), version.id);
    const before = { version: version.n, state: version.state, contentHash: version.contentHash };
    const { name, description, licence, definition, frames, sealedUntil, whatChanged } = terms;
    Object.assign(version, { name, description, licence, definition, frames, sealedUntil, whatChanged, ...hashes, state: 'draft' as const });
    phantom.name = nameOf(phantom);
    recordAudit(inner, {
      actor, at: now, action: 'phantom.changed', subject: { type: 'phantom', id: phantom.id }, groupId: phantom.group.id,
      before, after: { version: version.n, state: 'draft', contentHash: hashes.contentHash }, requestId: input.requestId,
    });
    await inner.flush();
  });
}

/** Lists show the newest published name; before the first publication, the newest. */
const nameOf = (phantom: LoadedPhantom): string => {
  const versions = phantom.versions.getItems();
  return (versions.findLast((version) => version.state === 'published') ?? versions.at(-1))?.name ?? phantom.name;
};

async function addVersion(em: EntityManager, input: Acting & { readonly phantom: Pick<Phantom, 'id' | 'group'>; readonly n: number; readonly terms: Terms }): Promise<void> {
  const { actor, now, phantom, n, terms } = input;
  const hashes = contentHashes(terms);
  await refuseDuplicate(em, hashes.contentHash, readableBy(em, actor));
  em.create(PhantomVersionEntity, {
    phantom: em.getReference(PhantomEntity, phantom.id),
    n,
    state: 'draft',
    name: terms.name,
    description: terms.description,
    licence: terms.licence,
    definition: terms.definition,
    ...hashes,
    whatChanged: terms.whatChanged,
    frames: terms.frames,
    sealedUntil: terms.sealedUntil,
    createdBy: em.getReference(UserEntity, actor.id),
    submittedBy: null,
    submittedAt: null,
    publishedAt: null,
    withdrawnAt: null,
    withdrawnReason: null,
  });
  recordAudit(em, {
    actor, at: now, action: n === 1 ? 'phantom.created' : 'phantom.version-created', subject: { type: 'phantom', id: phantom.id }, groupId: phantom.group.id,
    after: { version: n, state: 'draft', contentHash: hashes.contentHash }, requestId: input.requestId,
  });
}

const readableBy = (em: EntityManager, actor: Acting['actor']) => async (versionId: string): Promise<boolean> => {
  const version = await em.findOne(PhantomVersionEntity, { id: versionId }, { populate: ['phantom'] });
  return version !== null && mayReadVersion(actor, version.phantom.$, version);
};
