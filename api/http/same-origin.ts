import type { RequestHandler } from 'express';
import { AppError } from '../../shared/errors.ts';
import type { Env } from '../env.ts';

const safeMethods = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Refuses a change that another site's page asks the reader's browser to make. Browsers send Sec-Fetch-Site and Origin
 * themselves and pages cannot forge them. A request with a bearer token carries its own proof and needs neither.
 */
export function sameOrigin(env: Env): RequestHandler {
  return (req, _res, next) => {
    if (safeMethods.has(req.method) || req.get('authorization') !== undefined) {
      next();
      return;
    }
    const site = req.get('sec-fetch-site');
    const origin = req.get('origin');
    const own = env.publicUrl ?? `${req.protocol}://${req.get('host') ?? ''}`;
    const refused =
      (site !== undefined && site !== 'same-origin') ||
      (origin !== undefined && origin !== own) ||
      // Neither header: not a browser of this decade. Without a cookie there is nothing to forge.
      (site === undefined && origin === undefined && req.get('cookie') !== undefined);
    if (refused) throw new AppError('origin-refused', 'Changes are taken from pages of this site, or with a bearer token.');
    next();
  };
}
