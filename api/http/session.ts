import type { Request, RequestHandler, Response } from 'express';
import session from 'express-session';
import type { Env } from '../env.ts';
import './express-types.ts';
import type { SqliteSessionStore } from './session-store.ts';

export const sessionCookie = 'hadamark.sid';
const fourteenDaysMs = 14 * 24 * 60 * 60 * 1000;

export function sessionMiddleware(env: Env, store: SqliteSessionStore): RequestHandler {
  return session({
    name: sessionCookie,
    secret: env.sessionSecret,
    store,
    resave: false,
    // Nobody gets a cookie for reading.
    saveUninitialized: false,
    rolling: false,
    proxy: env.trustProxy > 0,
    cookie: cookieOptions(env),
  });
}

function cookieOptions(env: Env) {
  return {
    httpOnly: true,
    sameSite: 'lax' as const,
    secure: env.nodeEnv === 'production',
    path: '/',
    maxAge: fourteenDaysMs,
  };
}

/** A new session id for the same browser: an id known before sign-in opens nothing after it. */
export function renewSession(req: Request): Promise<void> {
  return new Promise((resolve, reject) => {
    req.session.regenerate((error: unknown) => (error ? reject(error) : resolve()));
  });
}

export function saveSession(req: Request): Promise<void> {
  return new Promise((resolve, reject) => {
    req.session.save((error: unknown) => (error ? reject(error) : resolve()));
  });
}

export function endSession(req: Request, res: Response): Promise<void> {
  return new Promise((resolve, reject) => {
    req.session.destroy((error: unknown) => {
      if (error) {
        reject(error);
        return;
      }
      res.clearCookie(sessionCookie, { path: '/', httpOnly: true, sameSite: 'lax' });
      resolve();
    });
  });
}
