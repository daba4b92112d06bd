import type { MigrationObject } from '@mikro-orm/core';
import { Migration20261201000000 } from './migration-20261201000000.ts';
import { Migration20261201000001 } from './migration-20261201000001.ts';
import { Migration20261201000002 } from './migration-20261201000002.ts';
import { Migration20261201000003 } from './migration-20261201000003.ts';

/** In order. A new migration file is added here, or the server does not know it. */
export const allMigrations: MigrationObject[] = [
  { name: 'migration-20261201000000', class: Migration20261201000000 },
  { name: 'migration-20261201000001', class: Migration20261201000001 },
  { name: 'migration-20261201000002', class: Migration20261201000002 },
  { name: 'migration-20261201000003', class: Migration20261201000003 },
];
