import express, { Router, type Express } from 'express';
import type { Dependencies } from './dependencies.ts';
import { clientFiles } from './http/client-files.ts';
import './http/express-types.ts';
import { mountRoutes } from './http/mount-routes.ts';
import { buildOpenApi } from './http/openapi.ts';
import { problemHandler, unknownAddress } from './http/problem-details.ts';
import { makeRateLimits } from './http/rate-limits.ts';
import { requestLog } from './http/request-log.ts';
import { resolveActor } from './http/resolve-actor.ts';
import { sameOrigin } from './http/same-origin.ts';
import { securityHeaders } from './http/security-headers.ts';
import { sessionMiddleware } from './http/session.ts';
import { SqliteSessionStore } from './http/session-store.ts';
import { allRoutes } from './routes/all-routes.ts';
import { localStandIn } from './sign-in/local-stand-in.ts';
import { signInRouter } from './sign-in/sign-in-router.ts';

const jsonLimit = '1mb';

/** Puts the app together. It never listens. */
export function createApp(deps: Dependencies): Express {
  const { env } = deps;
  if (env.nodeEnv === 'production' && !env.github) throw new Error('The local stand-in for sign-in is refused in production.');
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', env.trustProxy);
  app.use(requestLog(deps.logger));
  app.use(securityHeaders(env));

  const limits = makeRateLimits(env);
  const withSession = sessionMiddleware(env, new SqliteSessionStore(deps.orm, deps.clock));

  const standIn = env.github ? undefined : localStandIn(deps);
  if (standIn) app.use(standIn.router);
  const github = env.github;
  const providerFor = standIn ? standIn.providerFor : () => ({ clientId: github?.clientId ?? '', clientSecret: github?.clientSecret ?? '' });
  app.use('/auth', limits['sign-in'], withSession);
  app.use(signInRouter(deps, providerFor));

  const api = Router();
  api.use((_req, res, next) => {
    res.set('Cache-Control', 'no-store');
    next();
  });
  api.get('/openapi.json', (() => {
    const document = buildOpenApi(allRoutes);
    return (_req, res) => {
      res.set('Cache-Control', 'no-cache').json(document);
    };
  })());
  // The limit comes before the look-up of tokens and sessions, so that guessing is limited too.
  api.use(limits.general, sameOrigin(env), withSession, resolveActor(deps), express.json({ limit: jsonLimit }));
  mountRoutes(api, allRoutes, deps, limits);
  api.use(unknownAddress);
  app.use('/api/v1', api);
  // '/api' itself is a page of the client.
  app.use(['/api/*rest', '/auth/*rest', '/local-github/*rest'], unknownAddress);

  app.use(clientFiles(deps.clientDir));
  app.use(problemHandler);
  return app;
}
