import { mkdirSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { MikroORM } from '@mikro-orm/sqlite';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { allMigrations } from '../../../api/migrations/all-migrations.ts';
import { databaseFile, openDatabase, ormOptions } from '../../../api/orm.ts';

const folder = mkdtempSync(path.join(tmpdir(), 'hadamark-migrations-'));
let orm: MikroORM;
beforeAll(async () => {
  orm = await openDatabase(databaseFile(folder));
});
afterAll(async () => {
  await orm.close(true);
  rmSync(folder, { recursive: true, force: true });
});

const pragma = async (name: string): Promise<unknown> => {
  const rows: Record<string, unknown>[] = await orm.em.getConnection().execute(`pragma ${name}`);
  return Object.values(rows[0] ?? {})[0];
};

/** Every table and index as the database keeps it, by name. */
async function statements(from: MikroORM): Promise<Record<string, string>> {
  const rows: { name: string; sql: string }[] = await from.em
    .getConnection()
    .execute("select name, sql from sqlite_master where sql is not null and type in ('table', 'index') and name not like 'sqlite_%' and name <> 'mikro_orm_migrations'");
  return Object.fromEntries(rows.map(({ name, sql }) => [name, sql]).sort());
}

describe('migrations', () => {
  it('lead from an empty file to what the entities say', async () => {
    const fresh = await MikroORM.init({ ...ormOptions(':memory:') });
    try {
      await fresh.getSchemaGenerator().createSchema();
      expect(await statements(orm)).toEqual(await statements(fresh));
    } finally {
      await fresh.close(true);
    }
  });

  it('leave nothing for the migration tool to add', async () => {
    const tool = await MikroORM.init(ormOptions(databaseFile(folder)));
    try {
      expect(await tool.getMigrator().checkMigrationNeeded()).toBe(false);
    } finally {
      await tool.close(true);
    }
  });

  it('know every migration file, in order', async () => {
    const { readdirSync } = await import('node:fs');
    const files = readdirSync(path.resolve('api/migrations'))
      .filter((file) => /^migration-.*\.ts$/.test(file))
      .map((file) => file.replace(/\.ts$/, ''))
      .sort();
    expect(allMigrations.map((migration) => migration.name)).toEqual(files);
  });

  it('run once: a second start changes nothing and keeps the rows', async () => {
    await orm.em.getConnection().execute("insert into `group` (id, created_at, updated_at, slug, name) values ('g', 0, 0, 'kept', 'Kept')");
    const again = await openDatabase(databaseFile(folder));
    try {
      expect(await again.getMigrator().getPendingMigrations()).toEqual([]);
      expect(await again.em.getConnection().execute('select slug from `group`')).toEqual([{ slug: 'kept' }]);
    } finally {
      await again.close(true);
    }
  });

  it('keep the phantoms and benches of a database that knew one family, with what refers to them', async () => {
    const older = path.join(folder, 'older');
    const file = databaseFile(older);
    mkdirSync(older);
    const before = await MikroORM.init({ ...ormOptions(file), logger: () => undefined, migrations: { ...ormOptions(file).migrations, migrationsList: allMigrations.slice(0, 3), snapshot: false } });
    await before.getMigrator().up();
    const run = (sql: string) => before.em.getConnection().execute(sql);
    await run("insert into `user` (id, created_at, updated_at, handle, site_roles, notifications) values ('u', 0, 0, 'curator-demo', '[]', '{}')");
    await run("insert into `group` (id, created_at, updated_at, slug, name) values ('g', 0, 0, 'kept', 'Kept')");
    await run("insert into phantom (id, created_at, updated_at, slug, family, group_id, name) values ('p', 0, 0, 'disc', 'electrical-impedance', 'g', 'Disc')");
    await run("insert into phantom_version (id, created_at, updated_at, phantom_id, n, state, name, description, licence, definition, definition_hash, content_hash, created_by_id) values ('v', 0, 0, 'p', 1, 'published', 'Disc', '', 'CC0-1.0', '{}', 'h', 'h', 'u')");
    await run("insert into bench (id, created_at, updated_at, slug, title, question, description, family, group_id, created_by_id, ladder, draws, seed, ranking_metric, state, content_hash) values ('b', 0, 0, 'bench', 'Bench', 'Which?', '', 'electrical-impedance', 'g', 'u', '[0.01]', 2, 1, 'relative-l2-error', 'open', 'h')");
    await run("insert into bench_phantom (id, created_at, updated_at, bench_id, phantom_version_id, position) values ('bp', 0, 0, 'b', 'v', 0)");
    await before.close(true);
    const after = await openDatabase(file);
    try {
      const rows = (sql: string): Promise<unknown> => after.em.getConnection().execute(sql);
      expect(await rows('select slug, family from phantom')).toEqual([{ slug: 'disc', family: 'electrical-impedance' }]);
      expect(await rows('select slug, axis from bench')).toEqual([{ slug: 'bench', axis: '{"key":"noise"}' }]);
      expect(await rows('select bench_id from bench_phantom')).toEqual([{ bench_id: 'b' }]);
      await rows("insert into phantom (id, created_at, updated_at, slug, family, group_id, name) values ('q', 0, 0, 'head', 'x-ray', 'g', 'Head')");
    } finally {
      await after.close(true);
    }
  });

  it('leave a connection that keeps references, waits for locks and writes ahead', async () => {
    expect(await pragma('journal_mode')).toBe('wal');
    expect(await pragma('foreign_keys')).toBe(1);
    expect(await pragma('busy_timeout')).toBe(5000);
    const insert = "insert into membership (id, created_at, updated_at, group_id, user_id, roles) values ('m', 0, 0, 'nobody', 'nothing', '[]')";
    await expect(orm.em.getConnection().execute(insert)).rejects.toThrow(/FOREIGN KEY/);
  });

  it('share their options with the migration tool', async () => {
    const tool = await MikroORM.init({ ...ormOptions(databaseFile(folder)), connect: false });
    expect(tool.config.get('migrations').transactional).toBe(false);
    expect(tool.config.get('migrations').snapshotName).toBe('snapshot');
    await tool.close(true);
  });
});
