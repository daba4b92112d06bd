import { Migration } from '@mikro-orm/migrations';

/** Bias and variance by level with a run; a mark of its own for every solver, in the order in which they were made. */
export class Migration20261201000002 extends Migration {
  override up(): void {
    this.addSql('alter table `run` add column `level_moments` json null;');
    this.addSql('alter table `solver` add column `glyph` integer not null default 0;');
    this.addSql('update `solver` set `glyph` = (select count(*) from `solver` as `before` where `before`.`created_at` < `solver`.`created_at` or (`before`.`created_at` = `solver`.`created_at` and `before`.`id` < `solver`.`id`));');
  }

  override down(): void {
    throw new Error('Columns are not taken away; restore a backup instead.');
  }
}
