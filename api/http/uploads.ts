import type { Request, Response } from 'express';
import multer from 'multer';
import { AppError } from '../../shared/errors.ts';
import type { FileSpec, UploadedFile } from './define-route.ts';

/** Reads one file and the text fields of a multipart body into memory, within the limits of the route. */
export function readUpload(req: Request, res: Response, spec: FileSpec): Promise<{ fields: unknown; file: UploadedFile | undefined }> {
  if (!req.is('multipart/form-data')) {
    if (spec.optional) return Promise.resolve({ fields: req.body, file: undefined });
    throw new AppError('bad-request', `Send multipart/form-data with the file in the field '${spec.field}'.`);
  }
  const parse = multer({
    storage: multer.memoryStorage(),
    // File names arrive as latin1 unless told otherwise.
    defParamCharset: 'utf8',
    limits: { fileSize: spec.maxBytes, files: 1, fields: 20, fieldSize: 1_000_000, fieldNameSize: 100, headerPairs: 50 },
  }).single(spec.field);
  return new Promise((resolve, reject) => {
    parse(req, res, (error: unknown) => {
      if (error) reject(error instanceof Error && error.name !== 'MulterError' ? new AppError('bad-request', 'The multipart body cannot be read.', undefined, { cause: error }) : error);
      else resolve({ fields: { ...(req.body as object | undefined) }, file: req.file ? { name: req.file.originalname, bytes: req.file.buffer } : undefined });
    });
  });
}
