import type { EntityManager } from '@mikro-orm/sqlite';
import type { Actor } from '../../../shared/domain/permissions.ts';
import { AppError } from '../../../shared/errors.ts';
import { fromBlob } from '../../entities/float64-blob.ts';
import { PhantomVersionEntity } from '../../entities/phantom.ts';
import { ArrayEntity, ArrayUploadEntity, type StoredArray } from '../../entities/stored-array.ts';
import { mayReadVersion, maySeeTruth } from '../phantoms/phantom-access.ts';

/** The values of a stored array. @throws AppError 'not-found'. */
export async function loadArrayValues(em: EntityManager, key: { sha256: string; kind: 'array' | 'frames'; rows: number; cols: number }): Promise<Float64Array> {
  // Callers hand over whole definitions: only these four are columns.
  const { sha256, kind, rows, cols } = key;
  const array = await em.findOne(ArrayEntity, { sha256, kind, rows, cols }, { populate: ['values'] });
  if (!array) throw new AppError('not-found', `No ${key.rows} x ${key.cols} ${key.kind === 'array' ? 'array' : 'file of frames'} with the hash ${key.sha256} was uploaded.`);
  return fromBlob(array.values.$);
}

/**
 * An array that the reader may see: their own upload, or one that a readable phantom version shows. A ground truth that is
 * sealed to the reader stays hidden under its hash as well.
 * @throws AppError 'not-found'
 */
export async function findReadableArray(em: EntityManager, input: { readonly sha256: string; readonly actor: Actor | null; readonly now: Date }): Promise<StoredArray> {
  const arrays = await em.find(ArrayEntity, { sha256: input.sha256 }, { populate: ['values'], orderBy: { createdAt: 'asc' } });
  for (const array of arrays) if (await mayReadArray(em, array, input)) return array;
  throw new AppError('not-found', 'No array with this hash was uploaded, or you may not read it.');
}

/** Whether the account sent exactly this array, or may read it through a phantom. */
export async function mayUseArray(
  em: EntityManager,
  input: { readonly actor: Actor; readonly now: Date; readonly sha256: string; readonly kind: 'array' | 'frames'; readonly rows: number; readonly cols: number },
): Promise<boolean> {
  const { sha256, kind, rows, cols } = input;
  const array = await em.findOne(ArrayEntity, { sha256, kind, rows, cols });
  return array !== null && mayReadArray(em, array, input);
}

async function mayReadArray(em: EntityManager, array: StoredArray, input: { readonly actor: Actor | null; readonly now: Date }): Promise<boolean> {
  const { actor, now } = input;
  if (actor && (await em.count(ArrayUploadEntity, { array: array.id, user: actor.id })) > 0) return true;
  const versions = await em.find(
    PhantomVersionEntity,
    array.kind === 'array' ? { definition: { truth: { sha256: array.sha256 } } } : { frames: { sha256: array.sha256 } },
    { populate: ['phantom'] },
  );
  return versions.some((version) => mayReadVersion(actor, version.phantom.$, version) && (array.kind === 'frames' || maySeeTruth(actor, version.phantom.$, version, now)));
}
