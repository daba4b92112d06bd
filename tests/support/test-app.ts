import { randomBytes } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import type { MikroORM } from '@mikro-orm/sqlite';
import { createApp } from '../../api/app.ts';
import type { Dependencies } from '../../api/dependencies.ts';
import { readEnv } from '../../api/env.ts';
import type { User } from '../../api/entities/user.ts';
import { makeLogger } from '../../api/http/request-log.ts';
import { closeEventStreams } from '../../api/http/server-sent-events.ts';
import { makeJobs, type JobsOptions } from '../../api/jobs/jobs.ts';
import { makeMailer } from '../../api/mail/mailer.ts';
import { databaseFile, openDatabase } from '../../api/orm.ts';
import { siteActor } from '../../api/services/audit/record-audit.ts';
import { signInAccount } from '../../api/services/accounts/sign-in-account.ts';
import { addMember, createGroup } from '../../api/services/groups/change-group.ts';
import { createToken } from '../../api/services/tokens/tokens.ts';
import { demoAccounts, type StandInAccount } from '../../api/sign-in/demo-accounts.ts';
import type { GroupRole, SiteRole } from '../../shared/domain/permissions.ts';
import { tokenScopes, type TokenScope } from '../../shared/domain/token-scopes.ts';
import { HttpClient } from './http-client.ts';

interface Options {
  readonly env?: Readonly<Record<string, string>>;
  /** Replaces parts of what the app gets, e.g. a queue. */
  readonly dependencies?: Partial<Dependencies>;
  /** Other limits or another worker entry for the queue. It is not started: `app.deps.jobs.start()`. */
  readonly jobs?: Partial<JobsOptions>;
}

export interface TestApp {
  readonly url: string;
  readonly orm: MikroORM;
  readonly deps: Dependencies;
  /** Nobody signed in. */
  readonly visitor: HttpClient;
  /** Makes the account unless it exists. */
  account(handle: string, siteRoles?: readonly SiteRole[]): Promise<User>;
  /** Signs in through the stand-in, over every redirect; the account is made when it does not exist. */
  signInAs(handle: string, siteRoles?: readonly SiteRole[]): Promise<HttpClient>;
  /** A client with a bearer token instead of cookies. */
  tokenFor(handle: string, scopes?: readonly TokenScope[]): Promise<HttpClient>;
  /** Makes a group with its members. */
  group(name: string, members: Readonly<Record<string, readonly GroupRole[]>>): Promise<{ id: string; slug: string }>;
  /** Moves the app's clock. */
  advance(milliseconds: number): void;
  /** Lines of the log so far. */
  log(): string;
  stop(): Promise<void>;
}

/** The whole app on a migrated database of its own, listening on a free port of this machine. */
export async function startTestApp(options: Options = {}): Promise<TestApp> {
  const dataDir = mkdtempSync(path.join(tmpdir(), 'hadamark-test-'));
  const env = readEnv({ NODE_ENV: 'test', DATA_DIR: dataDir, LOG_LEVEL: 'debug', RATE_LIMIT: 'off', SEED_DEMO: '0', WORKERS: '1', ...options.env });
  const lines: string[] = [];
  const logger = makeLogger(env.logLevel, { write: (line: string) => void lines.push(line) });
  const orm = await openDatabase(databaseFile(dataDir));
  let offset = 0;
  const clock = (): Date => new Date(Date.now() + offset);
  const accounts: StandInAccount[] = [...demoAccounts];
  const mailer = makeMailer({ orm, env, clock, logger });
  const deps: Dependencies = {
    orm,
    env,
    clock,
    rng: randomBytes,
    mailer,
    jobs: makeJobs({ orm, clock, logger, mailer, workers: env.workers, origin: 'http://site.example', ...options.jobs }),
    logger,
    standInAccounts: accounts,
    clientDir: path.join(dataDir, 'no-client'),
    ...options.dependencies,
  };
  const app = createApp(deps);
  const server = app.listen(0, '127.0.0.1');
  await new Promise<void>((resolve, reject) => {
    server.once('listening', resolve);
    server.once('error', reject);
  });
  const url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;

  const standInAccount = (handle: string, siteRoles: readonly SiteRole[]): StandInAccount => {
    const known = accounts.find((account) => account.handle === handle);
    if (known) return known;
    const made = { githubId: String(20_000 + accounts.length), handle, email: `${handle}@hadamark.example`, siteRoles };
    accounts.push(made);
    return made;
  };
  const account = (handle: string, siteRoles: readonly SiteRole[] = []): Promise<User> => {
    const known = standInAccount(handle, siteRoles);
    return signInAccount(orm.em.fork(), known, clock(), known.siteRoles);
  };
  return {
    url,
    orm,
    deps,
    visitor: new HttpClient(url),
    account,
    signInAs: async (handle, siteRoles = []) => {
      standInAccount(handle, siteRoles);
      const client = new HttpClient(url);
      await client.get(`/auth/github?login=${handle}&returnTo=/account`, { follow: true });
      const session = await client.get('/api/v1/session');
      const signedIn = (session.body as { account: { handle: string } | null }).account?.handle;
      if (signedIn !== handle) throw new Error(`Signing in as ${handle} failed: ${session.text}`);
      return client;
    },
    tokenFor: async (handle, scopes = tokenScopes) => {
      const user = await account(handle);
      const actor = { id: user.id, handle, siteRoles: user.siteRoles, groups: {} };
      const { token } = await createToken(orm.em.fork(), { actor, now: clock() }, randomBytes, { name: 'test', scopes, expiresInDays: 30 });
      return new HttpClient(url, token);
    },
    group: async (name, members) => {
      const em = orm.em.fork();
      const handles = Object.keys(members);
      const owner = handles.find((handle) => members[handle]?.includes('owner'));
      if (owner === undefined) throw new Error('A group needs an owner.');
      const user = await account(owner);
      const acting = { actor: { id: user.id, handle: owner, siteRoles: [], groups: {} }, now: clock() };
      const group = await createGroup(em, acting, { name, description: '' });
      for (const handle of handles) {
        const member = await account(handle);
        await addMember(em, { ...acting, actor: { ...acting.actor, ...siteActor, id: acting.actor.id } }, group, member, members[handle] ?? []);
      }
      return { id: group.id, slug: group.slug };
    },
    advance: (milliseconds) => {
      offset += milliseconds;
    },
    log: () => lines.join(''),
    stop: async () => {
      closeEventStreams();
      server.closeAllConnections();
      await new Promise<void>((resolve) => server.close(() => resolve()));
      await deps.jobs.stop();
      await deps.mailer.stop();
      await orm.close(true);
      rmSync(dataDir, { recursive: true, force: true });
    },
  };
}
