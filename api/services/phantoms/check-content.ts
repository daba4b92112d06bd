import type { EntityManager } from '@mikro-orm/sqlite';
import type { MeasuredFrames } from '../../../shared/contracts/phantoms';
import type { Actor } from '../../../shared/domain/permissions.ts';
import type { PhantomDefinition } from '../../../shared/domain/phantom-definition';
import { AppError, type Issue } from '../../../shared/errors.ts';
import { contentHash } from '../../../solvers/core/hash';
import { layoutSize } from '../../../solvers/problems/problem-family';
import { dataLayout } from '../../../solvers/problems/registry';
import { PhantomVersionEntity } from '../../entities/phantom.ts';
import { mayUseArray } from '../arrays/find-array.ts';

export interface PhantomContent {
  readonly definition: PhantomDefinition;
  readonly frames: MeasuredFrames | null;
}

/**
 * Hashes of a version's content: the definition alone keys the simulation; with measured frames they count too. Name,
 * description and licence are not content: a version that changes nothing else is the same version.
 */
export function contentHashes({ definition, frames }: PhantomContent): { definitionHash: string; contentHash: string } {
  const definitionHash = contentHash(definition);
  return { definitionHash, contentHash: frames ? contentHash({ definition, frames: frames.sha256 }) : definitionHash };
}

/**
 * Uploads that the content names exist, have the shape it says and belong to the sender, and frames fit the geometry.
 * @throws AppError 'validation-failed' with an issue at each field
 */
export async function checkUploads(em: EntityManager, input: { readonly actor: Actor; readonly now: Date; readonly content: PhantomContent; readonly basePath?: readonly string[] }): Promise<void> {
  const { actor, now, content, basePath = [] } = input;
  const { truth } = content.definition;
  const issues: Issue[] = [];
  if (truth.kind === 'array' && !(await mayUseArray(em, { actor, now, kind: 'array', sha256: truth.sha256, rows: truth.rows, cols: truth.cols })))
    issues.push({ path: [...basePath, 'definition', 'truth', 'sha256'], message: `No ${truth.rows} x ${truth.cols} array with this hash was uploaded. Upload it first (POST /api/v1/arrays).` });
  const frames = content.frames;
  if (frames) {
    const expected = layoutSize(dataLayout(content.definition));
    if (frames.valuesPerFrame !== expected)
      issues.push({ path: [...basePath, 'frames', 'valuesPerFrame'], message: `A frame of this geometry has ${expected} values, the file has ${frames.valuesPerFrame}.` });
    else if (!(await mayUseArray(em, { actor, now, kind: 'frames', sha256: frames.sha256, rows: frames.frames, cols: frames.valuesPerFrame })))
      issues.push({ path: [...basePath, 'frames', 'sha256'], message: 'No frames with this hash and size were uploaded. Upload them first (POST /api/v1/frames).' });
  }
  if (issues.length > 0) throw new AppError('validation-failed', 'Correct the fields named in issues.', issues);
}

/** The same content is never registered twice. @throws AppError 'duplicate', naming the other only to who may read it. */
export async function refuseDuplicate(em: EntityManager, hash: string, mayRead: (versionId: string) => Promise<boolean>, except?: string): Promise<void> {
  const same = await em.findOne(PhantomVersionEntity, { contentHash: hash, ...(except === undefined ? {} : { id: { $ne: except } }) }, { populate: ['phantom'] });
  if (!same) return;
  const phantom = same.phantom.$;
  if (!(await mayRead(same.id))) {
    throw new AppError('duplicate', 'Exactly this content is registered already, in a draft that you may not read.', [{ path: ['definition'], message: 'Registered already.' }]);
  }
  throw new AppError('duplicate', `Exactly this content is registered already: '${phantom.name}', version ${same.n}.`, [{ path: ['definition'], message: `The same as '${phantom.name}', version ${same.n}.` }], {
    extra: { slug: phantom.slug, version: same.n },
  });
}
