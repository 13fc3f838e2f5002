CREATE TABLE `users` (
	`id` char(20) NOT NULL,
	`email` varchar(254) NOT NULL,
	`name` varchar(120) NOT NULL,
	`password_hash` varchar(100) NOT NULL,
	`is_demo` boolean NOT NULL DEFAULT false,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `users_id` PRIMARY KEY(`id`),
	CONSTRAINT `users_email` UNIQUE(`email`)
);
--> statement-breakpoint
CREATE TABLE `envelopes` (
	`id` char(20) NOT NULL,
	`workshop_id` char(20) NOT NULL,
	`name` varchar(80) NOT NULL,
	`shape` varchar(12) NOT NULL,
	`width_mm` double,
	`depth_mm` double,
	`diameter_mm` double,
	`height_mm` double NOT NULL,
	`margin_mm` double NOT NULL,
	`nozzle_mm` double NOT NULL,
	`layer_height_mm` double NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`updated_at` datetime(3) NOT NULL,
	CONSTRAINT `envelopes_id` PRIMARY KEY(`id`),
	CONSTRAINT `envelopes_name` UNIQUE(`workshop_id`,`name`)
);
--> statement-breakpoint
CREATE TABLE `jobs` (
	`id` char(20) NOT NULL,
	`workshop_id` char(20) NOT NULL,
	`kind` varchar(40) NOT NULL,
	`subject_id` char(20) NOT NULL,
	`input` json NOT NULL,
	`state` varchar(12) NOT NULL,
	`stage` varchar(120) NOT NULL DEFAULT '',
	`fraction` double NOT NULL DEFAULT 0,
	`output` json,
	`error` json,
	`attempts` int NOT NULL DEFAULT 0,
	`cancel_requested` boolean NOT NULL DEFAULT false,
	`lease_token` char(36),
	`lease_until` datetime(3),
	`run_after` datetime(3) NOT NULL DEFAULT CURRENT_TIMESTAMP(3),
	`created_at` datetime(3) NOT NULL DEFAULT CURRENT_TIMESTAMP(3),
	`started_at` datetime(3),
	`finished_at` datetime(3),
	`settled_at` datetime(3),
	CONSTRAINT `jobs_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `models` (
	`id` char(20) NOT NULL,
	`workshop_id` char(20) NOT NULL,
	`name` varchar(120) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`created_by` char(20) NOT NULL,
	`last_plan_number` int NOT NULL DEFAULT 0,
	CONSTRAINT `models_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `revisions` (
	`id` char(20) NOT NULL,
	`model_id` char(20) NOT NULL,
	`number` int NOT NULL,
	`file_name` varchar(255) NOT NULL,
	`file_bytes` bigint unsigned NOT NULL,
	`source_key` varchar(200) NOT NULL,
	`report` json,
	`solid_key` varchar(200),
	`view_key` varchar(200),
	`thumbnail_key` varchar(200),
	`view_triangles` int NOT NULL DEFAULT 0,
	`scale` json NOT NULL,
	`scale_confirmed` boolean NOT NULL DEFAULT false,
	`scale_reason` varchar(300) NOT NULL DEFAULT '',
	`job_id` char(20) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `revisions_id` PRIMARY KEY(`id`),
	CONSTRAINT `revisions_number` UNIQUE(`model_id`,`number`)
);
--> statement-breakpoint
CREATE TABLE `plans` (
	`id` char(20) NOT NULL,
	`workshop_id` char(20) NOT NULL,
	`model_id` char(20) NOT NULL,
	`revision_id` char(20) NOT NULL,
	`number` int NOT NULL,
	`seed` int NOT NULL,
	`envelope` json NOT NULL,
	`millimetres_per_unit` double NOT NULL,
	`job_id` char(20) NOT NULL,
	`result` json,
	`piece_count` int,
	`all_passed` boolean,
	`archive_bytes` bigint unsigned,
	`created_at` datetime(3) NOT NULL,
	`created_by` char(20) NOT NULL,
	CONSTRAINT `plans_id` PRIMARY KEY(`id`),
	CONSTRAINT `plans_number` UNIQUE(`model_id`,`number`)
);
--> statement-breakpoint
CREATE TABLE `refresh_tokens` (
	`token_hash` char(64) NOT NULL,
	`session_id` char(20) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`spent_at` datetime(3),
	CONSTRAINT `refresh_tokens_token_hash` PRIMARY KEY(`token_hash`)
);
--> statement-breakpoint
CREATE TABLE `sessions` (
	`id` char(20) NOT NULL,
	`user_id` char(20) NOT NULL,
	`workshop_id` char(20) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`expires_at` datetime(3) NOT NULL,
	`revoked_at` datetime(3),
	CONSTRAINT `sessions_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `memberships` (
	`user_id` char(20) NOT NULL,
	`workshop_id` char(20) NOT NULL,
	`role` varchar(20) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `memberships_pk` PRIMARY KEY(`user_id`,`workshop_id`)
);
--> statement-breakpoint
CREATE TABLE `workshops` (
	`id` char(20) NOT NULL,
	`name` varchar(120) NOT NULL,
	`is_demo` boolean NOT NULL DEFAULT false,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `workshops_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
ALTER TABLE `envelopes` ADD CONSTRAINT `envelopes_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `models` ADD CONSTRAINT `models_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `models` ADD CONSTRAINT `models_created_by_users_id_fk` FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `revisions` ADD CONSTRAINT `revisions_model_id_models_id_fk` FOREIGN KEY (`model_id`) REFERENCES `models`(`id`) ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `plans` ADD CONSTRAINT `plans_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `plans` ADD CONSTRAINT `plans_model_id_models_id_fk` FOREIGN KEY (`model_id`) REFERENCES `models`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `plans` ADD CONSTRAINT `plans_revision_id_revisions_id_fk` FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `plans` ADD CONSTRAINT `plans_created_by_users_id_fk` FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `refresh_tokens` ADD CONSTRAINT `refresh_tokens_session_id_sessions_id_fk` FOREIGN KEY (`session_id`) REFERENCES `sessions`(`id`) ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `sessions` ADD CONSTRAINT `sessions_user_id_users_id_fk` FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `sessions` ADD CONSTRAINT `sessions_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `memberships` ADD CONSTRAINT `memberships_user_id_users_id_fk` FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `memberships` ADD CONSTRAINT `memberships_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX `jobs_claim` ON `jobs` (`state`,`run_after`,`id`);--> statement-breakpoint
CREATE INDEX `jobs_lease` ON `jobs` (`state`,`lease_until`);--> statement-breakpoint
CREATE INDEX `jobs_settle` ON `jobs` (`settled_at`,`state`);--> statement-breakpoint
CREATE INDEX `jobs_subject` ON `jobs` (`subject_id`);--> statement-breakpoint
CREATE INDEX `models_list` ON `models` (`workshop_id`,`created_at`);--> statement-breakpoint
CREATE INDEX `models_creator` ON `models` (`created_by`);--> statement-breakpoint
CREATE INDEX `plans_list` ON `plans` (`workshop_id`,`created_at`);--> statement-breakpoint
CREATE INDEX `plans_revision` ON `plans` (`revision_id`);--> statement-breakpoint
CREATE INDEX `plans_creator` ON `plans` (`created_by`);--> statement-breakpoint
CREATE INDEX `refresh_tokens_session` ON `refresh_tokens` (`session_id`);--> statement-breakpoint
CREATE INDEX `sessions_user` ON `sessions` (`user_id`);--> statement-breakpoint
CREATE INDEX `sessions_workshop` ON `sessions` (`workshop_id`);--> statement-breakpoint
CREATE INDEX `sessions_expiry` ON `sessions` (`expires_at`);--> statement-breakpoint
CREATE INDEX `memberships_workshop` ON `memberships` (`workshop_id`);