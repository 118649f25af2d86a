CREATE TABLE `check_references` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`number` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`name` varchar(120) NOT NULL,
	`quantity_key` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`freq_hz` double,
	`nominal` double NOT NULL,
	`tolerance` double NOT NULL,
	`instrument_id` bigint unsigned NOT NULL,
	`path_id` bigint unsigned,
	`created_at` datetime(3) NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `check_references_id` PRIMARY KEY(`id`),
	CONSTRAINT `check_references_number_unique` UNIQUE(`number`)
);
--> statement-breakpoint
CREATE TABLE `daily_checks` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`check_reference_id` bigint unsigned NOT NULL,
	`instrument_revision_id` bigint unsigned NOT NULL,
	`path_revision_id` bigint unsigned,
	`entered_text` varchar(60) NOT NULL,
	`entered_unit` varchar(12) NOT NULL,
	`value` double NOT NULL,
	`deviation` double NOT NULL,
	`is_good` boolean NOT NULL,
	`at` datetime(3) NOT NULL,
	`by_user_id` bigint unsigned,
	`explanation` varchar(500),
	`explained_at` datetime(3),
	`explained_by` bigint unsigned,
	CONSTRAINT `daily_checks_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `history_readings` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`history_sheet_id` bigint unsigned NOT NULL,
	`quantity_key` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`band` varchar(8) character set ascii collate ascii_bin,
	`entered_text` varchar(60) NOT NULL,
	`entered_unit` varchar(12) NOT NULL,
	`value` double NOT NULL,
	CONSTRAINT `history_readings_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `history_sheets` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`model_id` bigint unsigned NOT NULL,
	`serial` varchar(30) character set ascii collate ascii_bin NOT NULL,
	`unit_id` bigint unsigned,
	`tested_on` varchar(10) character set ascii collate ascii_bin,
	`note` varchar(300) NOT NULL DEFAULT '',
	`created_at` datetime(3) NOT NULL,
	`created_by` bigint unsigned,
	CONSTRAINT `history_sheets_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `path_part_revisions` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`path_part_id` bigint unsigned NOT NULL,
	`revision` int NOT NULL,
	`spec` json NOT NULL,
	`file_id` bigint unsigned,
	`created_at` datetime(3) NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `path_part_revisions_id` PRIMARY KEY(`id`),
	CONSTRAINT `path_part_revisions_path_part_id_revision_unique` UNIQUE(`path_part_id`,`revision`)
);
--> statement-breakpoint
CREATE TABLE `path_parts` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`number` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`name` varchar(120) NOT NULL,
	CONSTRAINT `path_parts_id` PRIMARY KEY(`id`),
	CONSTRAINT `path_parts_number_unique` UNIQUE(`number`)
);
--> statement-breakpoint
CREATE TABLE `run_concessions` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`test_run_id` bigint unsigned NOT NULL,
	`test_point_id` bigint unsigned NOT NULL,
	`reason` varchar(500) NOT NULL,
	`at` datetime(3) NOT NULL,
	`by_user_id` bigint unsigned NOT NULL,
	`withdrawn_at` datetime(3),
	`withdrawn_by` bigint unsigned,
	CONSTRAINT `run_concessions_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `run_flags` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`test_run_id` bigint unsigned NOT NULL,
	`daily_check_id` bigint unsigned NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`ended_at` datetime(3),
	`ended_by` bigint unsigned,
	`note` varchar(500),
	CONSTRAINT `run_flags_id` PRIMARY KEY(`id`),
	CONSTRAINT `run_flags_test_run_id_daily_check_id_unique` UNIQUE(`test_run_id`,`daily_check_id`)
);
--> statement-breakpoint
CREATE TABLE `frequency_plan_revisions` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`model_id` bigint unsigned NOT NULL,
	`revision` int NOT NULL,
	`plan` json NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `frequency_plan_revisions_id` PRIMARY KEY(`id`),
	CONSTRAINT `frequency_plan_revisions_model_id_revision_unique` UNIQUE(`model_id`,`revision`)
);
--> statement-breakpoint
CREATE TABLE `access_tokens` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`token_hash` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`user_id` bigint unsigned NOT NULL,
	`name` varchar(80) NOT NULL,
	`scopes` json NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`expires_at` datetime(3),
	`last_used_at` datetime(3),
	`revoked_at` datetime(3),
	CONSTRAINT `access_tokens_id` PRIMARY KEY(`id`),
	CONSTRAINT `access_tokens_tokenHash_unique` UNIQUE(`token_hash`)
);
--> statement-breakpoint
ALTER TABLE `check_references` ADD CONSTRAINT `check_references_instrument_id_instruments_id_fk` FOREIGN KEY (`instrument_id`) REFERENCES `instruments`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `check_references` ADD CONSTRAINT `check_references_path_id_paths_id_fk` FOREIGN KEY (`path_id`) REFERENCES `paths`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `daily_checks` ADD CONSTRAINT `daily_checks_check_reference_id_check_references_id_fk` FOREIGN KEY (`check_reference_id`) REFERENCES `check_references`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `daily_checks` ADD CONSTRAINT `daily_checks_instrument_revision_id_instrument_revisions_id_fk` FOREIGN KEY (`instrument_revision_id`) REFERENCES `instrument_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `daily_checks` ADD CONSTRAINT `daily_checks_path_revision_id_path_revisions_id_fk` FOREIGN KEY (`path_revision_id`) REFERENCES `path_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `daily_checks` ADD CONSTRAINT `daily_checks_by_user_id_users_id_fk` FOREIGN KEY (`by_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `daily_checks` ADD CONSTRAINT `daily_checks_explained_by_users_id_fk` FOREIGN KEY (`explained_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `history_readings` ADD CONSTRAINT `history_readings_history_sheet_id_history_sheets_id_fk` FOREIGN KEY (`history_sheet_id`) REFERENCES `history_sheets`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `history_sheets` ADD CONSTRAINT `history_sheets_model_id_models_id_fk` FOREIGN KEY (`model_id`) REFERENCES `models`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `history_sheets` ADD CONSTRAINT `history_sheets_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `history_sheets` ADD CONSTRAINT `history_sheets_created_by_users_id_fk` FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `path_part_revisions` ADD CONSTRAINT `path_part_revisions_path_part_id_path_parts_id_fk` FOREIGN KEY (`path_part_id`) REFERENCES `path_parts`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `path_part_revisions` ADD CONSTRAINT `path_part_revisions_file_id_files_id_fk` FOREIGN KEY (`file_id`) REFERENCES `files`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `run_concessions` ADD CONSTRAINT `run_concessions_test_run_id_test_runs_id_fk` FOREIGN KEY (`test_run_id`) REFERENCES `test_runs`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `run_concessions` ADD CONSTRAINT `run_concessions_test_point_id_test_points_id_fk` FOREIGN KEY (`test_point_id`) REFERENCES `test_points`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `run_concessions` ADD CONSTRAINT `run_concessions_by_user_id_users_id_fk` FOREIGN KEY (`by_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `run_concessions` ADD CONSTRAINT `run_concessions_withdrawn_by_users_id_fk` FOREIGN KEY (`withdrawn_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `run_flags` ADD CONSTRAINT `run_flags_test_run_id_test_runs_id_fk` FOREIGN KEY (`test_run_id`) REFERENCES `test_runs`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `run_flags` ADD CONSTRAINT `run_flags_daily_check_id_daily_checks_id_fk` FOREIGN KEY (`daily_check_id`) REFERENCES `daily_checks`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `run_flags` ADD CONSTRAINT `run_flags_ended_by_users_id_fk` FOREIGN KEY (`ended_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `frequency_plan_revisions` ADD CONSTRAINT `frequency_plan_revisions_model_id_models_id_fk` FOREIGN KEY (`model_id`) REFERENCES `models`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `access_tokens` ADD CONSTRAINT `access_tokens_user_id_users_id_fk` FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX `daily_checks_check_reference_id_idx` ON `daily_checks` (`check_reference_id`,`at`);--> statement-breakpoint
CREATE INDEX `history_readings_history_sheet_id_idx` ON `history_readings` (`history_sheet_id`);--> statement-breakpoint
CREATE INDEX `history_sheets_serial_idx` ON `history_sheets` (`serial`);--> statement-breakpoint
CREATE INDEX `history_sheets_model_id_idx` ON `history_sheets` (`model_id`);--> statement-breakpoint
CREATE INDEX `run_concessions_test_run_id_idx` ON `run_concessions` (`test_run_id`,`test_point_id`);--> statement-breakpoint
CREATE INDEX `run_flags_ended_at_idx` ON `run_flags` (`ended_at`);--> statement-breakpoint
CREATE INDEX `access_tokens_user_id_idx` ON `access_tokens` (`user_id`);