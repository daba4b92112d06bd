import { randomBytes } from 'node:crypto';
import { existsSync } from 'node:fs';
import path from 'node:path';
import { createApp } from './app.ts';
import { EnvError, readEnv, type Env } from './env.ts';
import { makeLogger } from './http/request-log.ts';
import { closeEventStreams } from './http/server-sent-events.ts';
import { SqliteSessionStore } from './http/session-store.ts';
import { makeJobs } from './jobs/jobs.ts';
import { makeMailer } from './mail/mailer.ts';
import { databaseFile, openDatabase } from './orm.ts';
import { seedDemo, type Seeding } from './services/seed/seed-demo.ts';
import { demoAccounts } from './sign-in/demo-accounts.ts';

const stopWithinMs = 2_500;
const sweepEveryMs = 60 * 60 * 1000;
/** The instance checks itself once the start and the demonstration have had the processor. */
const verifyAfterMs = 10_000;

const env = checkedEnv();
const logger = makeLogger(env.logLevel);
const clock = (): Date => new Date();
const orm = await openDatabase(databaseFile(env.dataDir));
const mailer = makeMailer({ orm, env, clock, logger });
const origin = env.publicUrl ?? `http://localhost:${env.port}`;
const jobs = makeJobs({ orm, clock, logger, mailer, workers: env.workers, origin });
let seeding: Seeding | null = null;
const app = createApp({
  orm, env, clock, rng: randomBytes, mailer, jobs, logger, standInAccounts: demoAccounts, clientDir: clientDir(), seeding: () => seeding?.running() ?? false,
});

const server = app.listen(env.port, env.host, (error?: Error) => {
  if (error) {
    process.stderr.write(`PORT: cannot listen on ${env.host}:${env.port} (${error.message})\n`);
    process.exit(1);
  }
  const address = server.address();
  const port = typeof address === 'object' && address ? address.port : env.port;
  logger.info({ port, host: env.host }, 'listening');
  process.stdout.write(`Hadamark is at ${env.publicUrl ?? `http://localhost:${port}`}\n`);
});
mailer.start();
await jobs.start();
if (env.seedDemo) seeding = seedDemo({ orm, jobs, clock, logger, origin });
const verifying = setInterval(() => {
  if (seeding?.running()) return;
  clearInterval(verifying);
  jobs.verification.start();
}, verifyAfterMs);
verifying.unref();
const sessions = new SqliteSessionStore(orm, clock);
const sweeper = setInterval(sweepSessions, sweepEveryMs);
sweeper.unref();
sweepSessions();

let stopping = false;
for (const signal of ['SIGINT', 'SIGTERM'] as const) {
  process.on(signal, () => {
    if (stopping) return;
    stopping = true;
    stop().then(
      () => process.exit(0),
      (error: unknown) => {
        logger.error({ err: error }, 'stopping failed');
        process.exit(1);
      },
    );
  });
}

async function stop(): Promise<void> {
  // Whatever hangs, the process ends in time; unfinished work is taken up again at the next start.
  setTimeout(() => process.exit(0), stopWithinMs).unref();
  clearInterval(sweeper);
  clearInterval(verifying);
  const closed = new Promise<void>((resolve) => server.close(() => resolve()));
  closeEventStreams();
  server.closeIdleConnections();
  setTimeout(() => server.closeAllConnections(), 1_000).unref();
  await closed;
  await Promise.all([seeding?.stop(), jobs.stop()]);
  await mailer.stop();
  await orm.close(true);
}

function sweepSessions(): void {
  sessions.sweep().catch((error: unknown) => logger.error({ err: error }, 'sweeping sessions failed'));
}

function checkedEnv(): Env {
  try {
    return readEnv(process.env);
  } catch (error) {
    if (!(error instanceof EnvError)) throw error;
    process.stderr.write(`${error.lines.join('\n')}\n`);
    process.exit(1);
  }
}

/** Beside the built server, or under dist/ when the sources run. */
function clientDir(): string {
  const beside = path.join(import.meta.dirname, '../client');
  return existsSync(path.join(beside, 'index.html')) ? beside : path.join(import.meta.dirname, '../dist/client');
}
