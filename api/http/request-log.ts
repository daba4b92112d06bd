import { randomUUID } from 'node:crypto';
import type { RequestHandler } from 'express';
import { pino, type DestinationStream, type Logger } from 'pino';
import { pinoHttp } from 'pino-http';

const secretQuery = /([?&](?:code|state|token|access_token|client_secret|cursor)=)[^&]*/gi;

export function makeLogger(level: string, destination?: DestinationStream): Logger {
  const options = {
    level,
    serializers: { err: describeError },
    redact: { paths: ['req.headers.cookie', 'req.headers.authorization', 'res.headers["set-cookie"]'], remove: true },
  };
  return destination ? pino(options, destination) : pino(options);
}

/** A database error quotes the statement with its values, and a validation error the row: neither goes to the log. */
function describeError(error: unknown): object {
  if (!(error instanceof Error)) return { type: typeof error };
  const lines = (error.stack ?? '').split('\n');
  const frames = lines.filter((line) => /^\s+at /.test(line)).map((line) => line.trim());
  const lastPart = error.message.split(' - ').at(-1) ?? '';
  return {
    type: error.name,
    message: (lastPart.split('\n')[0] ?? '').slice(0, 300),
    stack: frames.slice(0, 12),
    ...(error.cause === undefined ? {} : { cause: describeError(error.cause) }),
  };
}

/** One line a request. Headers, bodies and secret query values stay out of it. */
export function requestLog(logger: Logger): RequestHandler {
  return pinoHttp({
    logger,
    genReqId: (_req, res) => {
      const id = randomUUID();
      res.setHeader('X-Request-Id', id);
      return id;
    },
    // The wrapped ones would describe an error before describeError sees it.
    wrapSerializers: false,
    serializers: {
      err: describeError,
      req: (req: { id: unknown; method: string; originalUrl: string }) => ({
        id: req.id,
        method: req.method,
        url: req.originalUrl.replace(secretQuery, '$1hidden'),
      }),
      res: (res: { statusCode: number }) => ({ status: res.statusCode }),
    },
    customLogLevel: (_req, res, error) => (error || res.statusCode >= 500 ? 'error' : res.statusCode >= 400 ? 'info' : 'debug'),
  });
}
