import type { RequestHandler } from 'express';
import { ipKeyGenerator, rateLimit } from 'express-rate-limit';
import { AppError } from '../../shared/errors.ts';
import type { Env } from '../env.ts';
import type { LimitName } from './define-route.ts';

const minuteMs = 60_000;
/** Requests a minute: 'general' and 'sign-in' from one address, the others from one account or else one address. */
const perMinute: Record<LimitName | 'general', number> = {
  general: 2400,
  'sign-in': 30,
  upload: 60,
  simulate: 120,
};

export function makeRateLimits(env: Env): Record<LimitName | 'general', RequestHandler> {
  const make = (name: LimitName | 'general'): RequestHandler => {
    if (env.rateLimit === 0) return (_req, _res, next) => next();
    return rateLimit({
      windowMs: minuteMs,
      limit: Math.max(1, Math.round(perMinute[name] * env.rateLimit)),
      standardHeaders: 'draft-8',
      legacyHeaders: false,
      identifier: name,
      keyGenerator: (req) => `${name}:${req.actor ? `account ${req.actor.id}` : ipKeyGenerator(req.ip ?? 'unknown')}`,
      handler: (_req, res, next) => {
        res.set('Retry-After', '60');
        next(new AppError('too-many-requests', 'Wait a minute and try again.'));
      },
    });
  };
  return { general: make('general'), 'sign-in': make('sign-in'), upload: make('upload'), simulate: make('simulate') };
}
