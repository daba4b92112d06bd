import { Migration } from '@mikro-orm/migrations';

/** The audit trail is append-only, for every client of the database file. */
export class Migration20261201000001 extends Migration {
  override up(): void {
    this.addSql(
      "create trigger `audit_entry_no_update` before update on `audit_entry` begin select raise(abort, 'the audit trail is append-only'); end;",
    );
    this.addSql(
      "create trigger `audit_entry_no_delete` before delete on `audit_entry` begin select raise(abort, 'the audit trail is append-only'); end;",
    );
    // `insert or replace` would delete the old row without firing the delete trigger.
    this.addSql(
      "create trigger `audit_entry_no_replace` before insert on `audit_entry` when exists (select 1 from `audit_entry` where `id` = new.`id`) begin select raise(abort, 'the audit trail is append-only'); end;",
    );
  }

  override down(): void {
    throw new Error('The audit trail stays append-only; restore a backup instead.');
  }
}
