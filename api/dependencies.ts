import type { MikroORM } from '@mikro-orm/sqlite';
import type { Logger } from 'pino';
import type { Env } from './env.ts';
import type { Jobs } from './jobs/jobs.ts';
import type { Mailer } from './mail/mailer.ts';
import type { StandInAccount } from './sign-in/demo-accounts.ts';

/** What the app needs from outside. Services get the parts they need; tests pass their own. */
export interface Dependencies {
  readonly orm: MikroORM;
  readonly env: Env;
  readonly clock: () => Date;
  /** Cryptographically random bytes (tokens). */
  readonly rng: (bytes: number) => Uint8Array;
  readonly mailer: Mailer;
  /** Worker threads and the queue of runs. */
  readonly jobs: Jobs;
  /** Whether the demonstration is being filled in. */
  readonly seeding?: () => boolean;
  readonly logger: Logger;
  /** Accounts the local stand-in for sign-in offers. */
  readonly standInAccounts: readonly StandInAccount[];
  /** Folder of the built client. */
  readonly clientDir: string;
}
