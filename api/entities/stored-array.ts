import { defineEntity, p, type InferEntity } from '@mikro-orm/core';
import { baseProperties } from './base.ts';
import { UserEntity } from './user.ts';

export const arrayKinds = ['array', 'frames'] as const;
export type ArrayKind = (typeof arrayKinds)[number];
export const arrayFormats = ['png', 'npy', 'csv'] as const;
export type ArrayFormat = (typeof arrayFormats)[number];

/**
 * Uploaded values, row-major, top row first for images, one row a frame for frames. The same values in the same shape are
 * stored once, whoever sends them.
 */
export const ArrayEntity = defineEntity({
  name: 'StoredArray',
  tableName: 'stored_array',
  properties: {
    ...baseProperties,
    /** Of the little-endian Float64 values. */
    sha256: p.string().index('stored_array_sha256_index'),
    kind: p.enum([...arrayKinds]),
    rows: p.integer(),
    cols: p.integer(),
    format: p.enum([...arrayFormats]),
    fileName: p.string(),
    fileSize: p.integer(),
    /** Little-endian Float64. */
    values: p.blob().lazy().hidden(),
  },
  uniques: [{ name: 'stored_array_content_unique', properties: ['sha256', 'kind', 'rows', 'cols'] }],
});
export type StoredArray = InferEntity<typeof ArrayEntity>;

/** Who sent an array: its senders may read it back before any phantom shows it. */
export const ArrayUploadEntity = defineEntity({
  name: 'ArrayUpload',
  tableName: 'array_upload',
  properties: {
    ...baseProperties,
    array: () => p.manyToOne(ArrayEntity).ref(),
    user: () => p.manyToOne(UserEntity).ref().index('array_upload_user_index'),
  },
  uniques: [{ name: 'array_upload_array_user_unique', properties: ['array', 'user'] }],
});
export type ArrayUpload = InferEntity<typeof ArrayUploadEntity>;
