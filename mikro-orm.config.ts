import { databaseFile, ormOptions } from './api/orm.ts';

/** For the migration tool only; the server opens its database in api/orm.ts. */
export default ormOptions(databaseFile(process.env['DATA_DIR'] ?? 'data'));
