import { Migration } from '@mikro-orm/migrations';

const families = "'electrical-impedance', 'x-ray', 'integral-equation', 'deblurring'";

/** Four families of problems; benches with another noise than the Gaussian, or on another axis, with the data of its levels. */
export class Migration20261201000003 extends Migration {
  override up(): void {
    // SQLite cannot change a check: both tables are made anew. Their rows leave and come back in one transaction, and the references to
    // them are counted at its end.
    this.addSql('begin immediate;');
    this.addSql('pragma defer_foreign_keys = on;');
    this.addSql('create table `phantom_before` as select * from `phantom`;');
    this.addSql('drop table `phantom`;');
    this.addSql(`create table \`phantom\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`slug\` text not null, \`family\` text check (\`family\` in (${families})) not null, \`group_id\` text not null, \`name\` text not null, constraint \`phantom_group_id_foreign\` foreign key(\`group_id\`) references \`group\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql('insert into `phantom` (`id`, `created_at`, `updated_at`, `slug`, `family`, `group_id`, `name`) select `id`, `created_at`, `updated_at`, `slug`, `family`, `group_id`, `name` from `phantom_before`;');
    this.addSql('drop table `phantom_before`;');
    this.addSql('create index `phantom_group_index` on `phantom` (`group_id`);');
    this.addSql('create unique index `phantom_slug_unique` on `phantom` (`slug`);');

    this.addSql('create table `bench_before` as select * from `bench`;');
    this.addSql('drop table `bench`;');
    this.addSql(`create table \`bench\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`slug\` text not null, \`title\` text not null, \`question\` text not null, \`description\` text not null, \`family\` text check (\`family\` in (${families})) not null, \`group_id\` text not null, \`created_by_id\` text not null, \`ladder\` json not null, \`draws\` integer not null, \`seed\` integer not null, \`ranking_metric\` text not null, \`state\` text check (\`state\` in ('draft', 'open', 'closed')) not null, \`revision\` integer not null default 1, \`content_hash\` text not null, \`opened_at\` datetime null, \`closed_at\` datetime null, \`axis\` json not null, \`noise_model\` text not null default 'gaussian', constraint \`bench_group_id_foreign\` foreign key(\`group_id\`) references \`group\`(\`id\`) on update cascade, constraint \`bench_created_by_id_foreign\` foreign key(\`created_by_id\`) references \`user\`(\`id\`) on update cascade, primary key (\`id\`));`);
    const kept = '`id`, `created_at`, `updated_at`, `slug`, `title`, `question`, `description`, `family`, `group_id`, `created_by_id`, `ladder`, `draws`, `seed`, `ranking_metric`, `state`, `revision`, `content_hash`, `opened_at`, `closed_at`';
    this.addSql(`insert into \`bench\` (${kept}, \`axis\`) select ${kept}, '{"key":"noise"}' from \`bench_before\`;`);
    this.addSql('drop table `bench_before`;');
    this.addSql('create index `bench_group_index` on `bench` (`group_id`);');
    this.addSql('create index `bench_created_by_id_index` on `bench` (`created_by_id`);');
    this.addSql('create index `bench_state_index` on `bench` (`state`);');
    this.addSql('create unique index `bench_slug_unique` on `bench` (`slug`);');

    this.addSql('alter table `run` add column `axis` json null;');
    this.addSql("alter table `run` add column `noise_model` text not null default 'gaussian';");
    this.addSql('create table `axis_case` (`id` integer not null primary key autoincrement, `bench_id` text not null, `phantom_version_id` text not null, `level` integer not null, `noise_scale` real not null, `rows` json null, `targets` json not null, `clean` blob not null, `truth_image` blob not null, constraint `axis_case_bench_id_foreign` foreign key(`bench_id`) references `bench`(`id`) on update cascade, constraint `axis_case_phantom_version_id_foreign` foreign key(`phantom_version_id`) references `phantom_version`(`id`) on update cascade);');
    this.addSql('create index `axis_case_bench_id_index` on `axis_case` (`bench_id`);');
    this.addSql('create index `axis_case_phantom_version_index` on `axis_case` (`phantom_version_id`);');
    this.addSql('create unique index `axis_case_level_unique` on `axis_case` (`bench_id`, `phantom_version_id`, `level`);');
    this.addSql('commit;');
  }

  override down(): void {
    throw new Error('Columns are not taken away; restore a backup instead.');
  }
}
