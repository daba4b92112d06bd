import { Migrator } from '@mikro-orm/migrations';
import { defineConfig, MikroORM, type Options } from '@mikro-orm/sqlite';
import { mkdirSync } from 'node:fs';
import path from 'node:path';
import { allEntities } from './entities/all-entities.ts';
import { allMigrations } from './migrations/all-migrations.ts';

export const databaseFile = (dataDir: string): string => path.join(dataDir, 'hadamark.sqlite');

/** What the app, the tests and the migration tool share. */
export function ormOptions(dbName: string): Options {
  return defineConfig({
    dbName,
    entities: allEntities,
    extensions: [Migrator],
    forceUtcTimezone: true,
    // One forked entity manager per request or job; the shared one throws.
    allowGlobalContext: false,
    discovery: { warnWhenNoEntities: true },
    pool: {
      afterCreate: (connection: unknown, done: (error: Error | null, connection: unknown) => void) => {
        setPragmas(connection as { pragma: (text: string) => unknown });
        done(null, connection);
      },
    },
    migrations: {
      path: 'api/migrations',
      glob: 'migration-*.ts',
      fileName: (timestamp: string) => `migration-${timestamp}`,
      // `pragma foreign_keys` is inert inside a transaction, so a rebuilt table would cascade into its children.
      transactional: false,
      snapshotName: 'snapshot',
    },
  });
}

function setPragmas(connection: { pragma: (text: string) => unknown }): void {
  connection.pragma('journal_mode = WAL');
  connection.pragma('foreign_keys = ON');
  connection.pragma('busy_timeout = 5000');
  connection.pragma('synchronous = NORMAL');
}

/** Opens the database and brings it up to date. Every call opens its own; nothing is cached. */
export async function openDatabase(dbName: string): Promise<MikroORM> {
  if (dbName !== ':memory:') mkdirSync(path.dirname(dbName), { recursive: true });
  const options = ormOptions(dbName);
  const orm = await MikroORM.init({
    ...options,
    // The migrator would write to the standard output, which the log owns.
    logger: () => undefined,
    // The bundled server has no migration files to search for, so they are imported by name.
    migrations: { ...options.migrations, migrationsList: allMigrations, snapshot: false },
  });
  await orm.getMigrator().up();
  const faults: unknown[] = await orm.em.getConnection().execute('pragma foreign_key_check');
  if (faults.length > 0) {
    await orm.close(true);
    throw new Error(`The database has ${faults.length} broken references after the migration. Restore the backup of ${dbName}.`);
  }
  return orm;
}
