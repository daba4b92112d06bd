import { Router, type Request } from 'express';
import passport from 'passport';
import type { SignInFailure } from '../../shared/contracts/session.ts';
import type { Dependencies } from '../dependencies.ts';
import { renewSession, saveSession } from '../http/session.ts';
import { appointFirstAdministrator } from '../services/accounts/site-roles.ts';
import { signInAccount, type ProviderProfile } from '../services/accounts/sign-in-account.ts';
import { localPath } from './local-path.ts';
import { makeStrategy, type SignInProvider } from './github-strategy.ts';

/** `/auth/github` and its callback. The same code serves GitHub and the stand-in; only the endpoints differ. */
export function signInRouter(deps: Dependencies, providerFor: (req: Request) => SignInProvider): Router {
  const router = Router();
  const strategyFor = (req: Request) =>
    makeStrategy(providerFor(req), `${deps.env.publicUrl ?? `${req.protocol}://${req.get('host') ?? ''}`}/auth/github/callback`);

  router.get('/auth/github', (req, res, next) => {
    req.session.returnTo = localPath(req.query['returnTo']);
    const login = req.query['login'];
    const options = { session: false, ...(typeof login === 'string' && /^[\w-]{1,60}$/.test(login) ? { login } : {}) };
    passport.authenticate(strategyFor(req), options)(req, res, next);
  });

  router.get('/auth/github/callback', (req, res, next) => {
    const returnTo = localPath(req.session.returnTo);
    const fail = (reason: SignInFailure): void => {
      res.redirect(303, `/sign-in?failed=${reason}&returnTo=${encodeURIComponent(returnTo)}`);
    };
    const answered = (error: unknown, profile: ProviderProfile | false | null | undefined): void => {
      if (error) {
        req.log.warn({ reason: error instanceof Error ? error.name : 'unknown' }, 'sign-in failed at the provider');
        fail('unavailable');
        return;
      }
      if (!profile) {
        fail(req.query['error'] === 'access_denied' ? 'denied' : 'expired');
        return;
      }
      finish(req, profile).then(() => res.redirect(303, returnTo), next);
    };
    passport.authenticate(strategyFor(req), { session: false }, answered)(req, res, next);
  });

  async function finish(req: Request, profile: ProviderProfile): Promise<void> {
    // Roles come with a demonstration account only where the stand-in vouches for it.
    const standIn = deps.env.github ? undefined : deps.standInAccounts.find((account) => account.githubId === profile.githubId);
    const em = deps.orm.em.fork();
    const user = await signInAccount(em, profile, deps.clock(), standIn?.siteRoles ?? []);
    if (deps.env.administrators.includes(profile.handle)) await appointFirstAdministrator(em, user, deps.clock());
    await renewSession(req);
    req.session.userId = user.id;
    await saveSession(req);
  }

  return router;
}
