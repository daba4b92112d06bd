import { NotFoundError, UniqueConstraintViolationException, OptimisticLockError } from '@mikro-orm/core';
import type { ErrorRequestHandler, RequestHandler } from 'express';
import { MulterError } from 'multer';
import { ZodError } from 'zod';
import { AppError, errorTable, type Issue } from '../../shared/errors.ts';
import type { Problem } from '../../shared/contracts/problem.ts';

/** The one place where an error becomes an answer. Anything unknown is a constant 500; its cause goes to the log. */
export const problemHandler: ErrorRequestHandler = (error: unknown, req, res, next) => {
  if (res.headersSent) {
    next(error);
    return;
  }
  const known = toAppError(error);
  if (known.code === 'internal') req.log.error({ err: error }, 'request failed');
  const { status, title } = errorTable[known.code];
  const problem: Problem = {
    type: `/api#problem-${known.code}`,
    title,
    status,
    detail: known.detail,
    code: known.code,
    // The path alone: a query may hold what must not be repeated.
    instance: req.originalUrl.split('?')[0] ?? '/',
    requestId: String(req.id),
    ...(known.issues && known.issues.length > 0 ? { issues: known.issues.map((issue) => ({ ...issue, path: [...issue.path] })) } : {}),
    ...(known.extra ? { extra: known.extra } : {}),
  };
  if (known.code === 'not-signed-in') res.set('WWW-Authenticate', 'Bearer realm="api"');
  res.status(status).set('Cache-Control', 'no-store').type('application/problem+json').send(JSON.stringify(problem));
};

export const unknownAddress: RequestHandler = (_req, _res, next) => {
  next(new AppError('not-found', 'The API has no such address. /api/v1/openapi.json lists them all.'));
};

export function toAppError(error: unknown): AppError {
  if (error instanceof AppError) return error;
  if (error instanceof ZodError) return new AppError('validation-failed', 'Correct the fields named in issues.', zodIssues(error));
  if (error instanceof MulterError) return multerProblem(error);
  if (error instanceof NotFoundError) return new AppError('not-found', 'Nothing is registered here.');
  if (error instanceof UniqueConstraintViolationException) {
    return new AppError('duplicate', 'Something with the same name or content exists already.', undefined, { cause: error });
  }
  if (error instanceof OptimisticLockError) {
    return new AppError('conflict', 'Somebody changed this meanwhile. Load it again.', undefined, { cause: error });
  }
  const status = statusOf(error);
  if (status === 413) return new AppError('too-large', 'The body is larger than this address takes.');
  if (status === 404) return new AppError('not-found', 'There is no such file.');
  if (status !== undefined && status >= 400 && status < 500) {
    return new AppError('bad-request', 'The body or the address cannot be read. Send valid JSON in UTF-8.', undefined, { cause: error });
  }
  return new AppError('internal', 'The fault is on this side and was written down. Quote the requestId when you report it.');
}

export function zodIssues(error: ZodError): Issue[] {
  return error.issues.map((issue) => ({
    path: issue.path.map((part) => (typeof part === 'number' ? part : String(part))),
    message: issue.message,
  }));
}

function multerProblem(error: MulterError): AppError {
  const path = error.field ? [error.field] : [];
  if (error.code === 'LIMIT_FILE_SIZE') return new AppError('too-large', 'The file is larger than this address takes.', [{ path, message: 'Too large.' }]);
  if (error.code === 'LIMIT_UNEXPECTED_FILE') {
    return new AppError('file-rejected', `No file is expected in '${error.field ?? 'this field'}'.`, [{ path, message: 'Not expected.' }]);
  }
  return new AppError('bad-request', 'The multipart body cannot be read.', [{ path, message: error.message }]);
}

function statusOf(error: unknown): number | undefined {
  if (typeof error !== 'object' || error === null || !('status' in error)) return undefined;
  return typeof error.status === 'number' ? error.status : undefined;
}
