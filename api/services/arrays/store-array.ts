import type { EntityManager } from '@mikro-orm/sqlite';
import { sha256Hex } from '../../../solvers/core/hash';
import { ArrayEntity, ArrayUploadEntity, type ArrayFormat, type ArrayKind, type StoredArray } from '../../entities/stored-array.ts';
import { toBlob } from '../../entities/float64-blob.ts';
import { UserEntity } from '../../entities/user.ts';
import type { Acting } from '../acting.ts';
import { recordAudit } from '../audit/record-audit.ts';
import type { NumericTable } from '../files/numeric-table.ts';

/** Keeps an array once, whoever sends it, and notes who sent it. */
export async function storeArray(
  em: EntityManager,
  input: Acting & {
    readonly kind: ArrayKind;
    readonly format: ArrayFormat;
    readonly table: NumericTable;
    readonly fileName: string;
    readonly fileSize: number;
  },
): Promise<StoredArray> {
  const { actor, now, kind, table } = input;
  const sha256 = sha256Hex(table.values);
  const key = { sha256, kind, rows: table.rows, cols: table.cols };
  return em.transactional(async (inner) => {
    let array = await inner.findOne(ArrayEntity, key);
    if (!array) {
      array = inner.create(ArrayEntity, { ...key, format: input.format, fileName: input.fileName.slice(0, 200), fileSize: input.fileSize, values: toBlob(table.values) });
      recordAudit(inner, {
        actor, at: now, action: 'array.uploaded', subject: { type: 'array', id: sha256 },
        after: { kind, rows: table.rows, cols: table.cols, fileName: array.fileName }, requestId: input.requestId,
      });
    }
    const user = inner.getReference(UserEntity, actor.id);
    if (!(await inner.findOne(ArrayUploadEntity, { array, user }))) inner.create(ArrayUploadEntity, { array, user });
    await inner.flush();
    return array;
  });
}
