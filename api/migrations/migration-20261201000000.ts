import { Migration } from '@mikro-orm/migrations';

export class Migration20261201000000 extends Migration {

  override up(): void {
    this.addSql(`create table \`audit_entry\` (\`id\` integer not null primary key autoincrement, \`at\` datetime not null, \`actor_id\` text null, \`actor_handle\` text not null, \`action\` text not null, \`subject_type\` text not null, \`subject_id\` text not null, \`group_id\` text null, \`before\` json null, \`after\` json null, \`detail\` text not null default '', \`request_id\` text null);`);
    this.addSql(`create index \`audit_entry_subject_index\` on \`audit_entry\` (\`subject_type\`, \`subject_id\`);`);
    this.addSql(`create index \`audit_entry_action_index\` on \`audit_entry\` (\`action\`);`);
    this.addSql(`create index \`audit_entry_actor_index\` on \`audit_entry\` (\`actor_id\`);`);

    this.addSql(`create table \`counter\` (\`prefix\` text not null, \`value\` integer not null, primary key (\`prefix\`));`);

    this.addSql(`create table \`group\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`slug\` text not null, \`name\` text not null, \`description\` text not null default '', primary key (\`id\`));`);
    this.addSql(`create unique index \`group_slug_unique\` on \`group\` (\`slug\`);`);

    this.addSql(`create table \`outbox_message\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`kind\` text not null, \`recipient\` text not null, \`subject\` text not null, \`text\` text not null, \`state\` text check (\`state\` in ('waiting', 'kept', 'sent', 'failed')) not null, \`attempts\` integer not null default 0, \`next_attempt_at\` datetime not null, \`sent_at\` datetime null, \`failure\` text null, primary key (\`id\`));`);
    this.addSql(`create index \`outbox_message_state_index\` on \`outbox_message\` (\`state\`, \`next_attempt_at\`);`);

    this.addSql(`create table \`phantom\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`slug\` text not null, \`family\` text check (\`family\` in ('electrical-impedance')) not null, \`group_id\` text not null, \`name\` text not null, constraint \`phantom_group_id_foreign\` foreign key(\`group_id\`) references \`group\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`phantom_group_index\` on \`phantom\` (\`group_id\`);`);
    this.addSql(`create unique index \`phantom_slug_unique\` on \`phantom\` (\`slug\`);`);

    this.addSql(`create table \`session\` (\`id\` text not null, \`user_id\` text null, \`data\` text not null, \`expires_at\` datetime not null, primary key (\`id\`));`);
    this.addSql(`create index \`session_user_index\` on \`session\` (\`user_id\`);`);
    this.addSql(`create index \`session_expires_index\` on \`session\` (\`expires_at\`);`);

    this.addSql(`create table \`simulation\` (\`content_hash\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`code_version\` text not null, \`summary\` json not null, \`model_error_floor\` real not null, \`noise_scale\` real not null, \`checks\` json null, \`seconds\` real not null, \`frame\` blob not null, \`reference\` blob not null, \`clean\` blob not null, \`truth_image\` blob not null, primary key (\`content_hash\`));`);

    this.addSql(`create table \`solver\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`slug\` text not null, \`name\` text not null, \`description\` text not null, \`group_id\` text not null, constraint \`solver_group_id_foreign\` foreign key(\`group_id\`) references \`group\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`solver_group_index\` on \`solver\` (\`group_id\`);`);
    this.addSql(`create unique index \`solver_slug_unique\` on \`solver\` (\`slug\`);`);

    this.addSql(`create table \`stored_array\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`sha256\` text not null, \`kind\` text check (\`kind\` in ('array', 'frames')) not null, \`rows\` integer not null, \`cols\` integer not null, \`format\` text check (\`format\` in ('png', 'npy', 'csv')) not null, \`file_name\` text not null, \`file_size\` integer not null, \`values\` blob not null, primary key (\`id\`));`);
    this.addSql(`create index \`stored_array_sha256_index\` on \`stored_array\` (\`sha256\`);`);
    this.addSql(`create unique index \`stored_array_content_unique\` on \`stored_array\` (\`sha256\`, \`kind\`, \`rows\`, \`cols\`);`);

    this.addSql(`create table \`user\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`handle\` text not null, \`github_id\` text null, \`about\` text not null default '', \`email\` text null, \`pending_email\` text null, \`email_token_hash\` text null, \`email_token_expires_at\` datetime null, \`site_roles\` json not null, \`site_roles_since\` datetime null, \`notifications\` json not null, \`closed_at\` datetime null, primary key (\`id\`));`);
    this.addSql(`create unique index \`user_handle_unique\` on \`user\` (\`handle\`);`);
    this.addSql(`create unique index \`user_github_id_unique\` on \`user\` (\`github_id\`);`);

    this.addSql(`create table \`solver_version\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`solver_id\` text not null, \`n\` integer not null, \`state\` text check (\`state\` in ('draft', 'registered', 'withdrawn')) not null, \`method\` text not null, \`configuration\` json not null, \`declaration\` json not null, \`content_hash\` text not null, \`what_changed\` text not null default '', \`created_by_id\` text not null, \`registered_at\` datetime null, \`withdrawn_at\` datetime null, \`withdrawn_reason\` text null, constraint \`solver_version_solver_id_foreign\` foreign key(\`solver_id\`) references \`solver\`(\`id\`) on update cascade, constraint \`solver_version_created_by_id_foreign\` foreign key(\`created_by_id\`) references \`user\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`solver_version_solver_id_index\` on \`solver_version\` (\`solver_id\`);`);
    this.addSql(`create index \`solver_version_state_index\` on \`solver_version\` (\`state\`);`);
    this.addSql(`create index \`solver_version_method_index\` on \`solver_version\` (\`method\`);`);
    this.addSql(`create index \`solver_version_content_hash_index\` on \`solver_version\` (\`content_hash\`);`);
    this.addSql(`create index \`solver_version_created_by_id_index\` on \`solver_version\` (\`created_by_id\`);`);
    this.addSql(`create unique index \`solver_version_number_unique\` on \`solver_version\` (\`solver_id\`, \`n\`);`);
    this.addSql(`create unique index \`solver_version_content_unique\` on \`solver_version\` (\`solver_id\`, \`content_hash\`);`);

    this.addSql(`create table \`phantom_version\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`phantom_id\` text not null, \`n\` integer not null, \`state\` text check (\`state\` in ('draft', 'submitted', 'changes-requested', 'published', 'withdrawn')) not null, \`name\` text not null, \`description\` text not null, \`licence\` text not null, \`definition\` json not null, \`definition_hash\` text not null, \`content_hash\` text not null, \`what_changed\` text not null default '', \`frames\` json null, \`sealed_until\` text null, \`created_by_id\` text not null, \`submitted_by_id\` text null, \`submitted_at\` datetime null, \`published_at\` datetime null, \`withdrawn_at\` datetime null, \`withdrawn_reason\` text null, constraint \`phantom_version_phantom_id_foreign\` foreign key(\`phantom_id\`) references \`phantom\`(\`id\`) on update cascade, constraint \`phantom_version_created_by_id_foreign\` foreign key(\`created_by_id\`) references \`user\`(\`id\`) on update cascade, constraint \`phantom_version_submitted_by_id_foreign\` foreign key(\`submitted_by_id\`) references \`user\`(\`id\`) on delete set null on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`phantom_version_phantom_id_index\` on \`phantom_version\` (\`phantom_id\`);`);
    this.addSql(`create index \`phantom_version_state_index\` on \`phantom_version\` (\`state\`);`);
    this.addSql(`create index \`phantom_version_definition_hash_index\` on \`phantom_version\` (\`definition_hash\`);`);
    this.addSql(`create index \`phantom_version_created_by_id_index\` on \`phantom_version\` (\`created_by_id\`);`);
    this.addSql(`create index \`phantom_version_submitted_by_id_index\` on \`phantom_version\` (\`submitted_by_id\`);`);
    this.addSql(`create unique index \`phantom_version_number_unique\` on \`phantom_version\` (\`phantom_id\`, \`n\`);`);
    this.addSql(`create unique index \`phantom_version_content_unique\` on \`phantom_version\` (\`content_hash\`);`);

    this.addSql(`create table \`phantom_verdict\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`version_id\` text not null, \`verdict\` text check (\`verdict\` in ('publish', 'request-changes')) not null, \`reason\` text not null, \`by_id\` text not null, constraint \`phantom_verdict_version_id_foreign\` foreign key(\`version_id\`) references \`phantom_version\`(\`id\`) on update cascade, constraint \`phantom_verdict_by_id_foreign\` foreign key(\`by_id\`) references \`user\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`phantom_verdict_version_index\` on \`phantom_verdict\` (\`version_id\`);`);
    this.addSql(`create index \`phantom_verdict_by_id_index\` on \`phantom_verdict\` (\`by_id\`);`);

    this.addSql(`create table \`membership\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`group_id\` text not null, \`user_id\` text not null, \`roles\` json not null, constraint \`membership_group_id_foreign\` foreign key(\`group_id\`) references \`group\`(\`id\`) on update cascade, constraint \`membership_user_id_foreign\` foreign key(\`user_id\`) references \`user\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`membership_group_id_index\` on \`membership\` (\`group_id\`);`);
    this.addSql(`create index \`membership_user_index\` on \`membership\` (\`user_id\`);`);
    this.addSql(`create unique index \`membership_group_user_unique\` on \`membership\` (\`group_id\`, \`user_id\`);`);

    this.addSql(`create table \`invitation\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`group_id\` text not null, \`invited_by_id\` text not null, \`email\` text not null, \`roles\` json not null, \`token_hash\` text not null, \`sent_at\` datetime not null, \`expires_at\` datetime not null, \`accepted_at\` datetime null, \`accepted_by_id\` text null, \`revoked_at\` datetime null, constraint \`invitation_group_id_foreign\` foreign key(\`group_id\`) references \`group\`(\`id\`) on update cascade, constraint \`invitation_invited_by_id_foreign\` foreign key(\`invited_by_id\`) references \`user\`(\`id\`) on update cascade, constraint \`invitation_accepted_by_id_foreign\` foreign key(\`accepted_by_id\`) references \`user\`(\`id\`) on delete set null on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`invitation_group_index\` on \`invitation\` (\`group_id\`);`);
    this.addSql(`create index \`invitation_invited_by_id_index\` on \`invitation\` (\`invited_by_id\`);`);
    this.addSql(`create index \`invitation_accepted_by_id_index\` on \`invitation\` (\`accepted_by_id\`);`);
    this.addSql(`create unique index \`invitation_token_hash_unique\` on \`invitation\` (\`token_hash\`);`);

    this.addSql(`create table \`bench\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`slug\` text not null, \`title\` text not null, \`question\` text not null, \`description\` text not null, \`family\` text check (\`family\` in ('electrical-impedance')) not null, \`group_id\` text not null, \`created_by_id\` text not null, \`ladder\` json not null, \`draws\` integer not null, \`seed\` integer not null, \`ranking_metric\` text not null, \`state\` text check (\`state\` in ('draft', 'open', 'closed')) not null, \`revision\` integer not null default 1, \`content_hash\` text not null, \`opened_at\` datetime null, \`closed_at\` datetime null, constraint \`bench_group_id_foreign\` foreign key(\`group_id\`) references \`group\`(\`id\`) on update cascade, constraint \`bench_created_by_id_foreign\` foreign key(\`created_by_id\`) references \`user\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`bench_group_index\` on \`bench\` (\`group_id\`);`);
    this.addSql(`create index \`bench_created_by_id_index\` on \`bench\` (\`created_by_id\`);`);
    this.addSql(`create index \`bench_state_index\` on \`bench\` (\`state\`);`);
    this.addSql(`create unique index \`bench_slug_unique\` on \`bench\` (\`slug\`);`);

    this.addSql(`create table \`entry\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`bench_id\` text not null, \`solver_version_id\` text not null, \`glyph\` integer not null, \`created_by_id\` text not null, constraint \`entry_bench_id_foreign\` foreign key(\`bench_id\`) references \`bench\`(\`id\`) on update cascade, constraint \`entry_solver_version_id_foreign\` foreign key(\`solver_version_id\`) references \`solver_version\`(\`id\`) on update cascade, constraint \`entry_created_by_id_foreign\` foreign key(\`created_by_id\`) references \`user\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`entry_bench_id_index\` on \`entry\` (\`bench_id\`);`);
    this.addSql(`create index \`entry_solver_version_index\` on \`entry\` (\`solver_version_id\`);`);
    this.addSql(`create index \`entry_created_by_id_index\` on \`entry\` (\`created_by_id\`);`);
    this.addSql(`create unique index \`entry_bench_solver_unique\` on \`entry\` (\`bench_id\`, \`solver_version_id\`);`);
    this.addSql(`create unique index \`entry_bench_glyph_unique\` on \`entry\` (\`bench_id\`, \`glyph\`);`);

    this.addSql(`create table \`run\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`entry_id\` text not null, \`phantom_version_id\` text not null, \`submitted_by_id\` text not null, \`state\` text check (\`state\` in ('queued', 'running', 'finished', 'failed', 'cancelled')) not null, \`review\` text check (\`review\` in ('unreviewed', 'in-review', 'signed-off', 'signed-off-with-reservation', 'returned', 'declined')) not null, \`reservation\` text null, \`reviewer_id\` text null, \`configuration\` json not null, \`ladder\` json not null, \`draws\` integer not null, \`seed\` integer not null, \`phantom_hash\` text not null, \`code_version\` text null, \`priority\` integer not null, \`attempts\` integer not null default 0, \`done\` integer not null default 0, \`total\` integer not null, \`level_medians\` json not null, \`failure\` text null, \`queued_at\` datetime not null, \`started_at\` datetime null, \`heartbeat_at\` datetime null, \`finished_at\` datetime null, \`result_hash\` text null, \`seconds_per_reconstruction\` real null, \`time_ratio\` real null, \`checks\` json null, \`trivial\` json null, constraint \`run_entry_id_foreign\` foreign key(\`entry_id\`) references \`entry\`(\`id\`) on update cascade, constraint \`run_phantom_version_id_foreign\` foreign key(\`phantom_version_id\`) references \`phantom_version\`(\`id\`) on update cascade, constraint \`run_submitted_by_id_foreign\` foreign key(\`submitted_by_id\`) references \`user\`(\`id\`) on update cascade, constraint \`run_reviewer_id_foreign\` foreign key(\`reviewer_id\`) references \`user\`(\`id\`) on delete set null on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`run_entry_id_index\` on \`run\` (\`entry_id\`);`);
    this.addSql(`create index \`run_phantom_version_index\` on \`run\` (\`phantom_version_id\`);`);
    this.addSql(`create index \`run_submitted_by_id_index\` on \`run\` (\`submitted_by_id\`);`);
    this.addSql(`create index \`run_review_index\` on \`run\` (\`review\`);`);
    this.addSql(`create index \`run_reviewer_id_index\` on \`run\` (\`reviewer_id\`);`);
    this.addSql(`create index \`run_result_hash_index\` on \`run\` (\`result_hash\`);`);
    this.addSql(`create index \`run_queue_index\` on \`run\` (\`state\`, \`priority\`, \`queued_at\`);`);
    this.addSql(`create unique index \`run_entry_phantom_unique\` on \`run\` (\`entry_id\`, \`phantom_version_id\`);`);

    this.addSql(`create table \`trial\` (\`id\` integer not null primary key autoincrement, \`run_id\` text not null, \`level\` integer not null, \`draw\` integer not null, \`metrics\` json not null, \`reasons\` json null, \`sup_at\` json null, \`parameter\` real null, \`iterations\` integer not null, \`forward_solves\` integer not null, \`stop\` text not null, \`noise_norm\` real not null, \`seconds\` real null, \`image_hash\` text not null, constraint \`trial_run_id_foreign\` foreign key(\`run_id\`) references \`run\`(\`id\`) on update cascade);`);
    this.addSql(`create index \`trial_run_id_index\` on \`trial\` (\`run_id\`);`);
    this.addSql(`create unique index \`trial_draw_unique\` on \`trial\` (\`run_id\`, \`level\`, \`draw\`);`);

    this.addSql(`create table \`run_image\` (\`id\` integer not null primary key autoincrement, \`run_id\` text not null, \`level\` integer not null, \`draw\` integer not null, \`values\` blob not null, constraint \`run_image_run_id_foreign\` foreign key(\`run_id\`) references \`run\`(\`id\`) on update cascade);`);
    this.addSql(`create index \`run_image_run_id_index\` on \`run_image\` (\`run_id\`);`);
    this.addSql(`create unique index \`run_image_draw_unique\` on \`run_image\` (\`run_id\`, \`level\`, \`draw\`);`);

    this.addSql(`create table \`recomputation\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`run_id\` text not null, \`requested_by_id\` text not null, \`state\` text check (\`state\` in ('queued', 'running', 'finished', 'failed')) not null, \`done\` integer not null default 0, \`total\` integer not null, \`code_version\` text null, \`equal\` integer null, \`result_hash\` text null, \`first_difference\` json null, \`failure\` text null, \`started_at\` datetime null, \`finished_at\` datetime null, constraint \`recomputation_run_id_foreign\` foreign key(\`run_id\`) references \`run\`(\`id\`) on update cascade, constraint \`recomputation_requested_by_id_foreign\` foreign key(\`requested_by_id\`) references \`user\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`recomputation_run_index\` on \`recomputation\` (\`run_id\`);`);
    this.addSql(`create index \`recomputation_requested_by_id_index\` on \`recomputation\` (\`requested_by_id\`);`);
    this.addSql(`create index \`recomputation_state_index\` on \`recomputation\` (\`state\`);`);

    this.addSql(`create table \`comment\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`run_id\` text not null, \`by_id\` text not null, \`text\` text not null, \`anchor\` text not null default '', \`question\` integer not null default false, \`answered\` integer not null default false, constraint \`comment_run_id_foreign\` foreign key(\`run_id\`) references \`run\`(\`id\`) on update cascade, constraint \`comment_by_id_foreign\` foreign key(\`by_id\`) references \`user\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`comment_run_index\` on \`comment\` (\`run_id\`);`);
    this.addSql(`create index \`comment_by_id_index\` on \`comment\` (\`by_id\`);`);

    this.addSql(`create table \`bench_phantom\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`bench_id\` text not null, \`phantom_version_id\` text not null, \`position\` integer not null, constraint \`bench_phantom_bench_id_foreign\` foreign key(\`bench_id\`) references \`bench\`(\`id\`) on update cascade, constraint \`bench_phantom_phantom_version_id_foreign\` foreign key(\`phantom_version_id\`) references \`phantom_version\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`bench_phantom_bench_id_index\` on \`bench_phantom\` (\`bench_id\`);`);
    this.addSql(`create index \`bench_phantom_version_index\` on \`bench_phantom\` (\`phantom_version_id\`);`);
    this.addSql(`create unique index \`bench_phantom_unique\` on \`bench_phantom\` (\`bench_id\`, \`phantom_version_id\`);`);
    this.addSql(`create unique index \`bench_phantom_position_unique\` on \`bench_phantom\` (\`bench_id\`, \`position\`);`);

    this.addSql(`create table \`array_upload\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`array_id\` text not null, \`user_id\` text not null, constraint \`array_upload_array_id_foreign\` foreign key(\`array_id\`) references \`stored_array\`(\`id\`) on update cascade, constraint \`array_upload_user_id_foreign\` foreign key(\`user_id\`) references \`user\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`array_upload_array_id_index\` on \`array_upload\` (\`array_id\`);`);
    this.addSql(`create index \`array_upload_user_index\` on \`array_upload\` (\`user_id\`);`);
    this.addSql(`create unique index \`array_upload_array_user_unique\` on \`array_upload\` (\`array_id\`, \`user_id\`);`);

    this.addSql(`create table \`api_token\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`user_id\` text not null, \`name\` text not null, \`token_hash\` text not null, \`prefix\` text not null, \`scopes\` json not null, \`last_used_at\` datetime null, \`expires_at\` datetime not null, \`revoked_at\` datetime null, constraint \`api_token_user_id_foreign\` foreign key(\`user_id\`) references \`user\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`api_token_user_index\` on \`api_token\` (\`user_id\`);`);
    this.addSql(`create unique index \`api_token_hash_unique\` on \`api_token\` (\`token_hash\`);`);

    this.addSql(`create table \`verdict\` (\`id\` text not null, \`created_at\` datetime not null, \`updated_at\` datetime not null, \`run_id\` text not null, \`verdict\` text check (\`verdict\` in ('signed-off', 'signed-off-with-reservation', 'returned', 'declined')) not null, \`reason\` text not null, \`inspected\` json not null, \`by_id\` text not null, constraint \`verdict_run_id_foreign\` foreign key(\`run_id\`) references \`run\`(\`id\`) on update cascade, constraint \`verdict_by_id_foreign\` foreign key(\`by_id\`) references \`user\`(\`id\`) on update cascade, primary key (\`id\`));`);
    this.addSql(`create index \`verdict_run_index\` on \`verdict\` (\`run_id\`);`);
    this.addSql(`create index \`verdict_by_id_index\` on \`verdict\` (\`by_id\`);`);
  }

  override down(): void {
    throw new Error('There is nothing before the first migration; delete the database file instead.');
  }
}
