import { randomBytes } from 'node:crypto';
import express, { Router, type Request, type RequestHandler } from 'express';
import { AppError } from '../../shared/errors.ts';
import type { Dependencies } from '../dependencies.ts';
import { describeStandIn } from '../services/accounts/describe-session.ts';
import type { StandInAccount } from './demo-accounts.ts';
import type { SignInProvider } from './github-strategy.ts';
import { renderAuthorizePage, standInStyle } from './stand-in-page.ts';

const codeLifeMs = 60_000;
const basePath = '/local-github';

interface Grant {
  readonly account: StandInAccount;
  readonly redirectUri: string;
  readonly until: number;
}

/**
 * A local stand-in for GitHub's sign-in, speaking the same OAuth endpoints, for machines where no client id is set up.
 * It vouches for the demonstration accounts without a password, so it answers this machine only and never runs in
 * production.
 */
export function localStandIn(deps: Dependencies): { router: Router; providerFor: (req: Request) => SignInProvider } {
  if (deps.env.nodeEnv === 'production') throw new Error('The local stand-in for sign-in is refused in production.');
  const clientId = 'local-stand-in';
  const clientSecret = randomBytes(24).toString('hex');
  const codes = new Map<string, Grant>();
  const tokens = new Map<string, Grant>();
  const take = (from: Map<string, Grant>, key: string): Grant | undefined => {
    const grant = from.get(key);
    from.delete(key);
    return grant && grant.until > deps.clock().getTime() ? grant : undefined;
  };
  const grantTo = (into: Map<string, Grant>, account: StandInAccount, redirectUri: string): string => {
    const now = deps.clock().getTime();
    for (const [key, grant] of into) if (grant.until <= now) into.delete(key);
    const key = Buffer.from(deps.rng(24)).toString('base64url');
    into.set(key, { account, redirectUri, until: now + codeLifeMs });
    return key;
  };

  const router = Router();
  router.use(basePath, thisMachineOnly);

  router.get(`${basePath}/login/oauth/authorize`, async (req, res) => {
    const redirectUri = text(req.query['redirect_uri']);
    const own = `${deps.env.publicUrl ?? `${req.protocol}://${req.get('host') ?? ''}`}/auth/github/callback`;
    if (text(req.query['client_id']) !== clientId || redirectUri !== own) {
      throw new AppError('bad-request', 'The stand-in serves the sign-in page of this site only.');
    }
    const back = (params: Record<string, string>): string => {
      const url = new URL(redirectUri);
      for (const [name, value] of Object.entries({ ...params, state: text(req.query['state']) })) url.searchParams.set(name, value);
      return url.href;
    };
    const account = deps.standInAccounts.find(({ handle }) => handle === text(req.query['login']));
    if (account) {
      res.redirect(302, back({ code: grantTo(codes, account, redirectUri) }));
      return;
    }
    const accounts = await describeStandIn(deps.orm.em.fork(), deps.standInAccounts);
    const links = accounts.map(({ handle, line }) => {
      const url = new URL(req.originalUrl, redirectUri);
      url.searchParams.set('login', handle);
      return { handle, line, href: `${url.pathname}${url.search}` };
    });
    res.set('Cache-Control', 'no-store').type('html').send(
      renderAuthorizePage(links, back({ error: 'access_denied', error_description: 'No account was chosen.' }), `${basePath}/style.css`),
    );
  });

  router.post(`${basePath}/login/oauth/access_token`, express.urlencoded({ extended: false, limit: '10kb' }), (req, res) => {
    const body = (req.body ?? {}) as Record<string, unknown>;
    const grant = take(codes, text(body['code']));
    res.set('Cache-Control', 'no-store');
    if (!grant || text(body['client_id']) !== clientId || text(body['client_secret']) !== clientSecret || text(body['redirect_uri']) !== grant.redirectUri) {
      // GitHub answers 200 with an error in the body.
      res.json({ error: 'bad_verification_code', error_description: 'The code is wrong, used or expired.' });
      return;
    }
    res.json({ access_token: grantTo(tokens, grant.account, grant.redirectUri), token_type: 'bearer', scope: 'user:email' });
  });

  const bearer = (req: Request): StandInAccount => {
    const grant = tokens.get(/^(?:Bearer|token) (\S+)$/i.exec(req.get('authorization') ?? '')?.[1] ?? '');
    if (!grant || grant.until <= deps.clock().getTime()) throw new AppError('not-signed-in', 'The stand-in does not know this token.');
    return grant.account;
  };
  router.get(`${basePath}/user`, (req, res) => {
    const account = bearer(req);
    res.json({ id: Number(account.githubId), login: account.handle, name: null, email: null });
  });
  router.get(`${basePath}/user/emails`, (req, res) => {
    res.json([{ email: bearer(req).email, primary: true, verified: true, visibility: null }]);
  });
  router.get(`${basePath}/style.css`, (_req, res) => {
    res.type('css').send(standInStyle);
  });

  const providerFor = (req: Request): SignInProvider => {
    // The server asks itself, whatever name the browser used.
    const self = `http://127.0.0.1:${req.socket.localPort}${basePath}`;
    return {
      clientId,
      clientSecret,
      endpoints: {
        authorizationURL: `${basePath}/login/oauth/authorize`,
        tokenURL: `${self}/login/oauth/access_token`,
        userProfileURL: `${self}/user`,
        userEmailURL: `${self}/user/emails`,
      },
    };
  };
  return { router, providerFor };
}

const thisMachineOnly: RequestHandler = (req, _res, next) => {
  const address = (req.socket.remoteAddress ?? '').replace(/^::ffff:/, '');
  if (address !== '::1' && !address.startsWith('127.')) {
    throw new AppError('forbidden', 'The local stand-in answers this machine only. Set GITHUB_CLIENT_ID to let others sign in.');
  }
  next();
};

function text(value: unknown): string {
  return typeof value === 'string' ? value : '';
}
