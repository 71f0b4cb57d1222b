CREATE TABLE `bench_profile_versions` (
	`id` text PRIMARY KEY NOT NULL,
	`profile_id` text NOT NULL,
	`number` integer NOT NULL,
	`name` text NOT NULL,
	`profile_json` text NOT NULL,
	`content_digest` text NOT NULL,
	`file_digest` text NOT NULL,
	`saved_by` text NOT NULL,
	`saved_at_ms` integer NOT NULL,
	FOREIGN KEY (`profile_id`) REFERENCES `bench_profiles`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`saved_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `bench_profile_versions_number` ON `bench_profile_versions` (`profile_id`,`number`);--> statement-breakpoint
CREATE TABLE `bench_profiles` (
	`id` text PRIMARY KEY NOT NULL,
	`created_by` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`head_version_id` text NOT NULL,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `device_cards` (
	`id` text PRIMARY KEY NOT NULL,
	`pack_id` text NOT NULL,
	`device_name` text NOT NULL,
	`intent_json` text NOT NULL,
	`entered_by` text NOT NULL,
	`entered_at_ms` integer NOT NULL,
	FOREIGN KEY (`pack_id`) REFERENCES `packs`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`entered_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `device_cards_pack` ON `device_cards` (`pack_id`,`entered_at_ms`);--> statement-breakpoint
CREATE TABLE `pack_jobs` (
	`id` text PRIMARY KEY NOT NULL,
	`pack_key` text NOT NULL,
	`revision_id` text NOT NULL,
	`edition_id` text,
	`profile_version_id` text NOT NULL,
	`asked_by` text NOT NULL,
	`state` text NOT NULL,
	`step` text,
	`done_ratio` real DEFAULT 0 NOT NULL,
	`problem_code` text,
	`problem_detail` text,
	`pack_id` text,
	`starts` integer DEFAULT 0 NOT NULL,
	`created_at_ms` integer NOT NULL,
	`started_at_ms` integer,
	`ended_at_ms` integer,
	FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`edition_id`) REFERENCES `editions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`profile_version_id`) REFERENCES `bench_profile_versions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`asked_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`pack_id`) REFERENCES `packs`(`id`) ON UPDATE no action ON DELETE no action,
	CONSTRAINT "pack_jobs_state_known" CHECK("pack_jobs"."state" in ('waiting', 'running', 'done', 'failed', 'cancelled'))
);
--> statement-breakpoint
CREATE INDEX `pack_jobs_state` ON `pack_jobs` (`state`,`created_at_ms`);--> statement-breakpoint
CREATE INDEX `pack_jobs_person` ON `pack_jobs` (`asked_by`);--> statement-breakpoint
CREATE TABLE `packs` (
	`id` text PRIMARY KEY NOT NULL,
	`pack_key` text NOT NULL,
	`revision_id` text NOT NULL,
	`edition_id` text,
	`profile_version_id` text NOT NULL,
	`file_name` text NOT NULL,
	`stored_path` text NOT NULL,
	`file_bytes` integer NOT NULL,
	`file_sha256` text NOT NULL,
	`vector_sha256` text NOT NULL,
	`manifest_json` text NOT NULL,
	`made_by` text NOT NULL,
	`made_at_ms` integer NOT NULL,
	FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`edition_id`) REFERENCES `editions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`profile_version_id`) REFERENCES `bench_profile_versions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`made_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `packs_edition` ON `packs` (`edition_id`,`profile_version_id`,`pack_key`);--> statement-breakpoint
CREATE INDEX `packs_revision` ON `packs` (`revision_id`);--> statement-breakpoint
CREATE INDEX `packs_key` ON `packs` (`pack_key`);--> statement-breakpoint
CREATE INDEX `packs_vector` ON `packs` (`vector_sha256`);--> statement-breakpoint
CREATE TABLE `audit` (
	`seq` integer PRIMARY KEY AUTOINCREMENT NOT NULL,
	`at_ms` integer NOT NULL,
	`person_id` text,
	`act` text NOT NULL,
	`object_kind` text NOT NULL,
	`object_id` text,
	`object_label` text NOT NULL,
	`detail_json` text DEFAULT '{}' NOT NULL,
	`request_id` text,
	FOREIGN KEY (`person_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `audit_at` ON `audit` (`at_ms`);--> statement-breakpoint
CREATE INDEX `audit_person` ON `audit` (`person_id`);--> statement-breakpoint
CREATE INDEX `audit_act` ON `audit` (`act`);--> statement-breakpoint
CREATE TABLE `idempotency_keys` (
	`person_id` text NOT NULL,
	`endpoint` text NOT NULL,
	`key` text NOT NULL,
	`request_digest` text NOT NULL,
	`result_id` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	PRIMARY KEY(`person_id`, `endpoint`, `key`),
	FOREIGN KEY (`person_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `idempotency_keys_created` ON `idempotency_keys` (`created_at_ms`);--> statement-breakpoint
CREATE TABLE `installation` (
	`id` integer PRIMARY KEY NOT NULL,
	`kind` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`first_run_code_hash` text,
	`demo_ready_at_ms` integer,
	CONSTRAINT "installation_single" CHECK("installation"."id" = 1)
);
--> statement-breakpoint
CREATE TABLE `one_time_links` (
	`id` text PRIMARY KEY NOT NULL,
	`token_hash` text NOT NULL,
	`kind` text NOT NULL,
	`user_id` text NOT NULL,
	`created_by` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`expires_at_ms` integer NOT NULL,
	`used_at_ms` integer,
	`revoked_at_ms` integer,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	CONSTRAINT "one_time_links_kind" CHECK("one_time_links"."kind" in ('invite', 'reset'))
);
--> statement-breakpoint
CREATE UNIQUE INDEX `one_time_links_token_hash_unique` ON `one_time_links` (`token_hash`);--> statement-breakpoint
CREATE INDEX `one_time_links_user` ON `one_time_links` (`user_id`);--> statement-breakpoint
CREATE TABLE `sessions` (
	`id` text PRIMARY KEY NOT NULL,
	`user_id` text NOT NULL,
	`expires_at_sec` integer NOT NULL,
	`public_id` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`last_seen_at_ms` integer NOT NULL,
	`user_agent` text NOT NULL,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `sessions_public_id_unique` ON `sessions` (`public_id`);--> statement-breakpoint
CREATE INDEX `sessions_user` ON `sessions` (`user_id`);--> statement-breakpoint
CREATE TABLE `user_roles` (
	`user_id` text NOT NULL,
	`role` text NOT NULL,
	`granted_at_ms` integer NOT NULL,
	PRIMARY KEY(`user_id`, `role`),
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	CONSTRAINT "user_roles_role" CHECK("user_roles"."role" in ('author', 'reviewer', 'operator', 'admin'))
);
--> statement-breakpoint
CREATE TABLE `users` (
	`id` text PRIMARY KEY NOT NULL,
	`email` text NOT NULL,
	`name` text NOT NULL,
	`password_hash` text,
	`is_demo` integer DEFAULT false NOT NULL,
	`created_at_ms` integer NOT NULL,
	`last_seen_at_ms` integer
);
--> statement-breakpoint
CREATE UNIQUE INDEX `users_email_unique` ON `users` (`email`);--> statement-breakpoint
CREATE TABLE `content_figures` (
	`digest` text NOT NULL,
	`synth_version` text NOT NULL,
	`figures_json` text NOT NULL,
	`measured_at_ms` integer NOT NULL,
	FOREIGN KEY (`digest`) REFERENCES `contents`(`digest`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `content_figures_key` ON `content_figures` (`digest`,`synth_version`);--> statement-breakpoint
CREATE TABLE `contents` (
	`digest` text PRIMARY KEY NOT NULL,
	`bytes` blob NOT NULL,
	`json_bytes` integer NOT NULL,
	`created_at_ms` integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE `editions` (
	`id` text PRIMARY KEY NOT NULL,
	`waveform_id` text NOT NULL,
	`number` integer NOT NULL,
	`revision_id` text NOT NULL,
	`title` text NOT NULL,
	`content_digest` text NOT NULL,
	`released_by` text NOT NULL,
	`released_at_ms` integer NOT NULL,
	`note` text NOT NULL,
	FOREIGN KEY (`waveform_id`) REFERENCES `waveforms`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`released_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `editions_revision_id_unique` ON `editions` (`revision_id`);--> statement-breakpoint
CREATE UNIQUE INDEX `editions_number` ON `editions` (`waveform_id`,`number`);--> statement-breakpoint
CREATE INDEX `editions_content` ON `editions` (`content_digest`);--> statement-breakpoint
CREATE TABLE `review_requests` (
	`id` text PRIMARY KEY NOT NULL,
	`waveform_id` text NOT NULL,
	`revision_id` text NOT NULL,
	`note` text NOT NULL,
	`asked_by` text NOT NULL,
	`asked_at_ms` integer NOT NULL,
	`outcome` text,
	`closed_by` text,
	`closed_at_ms` integer,
	`reason` text,
	FOREIGN KEY (`waveform_id`) REFERENCES `waveforms`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`asked_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`closed_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	CONSTRAINT "review_requests_outcome" CHECK("review_requests"."outcome" in ('released', 'returned', 'takenBack'))
);
--> statement-breakpoint
CREATE UNIQUE INDEX `review_requests_open` ON `review_requests` (`waveform_id`) WHERE "review_requests"."outcome" is null;--> statement-breakpoint
CREATE INDEX `review_requests_revision` ON `review_requests` (`revision_id`);--> statement-breakpoint
CREATE TABLE `revision_states` (
	`seq` integer PRIMARY KEY AUTOINCREMENT NOT NULL,
	`revision_id` text NOT NULL,
	`state` text NOT NULL,
	`act` text NOT NULL,
	`note` text NOT NULL,
	`person_id` text NOT NULL,
	`at_ms` integer NOT NULL,
	FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`person_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	CONSTRAINT "revision_states_state" CHECK("revision_states"."state" in ('draft', 'inReview', 'released', 'withdrawn')),
	CONSTRAINT "revision_states_act" CHECK("revision_states"."act" in ('saved', 'asked', 'takenBack', 'returned', 'released', 'withdrawn'))
);
--> statement-breakpoint
CREATE INDEX `revision_states_revision` ON `revision_states` (`revision_id`,`seq`);--> statement-breakpoint
CREATE TABLE `revisions` (
	`id` text PRIMARY KEY NOT NULL,
	`waveform_id` text NOT NULL,
	`number` integer NOT NULL,
	`parent_id` text,
	`is_side` integer NOT NULL,
	`content_digest` text NOT NULL,
	`intent_digest` text NOT NULL,
	`document_digest` text NOT NULL,
	`title` text NOT NULL,
	`about_json` text NOT NULL,
	`intent_json` text NOT NULL,
	`author_id` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	FOREIGN KEY (`waveform_id`) REFERENCES `waveforms`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`content_digest`) REFERENCES `contents`(`digest`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`author_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`parent_id`) REFERENCES `revisions`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `revisions_number` ON `revisions` (`waveform_id`,`number`);--> statement-breakpoint
CREATE INDEX `revisions_content` ON `revisions` (`content_digest`);--> statement-breakpoint
CREATE TABLE `waveforms` (
	`id` text PRIMARY KEY NOT NULL,
	`created_by` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`head_revision_id` text NOT NULL,
	`title` text NOT NULL,
	`changed_at_ms` integer NOT NULL,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `withdrawals` (
	`edition_id` text PRIMARY KEY NOT NULL,
	`reason` text NOT NULL,
	`withdrawn_by` text NOT NULL,
	`withdrawn_at_ms` integer NOT NULL,
	FOREIGN KEY (`edition_id`) REFERENCES `editions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`withdrawn_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
