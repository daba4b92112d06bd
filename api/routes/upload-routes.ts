import { arrayResponseSchema, arrayUploadResponseSchema, frameUploadRequestSchema, frameUploadResponseSchema } from '../../shared/contracts/arrays';
import { z } from 'zod';
import { encodeArray } from '../../shared/domain/array-encoding';
import { sha256Schema } from '../../shared/domain/truth-definition';
import { AppError } from '../../shared/errors.ts';
import { defineRoute, type Route } from '../http/define-route.ts';
import { fromBlob } from '../entities/float64-blob.ts';
import { findReadableArray } from '../services/arrays/find-array.ts';
import { storeArray } from '../services/arrays/store-array.ts';
import { describeFrames, describeValues } from '../services/arrays/describe-values.ts';
import { readArrayFile, readFramesFile } from '../services/files/read-upload.ts';

const maxArrayBytes = 24 * 1024 * 1024;
const maxFrameBytes = 64 * 1024 * 1024;

const needFile = <T>(file: T | undefined): T => {
  if (!file) throw new AppError('file-rejected', "Send the file in the multipart field 'file'.");
  return file;
};

const uploadArray = defineRoute({
  method: 'post',
  path: '/arrays',
  tag: 'uploads',
  summary: 'Upload a ground truth as PNG, .npy or CSV',
  description: 'Rows run from the top of the image down. PNG: stored samples over their largest value, colours by ITU-R BT.709 luma, transparent pixels over black.',
  permission: 'array.upload',
  limit: 'upload',
  file: { field: 'file', maxBytes: maxArrayBytes, description: 'PNG, .npy (two-dimensional, numeric) or CSV, at most 1024 x 1024' },
  response: arrayUploadResponseSchema,
  status: 201,
  handle: async ({ em, deps, actor, requestId, file }) => {
    const { name, bytes } = needFile(file);
    const { format, ...table } = readArrayFile(name, bytes);
    const stored = await storeArray(em, { actor, now: deps.clock(), requestId, kind: 'array', format, table, fileName: name, fileSize: bytes.length });
    return { sha256: stored.sha256, rows: table.rows, cols: table.cols, format, fileName: name.slice(0, 200), fileSize: bytes.length, ...describeValues(table.values) };
  },
});

const readArray = defineRoute({
  method: 'get',
  path: '/arrays/:sha256',
  tag: 'uploads',
  summary: 'Values of an uploaded array',
  permission: 'public',
  params: z.strictObject({ sha256: sha256Schema }),
  response: arrayResponseSchema,
  etag: ({ sha256 }) => sha256,
  handle: async ({ em, deps, actor, params }) => {
    const array = await findReadableArray(em, { sha256: params.sha256, actor, now: deps.clock() });
    return { sha256: array.sha256, values: encodeArray(fromBlob(array.values.unwrap() ?? new Uint8Array()), [array.rows, array.cols]) };
  },
});

const uploadFrames = defineRoute({
  method: 'post',
  path: '/frames',
  tag: 'uploads',
  summary: 'Upload measured frames as CSV',
  description: 'One row a frame, the reference frame first. A row of the wrong length, an empty cell, text or a value that is not finite is refused with its row and column.',
  permission: 'array.upload',
  limit: 'upload',
  file: { field: 'file', maxBytes: maxFrameBytes, description: 'CSV in UTF-8' },
  body: frameUploadRequestSchema,
  response: frameUploadResponseSchema,
  status: 201,
  handle: async ({ em, deps, actor, requestId, body, file }) => {
    const { name, bytes } = needFile(file);
    const table = readFramesFile(bytes, body.valuesPerFrame);
    const stored = await storeArray(em, { actor, now: deps.clock(), requestId, kind: 'frames', format: 'csv', table, fileName: name, fileSize: bytes.length });
    return { sha256: stored.sha256, frames: table.rows, valuesPerFrame: table.cols, fileName: name.slice(0, 200), fileSize: bytes.length, ...describeFrames(table) };
  },
});

export const uploadRoutes: readonly Route[] = [uploadArray, readArray, uploadFrames];
