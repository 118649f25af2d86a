CREATE TABLE `instrument_revisions` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`instrument_id` bigint unsigned NOT NULL,
	`revision` int NOT NULL,
	`spec` json NOT NULL,
	`calibration_file_id` bigint unsigned,
	`created_at` datetime(3) NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `instrument_revisions_id` PRIMARY KEY(`id`),
	CONSTRAINT `instrument_revisions_instrument_id_revision_unique` UNIQUE(`instrument_id`,`revision`)
);
--> statement-breakpoint
CREATE TABLE `instruments` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`number` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`name` varchar(120) NOT NULL,
	CONSTRAINT `instruments_id` PRIMARY KEY(`id`),
	CONSTRAINT `instruments_number_unique` UNIQUE(`number`)
);
--> statement-breakpoint
CREATE TABLE `limit_rule_revisions` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`key` varchar(60) character set ascii collate ascii_bin NOT NULL,
	`revision` int NOT NULL,
	`definition` json NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `limit_rule_revisions_id` PRIMARY KEY(`id`),
	CONSTRAINT `limit_rule_revisions_key_revision_unique` UNIQUE(`key`,`revision`)
);
--> statement-breakpoint
CREATE TABLE `path_revisions` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`path_id` bigint unsigned NOT NULL,
	`revision` int NOT NULL,
	`spec` json NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `path_revisions_id` PRIMARY KEY(`id`),
	CONSTRAINT `path_revisions_path_id_revision_unique` UNIQUE(`path_id`,`revision`)
);
--> statement-breakpoint
CREATE TABLE `paths` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`number` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`name` varchar(120) NOT NULL,
	CONSTRAINT `paths_id` PRIMARY KEY(`id`),
	CONSTRAINT `paths_number_unique` UNIQUE(`number`)
);
--> statement-breakpoint
CREATE TABLE `quantity_revisions` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`key` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`revision` int NOT NULL,
	`definition` json NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `quantity_revisions_id` PRIMARY KEY(`id`),
	CONSTRAINT `quantity_revisions_key_revision_unique` UNIQUE(`key`,`revision`)
);
--> statement-breakpoint
CREATE TABLE `readings` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`test_run_id` bigint unsigned NOT NULL,
	`test_point_id` bigint unsigned NOT NULL,
	`reading_no` int NOT NULL,
	`quantity_key` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`band` varchar(8) character set ascii collate ascii_bin,
	`freq_hz` double,
	`entered_text` varchar(60) NOT NULL,
	`entered_unit` varchar(12) NOT NULL,
	`value` double NOT NULL,
	`at_most` boolean NOT NULL DEFAULT false,
	`attenuation_held` boolean NOT NULL DEFAULT false,
	`source` enum('typed','sweep','wire','history') NOT NULL,
	`sweep_id` bigint unsigned,
	`instrument_revision_id` bigint unsigned,
	`path_revision_id` bigint unsigned,
	`at` datetime(3) NOT NULL,
	`by_user_id` bigint unsigned,
	`voided_at` datetime(3),
	`void_reason` varchar(300),
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `readings_id` PRIMARY KEY(`id`),
	CONSTRAINT `readings_test_run_id_test_point_id_reading_no_unique` UNIQUE(`test_run_id`,`test_point_id`,`reading_no`)
);
--> statement-breakpoint
CREATE TABLE `run_points` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`test_run_id` bigint unsigned NOT NULL,
	`test_point_id` bigint unsigned NOT NULL,
	`verdict` enum('pass','too_close','fail','not_run') NOT NULL,
	`value` double,
	`expanded_uncertainty` double,
	`coverage_factor` double,
	`reading_count` int NOT NULL,
	`lower_limit` double,
	`upper_limit` double,
	`rule_key` varchar(60) character set ascii collate ascii_bin,
	`rule_text` text NOT NULL,
	`probability_of_conformance` double,
	`concession` varchar(500),
	CONSTRAINT `run_points_id` PRIMARY KEY(`id`),
	CONSTRAINT `run_points_test_run_id_test_point_id_unique` UNIQUE(`test_run_id`,`test_point_id`)
);
--> statement-breakpoint
CREATE TABLE `sweeps` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`test_run_id` bigint unsigned NOT NULL,
	`file_id` bigint unsigned NOT NULL,
	`band` varchar(8) character set ascii collate ascii_bin NOT NULL,
	`understood` json NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`by_user_id` bigint unsigned,
	CONSTRAINT `sweeps_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `test_runs` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`unit_id` bigint unsigned NOT NULL,
	`run_no` int NOT NULL,
	`test_plan_revision_id` bigint unsigned NOT NULL,
	`state` enum('open','closed') NOT NULL,
	`result` enum('passed','passed_by_concession','undecided','failed'),
	`stopped_early` boolean NOT NULL DEFAULT false,
	`tester_user_id` bigint unsigned NOT NULL,
	`destination_country` varchar(2) character set ascii collate ascii_bin,
	`supply_v` double,
	`ambient_c` double,
	`firmware_version` varchar(40),
	`alignment` json NOT NULL,
	`computation_version` varchar(20) NOT NULL,
	`opened_at` datetime(3) NOT NULL,
	`closed_at` datetime(3),
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `test_runs_id` PRIMARY KEY(`id`),
	CONSTRAINT `test_runs_unit_id_run_no_unique` UNIQUE(`unit_id`,`run_no`)
);
--> statement-breakpoint
CREATE TABLE `bom_lines` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`bom_revision_id` bigint unsigned NOT NULL,
	`line_no` int NOT NULL,
	`part_id` bigint unsigned NOT NULL,
	`quantity` bigint NOT NULL,
	`designators` json NOT NULL,
	`scrap_percent` decimal(5,2) NOT NULL DEFAULT 0,
	`condition` varchar(500),
	CONSTRAINT `bom_lines_id` PRIMARY KEY(`id`),
	CONSTRAINT `bom_lines_bom_revision_id_line_no_unique` UNIQUE(`bom_revision_id`,`line_no`),
	CONSTRAINT `bom_lines_quantity_check` CHECK(`bom_lines`.`quantity` > 0)
);
--> statement-breakpoint
CREATE TABLE `bom_revisions` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`model_id` bigint unsigned,
	`part_id` bigint unsigned,
	`letter` varchar(2) character set ascii collate ascii_bin NOT NULL,
	`state` enum('draft','released','retired') NOT NULL,
	`note` varchar(500) NOT NULL DEFAULT '',
	`replaces_id` bigint unsigned,
	`created_at` datetime(3) NOT NULL,
	`released_at` datetime(3),
	`released_by` bigint unsigned,
	CONSTRAINT `bom_revisions_id` PRIMARY KEY(`id`),
	CONSTRAINT `bom_revisions_model_id_letter_unique` UNIQUE(`model_id`,`letter`),
	CONSTRAINT `bom_revisions_part_id_letter_unique` UNIQUE(`part_id`,`letter`),
	CONSTRAINT `bom_revisions_owner_check` CHECK((`bom_revisions`.`model_id` is null) <> (`bom_revisions`.`part_id` is null))
);
--> statement-breakpoint
CREATE TABLE `build_sheet_revisions` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`model_id` bigint unsigned NOT NULL,
	`letter` varchar(2) character set ascii collate ascii_bin NOT NULL,
	`state` enum('draft','released','retired') NOT NULL,
	`note` varchar(500) NOT NULL DEFAULT '',
	`created_at` datetime(3) NOT NULL,
	`released_at` datetime(3),
	`released_by` bigint unsigned,
	CONSTRAINT `build_sheet_revisions_id` PRIMARY KEY(`id`),
	CONSTRAINT `build_sheet_revisions_model_id_letter_unique` UNIQUE(`model_id`,`letter`)
);
--> statement-breakpoint
CREATE TABLE `build_steps` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`build_sheet_revision_id` bigint unsigned NOT NULL,
	`position` int NOT NULL,
	`stage` enum('kit','boards','align') NOT NULL,
	`title` varchar(120) NOT NULL,
	`instruction` text NOT NULL,
	`caution` varchar(300) NOT NULL DEFAULT '',
	`minutes` int,
	`skill` varchar(40),
	`condition` varchar(500),
	`entry` json,
	CONSTRAINT `build_steps_id` PRIMARY KEY(`id`),
	CONSTRAINT `build_steps_build_sheet_revision_id_position_unique` UNIQUE(`build_sheet_revision_id`,`position`)
);
--> statement-breakpoint
CREATE TABLE `models` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`slug` varchar(60) character set ascii collate ascii_bin NOT NULL,
	`serial_prefix` varchar(8) character set ascii collate ascii_bin NOT NULL,
	`name` varchar(80) NOT NULL,
	`tagline` varchar(200) NOT NULL,
	`description` text NOT NULL,
	`panel` json NOT NULL,
	`rated_power_w` double NOT NULL,
	`net_weight_g` int NOT NULL,
	`customs_description` varchar(200) NOT NULL,
	`hs_code` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`state` enum('draft','for_sale','withdrawn') NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `models_id` PRIMARY KEY(`id`),
	CONSTRAINT `models_slug_unique` UNIQUE(`slug`),
	CONSTRAINT `models_serialPrefix_unique` UNIQUE(`serial_prefix`)
);
--> statement-breakpoint
CREATE TABLE `option_groups` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`model_id` bigint unsigned NOT NULL,
	`key` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`label` varchar(80) NOT NULL,
	`min_chosen` int NOT NULL,
	`max_chosen` int NOT NULL,
	`position` int NOT NULL,
	CONSTRAINT `option_groups_id` PRIMARY KEY(`id`),
	CONSTRAINT `option_groups_model_id_key_unique` UNIQUE(`model_id`,`key`),
	CONSTRAINT `option_groups_chosen_check` CHECK(`option_groups`.`min_chosen` >= 0 and `option_groups`.`min_chosen` <= `option_groups`.`max_chosen`)
);
--> statement-breakpoint
CREATE TABLE `options` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`option_group_id` bigint unsigned NOT NULL,
	`key` varchar(60) character set ascii collate ascii_bin NOT NULL,
	`label` varchar(80) NOT NULL,
	`note` varchar(200) NOT NULL DEFAULT '',
	`price_minor` bigint NOT NULL,
	`position` int NOT NULL,
	`is_default` boolean NOT NULL DEFAULT false,
	`needs` json NOT NULL,
	`excludes` json NOT NULL,
	CONSTRAINT `options_id` PRIMARY KEY(`id`),
	CONSTRAINT `options_option_group_id_key_unique` UNIQUE(`option_group_id`,`key`)
);
--> statement-breakpoint
CREATE TABLE `spares` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`number` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`name` varchar(120) NOT NULL,
	`part_id` bigint unsigned,
	`price_minor` bigint NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`net_weight_g` int NOT NULL,
	`hs_code` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`origin_country` varchar(2) character set ascii collate ascii_bin NOT NULL,
	`state` enum('for_sale','withdrawn') NOT NULL,
	CONSTRAINT `spares_id` PRIMARY KEY(`id`),
	CONSTRAINT `spares_number_unique` UNIQUE(`number`)
);
--> statement-breakpoint
CREATE TABLE `test_plan_revisions` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`model_id` bigint unsigned NOT NULL,
	`letter` varchar(2) character set ascii collate ascii_bin NOT NULL,
	`state` enum('draft','released','retired') NOT NULL,
	`note` varchar(500) NOT NULL DEFAULT '',
	`supply_v` double NOT NULL,
	`load_ohm` double NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`released_at` datetime(3),
	`released_by` bigint unsigned,
	CONSTRAINT `test_plan_revisions_id` PRIMARY KEY(`id`),
	CONSTRAINT `test_plan_revisions_model_id_letter_unique` UNIQUE(`model_id`,`letter`)
);
--> statement-breakpoint
CREATE TABLE `test_points` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`test_plan_revision_id` bigint unsigned NOT NULL,
	`position` int NOT NULL,
	`quantity_key` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`band` varchar(8) character set ascii collate ascii_bin,
	`freq_hz` double,
	`lower_limit` double,
	`upper_limit` double,
	`limit_rule` enum('fixed','spurious') NOT NULL,
	`decision` enum('guarded','simple') NOT NULL,
	`required` boolean NOT NULL DEFAULT true,
	`condition` varchar(500),
	CONSTRAINT `test_points_id` PRIMARY KEY(`id`),
	CONSTRAINT `test_points_test_plan_revision_id_position_unique` UNIQUE(`test_plan_revision_id`,`position`),
	CONSTRAINT `test_points_legal_check` CHECK(`test_points`.`limit_rule` = 'fixed' or `test_points`.`decision` = 'guarded')
);
--> statement-breakpoint
CREATE TABLE `certificate_buyers` (
	`certificate_id` bigint unsigned NOT NULL,
	`call_sign` varchar(20),
	`order_number` varchar(20),
	`salt` varchar(64) character set ascii collate ascii_bin NOT NULL,
	CONSTRAINT `certificate_buyers_certificate_id` PRIMARY KEY(`certificate_id`)
);
--> statement-breakpoint
CREATE TABLE `certificates` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`number` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`letter` varchar(2) character set ascii collate ascii_bin NOT NULL DEFAULT '',
	`unit_id` bigint unsigned NOT NULL,
	`test_run_id` bigint unsigned NOT NULL,
	`contact_id` bigint unsigned,
	`destination_country` varchar(2) character set ascii collate ascii_bin,
	`code` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`statement` longtext NOT NULL,
	`signature` varchar(128) character set ascii collate ascii_bin NOT NULL,
	`signing_key_id` bigint unsigned NOT NULL,
	`replaces_id` bigint unsigned,
	`reason` varchar(500) NOT NULL DEFAULT '',
	`file_id` bigint unsigned,
	`issued_at` datetime(3) NOT NULL,
	`issued_by` bigint unsigned NOT NULL,
	CONSTRAINT `certificates_id` PRIMARY KEY(`id`),
	CONSTRAINT `certificates_code_unique` UNIQUE(`code`),
	CONSTRAINT `certificates_number_letter_unique` UNIQUE(`number`,`letter`)
);
--> statement-breakpoint
CREATE TABLE `form_returns` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`token_hash` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`path` varchar(500) NOT NULL,
	`values` json NOT NULL,
	`message` varchar(1000) NOT NULL,
	`fields` json NOT NULL,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `form_returns_id` PRIMARY KEY(`id`),
	CONSTRAINT `form_returns_tokenHash_unique` UNIQUE(`token_hash`)
);
--> statement-breakpoint
CREATE TABLE `idempotency_keys` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`actor` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`route` varchar(200) character set ascii collate ascii_bin NOT NULL,
	`key` varchar(200) character set ascii collate ascii_bin NOT NULL,
	`step` int NOT NULL,
	`request_hash` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`result` json,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `idempotency_keys_id` PRIMARY KEY(`id`),
	CONSTRAINT `idempotency_keys_actor_route_key_step_unique` UNIQUE(`actor`,`route`,`key`,`step`)
);
--> statement-breakpoint
CREATE TABLE `ledger_entries` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`at` datetime(3) NOT NULL,
	`actor_kind` enum('user','visitor','provider','system') NOT NULL,
	`actor_user_id` bigint unsigned,
	`action` varchar(60) character set ascii collate ascii_bin NOT NULL,
	`details` json NOT NULL,
	`request_id` varchar(64) character set ascii collate ascii_bin,
	CONSTRAINT `ledger_entries_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `ledger_subjects` (
	`ledger_entry_id` bigint unsigned NOT NULL,
	`subject_type` varchar(30) character set ascii collate ascii_bin NOT NULL,
	`subject_id` bigint unsigned NOT NULL,
	CONSTRAINT `ledger_subjects_ledger_entry_id_subject_type_subject_id_pk` PRIMARY KEY(`ledger_entry_id`,`subject_type`,`subject_id`)
);
--> statement-breakpoint
CREATE TABLE `outbox` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`key` varchar(120) character set ascii collate ascii_bin NOT NULL,
	`kind` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`payload` json NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`available_at` datetime(3) NOT NULL,
	`attempts` int NOT NULL DEFAULT 0,
	`leased_until` datetime(3),
	`done_at` datetime(3),
	`gave_up_at` datetime(3),
	`last_error` text,
	CONSTRAINT `outbox_id` PRIMARY KEY(`id`),
	CONSTRAINT `outbox_key_unique` UNIQUE(`key`)
);
--> statement-breakpoint
CREATE TABLE `shipment_units` (
	`shipment_id` bigint unsigned NOT NULL,
	`unit_id` bigint unsigned NOT NULL,
	`certificate_id` bigint unsigned NOT NULL,
	CONSTRAINT `shipment_units_shipment_id_unit_id_pk` PRIMARY KEY(`shipment_id`,`unit_id`)
);
--> statement-breakpoint
CREATE TABLE `shipments` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`number` int NOT NULL,
	`order_id` bigint unsigned NOT NULL,
	`state` enum('packed','shipped') NOT NULL,
	`carrier` varchar(80) NOT NULL DEFAULT '',
	`tracking_number` varchar(40) character set ascii collate ascii_bin,
	`weight_g` int,
	`packed_at` datetime(3) NOT NULL,
	`packed_by` bigint unsigned,
	`shipped_at` datetime(3),
	`shipped_by` bigint unsigned,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `shipments_id` PRIMARY KEY(`id`),
	CONSTRAINT `shipments_number_unique` UNIQUE(`number`)
);
--> statement-breakpoint
CREATE TABLE `file_chunks` (
	`file_id` bigint unsigned NOT NULL,
	`position` int NOT NULL,
	`bytes` mediumblob NOT NULL,
	CONSTRAINT `file_chunks_file_id_position_pk` PRIMARY KEY(`file_id`,`position`)
);
--> statement-breakpoint
CREATE TABLE `files` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`sha256` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`size_bytes` int NOT NULL,
	`media_type` varchar(100) character set ascii collate ascii_bin NOT NULL,
	`name` varchar(255) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`created_by` bigint unsigned,
	CONSTRAINT `files_id` PRIMARY KEY(`id`),
	CONSTRAINT `files_sha256_unique` UNIQUE(`sha256`)
);
--> statement-breakpoint
CREATE TABLE `number_series` (
	`series` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`next_value` bigint NOT NULL,
	CONSTRAINT `number_series_series` PRIMARY KEY(`series`)
);
--> statement-breakpoint
CREATE TABLE `signing_keys` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`key_id` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`public_key` varchar(200) NOT NULL,
	`sealed_private_key` varchar(1000) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`created_by` bigint unsigned,
	`retired_at` datetime(3),
	CONSTRAINT `signing_keys_id` PRIMARY KEY(`id`),
	CONSTRAINT `signing_keys_keyId_unique` UNIQUE(`key_id`)
);
--> statement-breakpoint
CREATE TABLE `works` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`name` varchar(120) NOT NULL,
	`address_lines` json NOT NULL,
	`country` varchar(2) character set ascii collate ascii_bin NOT NULL,
	`email` varchar(254) NOT NULL,
	`time_zone` varchar(64) NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`tester_is_not_builder` boolean NOT NULL DEFAULT false,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `works_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `checkouts` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`order_id` bigint unsigned NOT NULL,
	`amount_minor` bigint NOT NULL,
	`purpose` enum('order','balance') NOT NULL,
	`state` enum('wanted','open','paid','expired') NOT NULL,
	`provider_session_id` varchar(255) character set ascii collate ascii_bin,
	`url` text,
	`created_at` datetime(3) NOT NULL,
	`expires_at` datetime(3) NOT NULL,
	CONSTRAINT `checkouts_id` PRIMARY KEY(`id`),
	CONSTRAINT `checkouts_providerSessionId_unique` UNIQUE(`provider_session_id`)
);
--> statement-breakpoint
CREATE TABLE `contacts` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`user_id` bigint unsigned,
	`email` varchar(254) NOT NULL,
	`name` varchar(300) NOT NULL,
	`call_sign` varchar(20),
	`phone` varchar(40),
	`address_lines` json NOT NULL,
	`city` varchar(120) NOT NULL,
	`region` varchar(120) NOT NULL DEFAULT '',
	`postcode` varchar(20) NOT NULL DEFAULT '',
	`country` varchar(2) character set ascii collate ascii_bin NOT NULL,
	`erased_at` datetime(3),
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `contacts_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `order_lines` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`order_id` bigint unsigned NOT NULL,
	`line_no` int NOT NULL,
	`kind` enum('rig','spare','carriage') NOT NULL,
	`model_id` bigint unsigned,
	`spare_id` bigint unsigned,
	`batch_id` bigint unsigned,
	`description` varchar(300) NOT NULL,
	`options` json NOT NULL,
	`quantity` int NOT NULL,
	`unit_price_minor` bigint NOT NULL,
	`tax_minor` bigint NOT NULL,
	`total_minor` bigint NOT NULL,
	CONSTRAINT `order_lines_id` PRIMARY KEY(`id`),
	CONSTRAINT `order_lines_order_id_line_no_unique` UNIQUE(`order_id`,`line_no`),
	CONSTRAINT `order_lines_quantity_check` CHECK(`order_lines`.`quantity` > 0),
	CONSTRAINT `order_lines_kind_check` CHECK((`order_lines`.`kind` = 'rig') = (`order_lines`.`model_id` is not null) and (`order_lines`.`kind` = 'rig') = (`order_lines`.`batch_id` is not null) and (`order_lines`.`kind` = 'spare') = (`order_lines`.`spare_id` is not null))
);
--> statement-breakpoint
CREATE TABLE `orders` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`number` int NOT NULL,
	`link_hash` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`buyer_user_id` bigint unsigned,
	`contact_id` bigint unsigned NOT NULL,
	`state` enum('awaiting_payment','paid','cancelled','fulfilled') NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`total_minor` bigint NOT NULL,
	`due_now_minor` bigint NOT NULL,
	`destination_country` varchar(2) character set ascii collate ascii_bin NOT NULL,
	`tax` json NOT NULL,
	`promised_on` varchar(10) character set ascii collate ascii_bin,
	`placed_at` datetime(3) NOT NULL,
	`paid_at` datetime(3),
	`cancelled_at` datetime(3),
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `orders_id` PRIMARY KEY(`id`),
	CONSTRAINT `orders_number_unique` UNIQUE(`number`),
	CONSTRAINT `orders_linkHash_unique` UNIQUE(`link_hash`)
);
--> statement-breakpoint
CREATE TABLE `payments` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`order_id` bigint unsigned NOT NULL,
	`kind` enum('card','transfer','cash') NOT NULL,
	`checkout_id` bigint unsigned,
	`provider_reference` varchar(255) character set ascii collate ascii_bin,
	`amount_minor` bigint NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`paid_at` datetime(3) NOT NULL,
	`by_user_id` bigint unsigned,
	CONSTRAINT `payments_id` PRIMARY KEY(`id`),
	CONSTRAINT `payments_providerReference_unique` UNIQUE(`provider_reference`),
	CONSTRAINT `payments_amount_check` CHECK(`payments`.`amount_minor` > 0)
);
--> statement-breakpoint
CREATE TABLE `place_holds` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`batch_id` bigint unsigned NOT NULL,
	`order_line_id` bigint unsigned NOT NULL,
	`quantity` int NOT NULL,
	`state` enum('held','taken','released') NOT NULL,
	`held_until` datetime(3) NOT NULL,
	CONSTRAINT `place_holds_id` PRIMARY KEY(`id`),
	CONSTRAINT `place_holds_orderLineId_unique` UNIQUE(`order_line_id`)
);
--> statement-breakpoint
CREATE TABLE `provider_events` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`event_id` varchar(255) character set ascii collate ascii_bin NOT NULL,
	`type` varchar(100) character set ascii collate ascii_bin NOT NULL,
	`object_id` varchar(255) character set ascii collate ascii_bin NOT NULL,
	`body` text NOT NULL,
	`state` enum('kept','applied','unknown') NOT NULL,
	`received_at` datetime(3) NOT NULL,
	`applied_at` datetime(3),
	`note` varchar(300) NOT NULL DEFAULT '',
	CONSTRAINT `provider_events_id` PRIMARY KEY(`id`),
	CONSTRAINT `provider_events_eventId_unique` UNIQUE(`event_id`)
);
--> statement-breakpoint
CREATE TABLE `refunds` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`payment_id` bigint unsigned NOT NULL,
	`provider_reference` varchar(255) character set ascii collate ascii_bin,
	`amount_minor` bigint NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`reason` varchar(300) NOT NULL,
	`state` enum('wanted','done','refused') NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`done_at` datetime(3),
	`by_user_id` bigint unsigned,
	CONSTRAINT `refunds_id` PRIMARY KEY(`id`),
	CONSTRAINT `refunds_providerReference_unique` UNIQUE(`provider_reference`),
	CONSTRAINT `refunds_amount_check` CHECK(`refunds`.`amount_minor` > 0)
);
--> statement-breakpoint
CREATE TABLE `sessions` (
	`id` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`user_id` bigint unsigned NOT NULL,
	`expires_at` datetime(3) NOT NULL,
	CONSTRAINT `sessions_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `sign_in_links` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`token_hash` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`purpose` enum('sign_in','first_owner','invitation') NOT NULL,
	`user_id` bigint unsigned,
	`created_at` datetime(3) NOT NULL,
	`expires_at` datetime(3) NOT NULL,
	`used_at` datetime(3),
	CONSTRAINT `sign_in_links_id` PRIMARY KEY(`id`),
	CONSTRAINT `sign_in_links_tokenHash_unique` UNIQUE(`token_hash`)
);
--> statement-breakpoint
CREATE TABLE `user_profiles` (
	`user_id` bigint unsigned NOT NULL,
	`email` varchar(254) NOT NULL,
	`name` varchar(120) NOT NULL,
	`call_sign` varchar(20),
	CONSTRAINT `user_profiles_user_id` PRIMARY KEY(`user_id`),
	CONSTRAINT `user_profiles_email_unique` UNIQUE(`email`)
);
--> statement-breakpoint
CREATE TABLE `user_roles` (
	`user_id` bigint unsigned NOT NULL,
	`role` enum('owner','builder','tester','shipper','bookkeeper') NOT NULL,
	CONSTRAINT `user_roles_user_id_role_pk` PRIMARY KEY(`user_id`,`role`)
);
--> statement-breakpoint
CREATE TABLE `users` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`password_hash` varchar(255),
	`disabled_at` datetime(3),
	`created_at` datetime(3) NOT NULL,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `users_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `batches` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`number` int NOT NULL,
	`model_id` bigint unsigned NOT NULL,
	`bom_revision_id` bigint unsigned NOT NULL,
	`build_sheet_revision_id` bigint unsigned NOT NULL,
	`test_plan_revision_id` bigint unsigned NOT NULL,
	`state` enum('planned','open','building','closed') NOT NULL,
	`places` int NOT NULL,
	`places_taken` int NOT NULL DEFAULT 0,
	`places_held` int NOT NULL DEFAULT 0,
	`price_minor` bigint NOT NULL,
	`deposit_minor` bigint,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`estimated_on` varchar(10) character set ascii collate ascii_bin,
	`created_at` datetime(3) NOT NULL,
	`closed_at` datetime(3),
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `batches_id` PRIMARY KEY(`id`),
	CONSTRAINT `batches_number_unique` UNIQUE(`number`),
	CONSTRAINT `batches_places_check` CHECK(`batches`.`places_taken` >= 0 and `batches`.`places_held` >= 0 and `batches`.`places_taken` + `batches`.`places_held` <= `batches`.`places`)
);
--> statement-breakpoint
CREATE TABLE `holds` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`subject_type` enum('unit','lot','batch','order') NOT NULL,
	`subject_id` bigint unsigned NOT NULL,
	`reason` varchar(300) NOT NULL,
	`owner_user_id` bigint unsigned NOT NULL,
	`placed_at` datetime(3) NOT NULL,
	`ended_at` datetime(3),
	`ended_by` bigint unsigned,
	`end_reason` varchar(300),
	CONSTRAINT `holds_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `picks` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`store_entry_id` bigint unsigned NOT NULL,
	`lot_id` bigint unsigned NOT NULL,
	`unit_id` bigint unsigned,
	`batch_id` bigint unsigned,
	`bom_line_id` bigint unsigned,
	`quantity` bigint NOT NULL,
	`designators` json NOT NULL,
	`alternate_reason` varchar(300),
	`undone_by_entry_id` bigint unsigned,
	`at` datetime(3) NOT NULL,
	`by_user_id` bigint unsigned,
	CONSTRAINT `picks_id` PRIMARY KEY(`id`),
	CONSTRAINT `picks_storeEntryId_unique` UNIQUE(`store_entry_id`),
	CONSTRAINT `picks_owner_check` CHECK((`picks`.`unit_id` is null) <> (`picks`.`batch_id` is null)),
	CONSTRAINT `picks_quantity_check` CHECK(`picks`.`quantity` > 0)
);
--> statement-breakpoint
CREATE TABLE `reworks` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`unit_id` bigint unsigned NOT NULL,
	`test_run_id` bigint unsigned,
	`cause` varchar(300) NOT NULL,
	`remedy` varchar(300),
	`minutes` int,
	`opened_at` datetime(3) NOT NULL,
	`opened_by` bigint unsigned,
	`closed_at` datetime(3),
	`closed_by` bigint unsigned,
	CONSTRAINT `reworks_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `step_records` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`unit_id` bigint unsigned NOT NULL,
	`build_step_id` bigint unsigned NOT NULL,
	`round` int NOT NULL DEFAULT 1,
	`entry` varchar(200),
	`entry_value` double,
	`minutes` int,
	`file_id` bigint unsigned,
	`done_at` datetime(3) NOT NULL,
	`by_user_id` bigint unsigned,
	CONSTRAINT `step_records_id` PRIMARY KEY(`id`),
	CONSTRAINT `step_records_unit_id_build_step_id_round_unique` UNIQUE(`unit_id`,`build_step_id`,`round`)
);
--> statement-breakpoint
CREATE TABLE `unit_allocations` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`unit_id` bigint unsigned NOT NULL,
	`order_line_id` bigint unsigned NOT NULL,
	`reason` varchar(300) NOT NULL,
	`from_at` datetime(3) NOT NULL,
	`until_at` datetime(3),
	CONSTRAINT `unit_allocations_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `units` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`serial` varchar(30) character set ascii collate ascii_bin NOT NULL,
	`model_id` bigint unsigned NOT NULL,
	`batch_id` bigint unsigned,
	`order_line_id` bigint unsigned,
	`line_index` int,
	`options` json NOT NULL,
	`stage` enum('kit','boards','align','final_test','pack','ship','gone') NOT NULL,
	`bom_revision_id` bigint unsigned,
	`build_sheet_revision_id` bigint unsigned,
	`test_plan_revision_id` bigint unsigned NOT NULL,
	`firmware_version` varchar(40),
	`alignment` json NOT NULL,
	`page_code` varchar(16) character set ascii collate ascii_bin NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `units_id` PRIMARY KEY(`id`),
	CONSTRAINT `units_serial_unique` UNIQUE(`serial`),
	CONSTRAINT `units_pageCode_unique` UNIQUE(`page_code`),
	CONSTRAINT `units_order_line_id_line_index_unique` UNIQUE(`order_line_id`,`line_index`),
	CONSTRAINT `units_line_index_check` CHECK((`units`.`order_line_id` is null) = (`units`.`line_index` is null))
);
--> statement-breakpoint
CREATE TABLE `bins` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`code` varchar(20) character set ascii collate ascii_bin NOT NULL,
	CONSTRAINT `bins_id` PRIMARY KEY(`id`),
	CONSTRAINT `bins_code_unique` UNIQUE(`code`)
);
--> statement-breakpoint
CREATE TABLE `lots` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`number` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`part_id` bigint unsigned NOT NULL,
	`supplier_id` bigint unsigned,
	`bom_revision_id` bigint unsigned,
	`bin_id` bigint unsigned,
	`date_code` varchar(30) NOT NULL DEFAULT '',
	`state` enum('waiting','usable','barred') NOT NULL,
	`barred_reason` varchar(300),
	`quantity_received` bigint NOT NULL,
	`on_hand` bigint NOT NULL,
	`cost_minor` bigint,
	`currency` varchar(3) character set ascii collate ascii_bin,
	`received_at` datetime(3) NOT NULL,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `lots_id` PRIMARY KEY(`id`),
	CONSTRAINT `lots_number_unique` UNIQUE(`number`),
	CONSTRAINT `lots_on_hand_check` CHECK(`lots`.`on_hand` >= 0)
);
--> statement-breakpoint
CREATE TABLE `part_alternates` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`part_id` bigint unsigned NOT NULL,
	`alternate_part_id` bigint unsigned NOT NULL,
	`model_id` bigint unsigned,
	`rank` int NOT NULL,
	CONSTRAINT `part_alternates_id` PRIMARY KEY(`id`),
	CONSTRAINT `part_alternates_part_alternate_model_unique` UNIQUE(`part_id`,`alternate_part_id`,`model_id`)
);
--> statement-breakpoint
CREATE TABLE `parts` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`number` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`description` varchar(200) NOT NULL,
	`value` varchar(60) NOT NULL DEFAULT '',
	`footprint` varchar(80) NOT NULL DEFAULT '',
	`unit` enum('piece','mm','mg') NOT NULL,
	`trace` enum('each','batch') NOT NULL,
	`is_made` boolean NOT NULL DEFAULT false,
	`hs_code` varchar(12) character set ascii collate ascii_bin,
	`origin_country` varchar(2) character set ascii collate ascii_bin,
	`created_at` datetime(3) NOT NULL,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `parts_id` PRIMARY KEY(`id`),
	CONSTRAINT `parts_number_unique` UNIQUE(`number`)
);
--> statement-breakpoint
CREATE TABLE `store_entries` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`lot_id` bigint unsigned NOT NULL,
	`kind` enum('receipt','pick','return','count','scrap','consign','reversal') NOT NULL,
	`quantity` bigint NOT NULL,
	`reason` varchar(300) NOT NULL DEFAULT '',
	`reverses_id` bigint unsigned,
	`at` datetime(3) NOT NULL,
	`by_user_id` bigint unsigned,
	CONSTRAINT `store_entries_id` PRIMARY KEY(`id`),
	CONSTRAINT `store_entries_reversesId_unique` UNIQUE(`reverses_id`),
	CONSTRAINT `store_entries_quantity_check` CHECK(`store_entries`.`quantity` <> 0)
);
--> statement-breakpoint
CREATE TABLE `suppliers` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`name` varchar(120) NOT NULL,
	`email` varchar(254),
	`lead_time_days` int,
	CONSTRAINT `suppliers_id` PRIMARY KEY(`id`),
	CONSTRAINT `suppliers_name_unique` UNIQUE(`name`)
);
--> statement-breakpoint
ALTER TABLE `instrument_revisions` ADD CONSTRAINT `instrument_revisions_instrument_id_instruments_id_fk` FOREIGN KEY (`instrument_id`) REFERENCES `instruments`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `instrument_revisions` ADD CONSTRAINT `instrument_revisions_calibration_file_id_files_id_fk` FOREIGN KEY (`calibration_file_id`) REFERENCES `files`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `path_revisions` ADD CONSTRAINT `path_revisions_path_id_paths_id_fk` FOREIGN KEY (`path_id`) REFERENCES `paths`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `readings` ADD CONSTRAINT `readings_test_run_id_test_runs_id_fk` FOREIGN KEY (`test_run_id`) REFERENCES `test_runs`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `readings` ADD CONSTRAINT `readings_test_point_id_test_points_id_fk` FOREIGN KEY (`test_point_id`) REFERENCES `test_points`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `readings` ADD CONSTRAINT `readings_sweep_id_sweeps_id_fk` FOREIGN KEY (`sweep_id`) REFERENCES `sweeps`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `readings` ADD CONSTRAINT `readings_instrument_revision_id_instrument_revisions_id_fk` FOREIGN KEY (`instrument_revision_id`) REFERENCES `instrument_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `readings` ADD CONSTRAINT `readings_path_revision_id_path_revisions_id_fk` FOREIGN KEY (`path_revision_id`) REFERENCES `path_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `readings` ADD CONSTRAINT `readings_by_user_id_users_id_fk` FOREIGN KEY (`by_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `run_points` ADD CONSTRAINT `run_points_test_run_id_test_runs_id_fk` FOREIGN KEY (`test_run_id`) REFERENCES `test_runs`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `run_points` ADD CONSTRAINT `run_points_test_point_id_test_points_id_fk` FOREIGN KEY (`test_point_id`) REFERENCES `test_points`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `sweeps` ADD CONSTRAINT `sweeps_test_run_id_test_runs_id_fk` FOREIGN KEY (`test_run_id`) REFERENCES `test_runs`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `sweeps` ADD CONSTRAINT `sweeps_file_id_files_id_fk` FOREIGN KEY (`file_id`) REFERENCES `files`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `sweeps` ADD CONSTRAINT `sweeps_by_user_id_users_id_fk` FOREIGN KEY (`by_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `test_runs` ADD CONSTRAINT `test_runs_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `test_runs` ADD CONSTRAINT `test_runs_test_plan_revision_id_test_plan_revisions_id_fk` FOREIGN KEY (`test_plan_revision_id`) REFERENCES `test_plan_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `test_runs` ADD CONSTRAINT `test_runs_tester_user_id_users_id_fk` FOREIGN KEY (`tester_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `bom_lines` ADD CONSTRAINT `bom_lines_bom_revision_id_bom_revisions_id_fk` FOREIGN KEY (`bom_revision_id`) REFERENCES `bom_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `bom_lines` ADD CONSTRAINT `bom_lines_part_id_parts_id_fk` FOREIGN KEY (`part_id`) REFERENCES `parts`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `bom_revisions` ADD CONSTRAINT `bom_revisions_model_id_models_id_fk` FOREIGN KEY (`model_id`) REFERENCES `models`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `bom_revisions` ADD CONSTRAINT `bom_revisions_part_id_parts_id_fk` FOREIGN KEY (`part_id`) REFERENCES `parts`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `bom_revisions` ADD CONSTRAINT `bom_revisions_replaces_id_bom_revisions_id_fk` FOREIGN KEY (`replaces_id`) REFERENCES `bom_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `bom_revisions` ADD CONSTRAINT `bom_revisions_released_by_users_id_fk` FOREIGN KEY (`released_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `build_sheet_revisions` ADD CONSTRAINT `build_sheet_revisions_model_id_models_id_fk` FOREIGN KEY (`model_id`) REFERENCES `models`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `build_sheet_revisions` ADD CONSTRAINT `build_sheet_revisions_released_by_users_id_fk` FOREIGN KEY (`released_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `build_steps` ADD CONSTRAINT `build_steps_build_sheet_revision_id_build_sheet_revisions_id_fk` FOREIGN KEY (`build_sheet_revision_id`) REFERENCES `build_sheet_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `option_groups` ADD CONSTRAINT `option_groups_model_id_models_id_fk` FOREIGN KEY (`model_id`) REFERENCES `models`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `options` ADD CONSTRAINT `options_option_group_id_option_groups_id_fk` FOREIGN KEY (`option_group_id`) REFERENCES `option_groups`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `spares` ADD CONSTRAINT `spares_part_id_parts_id_fk` FOREIGN KEY (`part_id`) REFERENCES `parts`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `test_plan_revisions` ADD CONSTRAINT `test_plan_revisions_model_id_models_id_fk` FOREIGN KEY (`model_id`) REFERENCES `models`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `test_plan_revisions` ADD CONSTRAINT `test_plan_revisions_released_by_users_id_fk` FOREIGN KEY (`released_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `test_points` ADD CONSTRAINT `test_points_test_plan_revision_id_test_plan_revisions_id_fk` FOREIGN KEY (`test_plan_revision_id`) REFERENCES `test_plan_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `certificate_buyers` ADD CONSTRAINT `certificate_buyers_certificate_id_certificates_id_fk` FOREIGN KEY (`certificate_id`) REFERENCES `certificates`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `certificates` ADD CONSTRAINT `certificates_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `certificates` ADD CONSTRAINT `certificates_test_run_id_test_runs_id_fk` FOREIGN KEY (`test_run_id`) REFERENCES `test_runs`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `certificates` ADD CONSTRAINT `certificates_contact_id_contacts_id_fk` FOREIGN KEY (`contact_id`) REFERENCES `contacts`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `certificates` ADD CONSTRAINT `certificates_signing_key_id_signing_keys_id_fk` FOREIGN KEY (`signing_key_id`) REFERENCES `signing_keys`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `certificates` ADD CONSTRAINT `certificates_replaces_id_certificates_id_fk` FOREIGN KEY (`replaces_id`) REFERENCES `certificates`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `certificates` ADD CONSTRAINT `certificates_file_id_files_id_fk` FOREIGN KEY (`file_id`) REFERENCES `files`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `certificates` ADD CONSTRAINT `certificates_issued_by_users_id_fk` FOREIGN KEY (`issued_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `ledger_entries` ADD CONSTRAINT `ledger_entries_actor_user_id_users_id_fk` FOREIGN KEY (`actor_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `ledger_subjects` ADD CONSTRAINT `ledger_subjects_ledger_entry_id_ledger_entries_id_fk` FOREIGN KEY (`ledger_entry_id`) REFERENCES `ledger_entries`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `shipment_units` ADD CONSTRAINT `shipment_units_shipment_id_shipments_id_fk` FOREIGN KEY (`shipment_id`) REFERENCES `shipments`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `shipment_units` ADD CONSTRAINT `shipment_units_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `shipment_units` ADD CONSTRAINT `shipment_units_certificate_id_certificates_id_fk` FOREIGN KEY (`certificate_id`) REFERENCES `certificates`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `shipments` ADD CONSTRAINT `shipments_order_id_orders_id_fk` FOREIGN KEY (`order_id`) REFERENCES `orders`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `shipments` ADD CONSTRAINT `shipments_packed_by_users_id_fk` FOREIGN KEY (`packed_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `shipments` ADD CONSTRAINT `shipments_shipped_by_users_id_fk` FOREIGN KEY (`shipped_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `file_chunks` ADD CONSTRAINT `file_chunks_file_id_files_id_fk` FOREIGN KEY (`file_id`) REFERENCES `files`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `files` ADD CONSTRAINT `files_created_by_users_id_fk` FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `signing_keys` ADD CONSTRAINT `signing_keys_created_by_users_id_fk` FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `checkouts` ADD CONSTRAINT `checkouts_order_id_orders_id_fk` FOREIGN KEY (`order_id`) REFERENCES `orders`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `contacts` ADD CONSTRAINT `contacts_user_id_users_id_fk` FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `order_lines` ADD CONSTRAINT `order_lines_order_id_orders_id_fk` FOREIGN KEY (`order_id`) REFERENCES `orders`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `order_lines` ADD CONSTRAINT `order_lines_model_id_models_id_fk` FOREIGN KEY (`model_id`) REFERENCES `models`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `order_lines` ADD CONSTRAINT `order_lines_spare_id_spares_id_fk` FOREIGN KEY (`spare_id`) REFERENCES `spares`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `order_lines` ADD CONSTRAINT `order_lines_batch_id_batches_id_fk` FOREIGN KEY (`batch_id`) REFERENCES `batches`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `orders` ADD CONSTRAINT `orders_buyer_user_id_users_id_fk` FOREIGN KEY (`buyer_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `orders` ADD CONSTRAINT `orders_contact_id_contacts_id_fk` FOREIGN KEY (`contact_id`) REFERENCES `contacts`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `payments` ADD CONSTRAINT `payments_order_id_orders_id_fk` FOREIGN KEY (`order_id`) REFERENCES `orders`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `payments` ADD CONSTRAINT `payments_checkout_id_checkouts_id_fk` FOREIGN KEY (`checkout_id`) REFERENCES `checkouts`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `payments` ADD CONSTRAINT `payments_by_user_id_users_id_fk` FOREIGN KEY (`by_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `place_holds` ADD CONSTRAINT `place_holds_batch_id_batches_id_fk` FOREIGN KEY (`batch_id`) REFERENCES `batches`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `place_holds` ADD CONSTRAINT `place_holds_order_line_id_order_lines_id_fk` FOREIGN KEY (`order_line_id`) REFERENCES `order_lines`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `refunds` ADD CONSTRAINT `refunds_payment_id_payments_id_fk` FOREIGN KEY (`payment_id`) REFERENCES `payments`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `refunds` ADD CONSTRAINT `refunds_by_user_id_users_id_fk` FOREIGN KEY (`by_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `sessions` ADD CONSTRAINT `sessions_user_id_users_id_fk` FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `sign_in_links` ADD CONSTRAINT `sign_in_links_user_id_users_id_fk` FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `user_profiles` ADD CONSTRAINT `user_profiles_user_id_users_id_fk` FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `user_roles` ADD CONSTRAINT `user_roles_user_id_users_id_fk` FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `batches` ADD CONSTRAINT `batches_model_id_models_id_fk` FOREIGN KEY (`model_id`) REFERENCES `models`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `batches` ADD CONSTRAINT `batches_bom_revision_id_bom_revisions_id_fk` FOREIGN KEY (`bom_revision_id`) REFERENCES `bom_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `batches` ADD CONSTRAINT `batches_build_sheet_revision_id_build_sheet_revisions_id_fk` FOREIGN KEY (`build_sheet_revision_id`) REFERENCES `build_sheet_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `batches` ADD CONSTRAINT `batches_test_plan_revision_id_test_plan_revisions_id_fk` FOREIGN KEY (`test_plan_revision_id`) REFERENCES `test_plan_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `holds` ADD CONSTRAINT `holds_owner_user_id_users_id_fk` FOREIGN KEY (`owner_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `holds` ADD CONSTRAINT `holds_ended_by_users_id_fk` FOREIGN KEY (`ended_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `picks` ADD CONSTRAINT `picks_store_entry_id_store_entries_id_fk` FOREIGN KEY (`store_entry_id`) REFERENCES `store_entries`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `picks` ADD CONSTRAINT `picks_lot_id_lots_id_fk` FOREIGN KEY (`lot_id`) REFERENCES `lots`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `picks` ADD CONSTRAINT `picks_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `picks` ADD CONSTRAINT `picks_batch_id_batches_id_fk` FOREIGN KEY (`batch_id`) REFERENCES `batches`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `picks` ADD CONSTRAINT `picks_bom_line_id_bom_lines_id_fk` FOREIGN KEY (`bom_line_id`) REFERENCES `bom_lines`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `picks` ADD CONSTRAINT `picks_undone_by_entry_id_store_entries_id_fk` FOREIGN KEY (`undone_by_entry_id`) REFERENCES `store_entries`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `picks` ADD CONSTRAINT `picks_by_user_id_users_id_fk` FOREIGN KEY (`by_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `reworks` ADD CONSTRAINT `reworks_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `reworks` ADD CONSTRAINT `reworks_test_run_id_test_runs_id_fk` FOREIGN KEY (`test_run_id`) REFERENCES `test_runs`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `reworks` ADD CONSTRAINT `reworks_opened_by_users_id_fk` FOREIGN KEY (`opened_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `reworks` ADD CONSTRAINT `reworks_closed_by_users_id_fk` FOREIGN KEY (`closed_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `step_records` ADD CONSTRAINT `step_records_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `step_records` ADD CONSTRAINT `step_records_build_step_id_build_steps_id_fk` FOREIGN KEY (`build_step_id`) REFERENCES `build_steps`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `step_records` ADD CONSTRAINT `step_records_file_id_files_id_fk` FOREIGN KEY (`file_id`) REFERENCES `files`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `step_records` ADD CONSTRAINT `step_records_by_user_id_users_id_fk` FOREIGN KEY (`by_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `unit_allocations` ADD CONSTRAINT `unit_allocations_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `unit_allocations` ADD CONSTRAINT `unit_allocations_order_line_id_order_lines_id_fk` FOREIGN KEY (`order_line_id`) REFERENCES `order_lines`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `units` ADD CONSTRAINT `units_model_id_models_id_fk` FOREIGN KEY (`model_id`) REFERENCES `models`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `units` ADD CONSTRAINT `units_batch_id_batches_id_fk` FOREIGN KEY (`batch_id`) REFERENCES `batches`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `units` ADD CONSTRAINT `units_order_line_id_order_lines_id_fk` FOREIGN KEY (`order_line_id`) REFERENCES `order_lines`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `units` ADD CONSTRAINT `units_bom_revision_id_bom_revisions_id_fk` FOREIGN KEY (`bom_revision_id`) REFERENCES `bom_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `units` ADD CONSTRAINT `units_build_sheet_revision_id_build_sheet_revisions_id_fk` FOREIGN KEY (`build_sheet_revision_id`) REFERENCES `build_sheet_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `units` ADD CONSTRAINT `units_test_plan_revision_id_test_plan_revisions_id_fk` FOREIGN KEY (`test_plan_revision_id`) REFERENCES `test_plan_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `lots` ADD CONSTRAINT `lots_part_id_parts_id_fk` FOREIGN KEY (`part_id`) REFERENCES `parts`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `lots` ADD CONSTRAINT `lots_supplier_id_suppliers_id_fk` FOREIGN KEY (`supplier_id`) REFERENCES `suppliers`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `lots` ADD CONSTRAINT `lots_bom_revision_id_bom_revisions_id_fk` FOREIGN KEY (`bom_revision_id`) REFERENCES `bom_revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `lots` ADD CONSTRAINT `lots_bin_id_bins_id_fk` FOREIGN KEY (`bin_id`) REFERENCES `bins`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `part_alternates` ADD CONSTRAINT `part_alternates_part_id_parts_id_fk` FOREIGN KEY (`part_id`) REFERENCES `parts`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `part_alternates` ADD CONSTRAINT `part_alternates_alternate_part_id_parts_id_fk` FOREIGN KEY (`alternate_part_id`) REFERENCES `parts`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `part_alternates` ADD CONSTRAINT `part_alternates_model_id_models_id_fk` FOREIGN KEY (`model_id`) REFERENCES `models`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `store_entries` ADD CONSTRAINT `store_entries_lot_id_lots_id_fk` FOREIGN KEY (`lot_id`) REFERENCES `lots`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `store_entries` ADD CONSTRAINT `store_entries_reverses_id_store_entries_id_fk` FOREIGN KEY (`reverses_id`) REFERENCES `store_entries`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `store_entries` ADD CONSTRAINT `store_entries_by_user_id_users_id_fk` FOREIGN KEY (`by_user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX `sweeps_test_run_id_idx` ON `sweeps` (`test_run_id`);--> statement-breakpoint
CREATE INDEX `test_runs_state_idx` ON `test_runs` (`state`,`opened_at`);--> statement-breakpoint
CREATE INDEX `bom_lines_part_id_idx` ON `bom_lines` (`part_id`);--> statement-breakpoint
CREATE INDEX `certificates_unit_id_idx` ON `certificates` (`unit_id`,`id`);--> statement-breakpoint
CREATE INDEX `certificates_test_run_id_idx` ON `certificates` (`test_run_id`);--> statement-breakpoint
CREATE INDEX `form_returns_created_at_idx` ON `form_returns` (`created_at`);--> statement-breakpoint
CREATE INDEX `idempotency_keys_created_at_idx` ON `idempotency_keys` (`created_at`);--> statement-breakpoint
CREATE INDEX `ledger_entries_at_idx` ON `ledger_entries` (`at`);--> statement-breakpoint
CREATE INDEX `ledger_subjects_subject_idx` ON `ledger_subjects` (`subject_type`,`subject_id`,`ledger_entry_id`);--> statement-breakpoint
CREATE INDEX `outbox_open_idx` ON `outbox` (`done_at`,`gave_up_at`,`available_at`);--> statement-breakpoint
CREATE INDEX `shipment_units_unit_id_idx` ON `shipment_units` (`unit_id`);--> statement-breakpoint
CREATE INDEX `shipments_order_id_idx` ON `shipments` (`order_id`);--> statement-breakpoint
CREATE INDEX `shipments_state_idx` ON `shipments` (`state`,`packed_at`);--> statement-breakpoint
CREATE INDEX `shipments_tracking_number_idx` ON `shipments` (`tracking_number`);--> statement-breakpoint
CREATE INDEX `checkouts_order_id_idx` ON `checkouts` (`order_id`);--> statement-breakpoint
CREATE INDEX `checkouts_state_idx` ON `checkouts` (`state`,`expires_at`);--> statement-breakpoint
CREATE INDEX `contacts_email_idx` ON `contacts` (`email`);--> statement-breakpoint
CREATE INDEX `order_lines_batch_id_idx` ON `order_lines` (`batch_id`);--> statement-breakpoint
CREATE INDEX `orders_buyer_user_id_idx` ON `orders` (`buyer_user_id`);--> statement-breakpoint
CREATE INDEX `orders_state_idx` ON `orders` (`state`,`placed_at`);--> statement-breakpoint
CREATE INDEX `payments_order_id_idx` ON `payments` (`order_id`);--> statement-breakpoint
CREATE INDEX `place_holds_state_held_until_idx` ON `place_holds` (`state`,`held_until`);--> statement-breakpoint
CREATE INDEX `provider_events_state_idx` ON `provider_events` (`state`,`received_at`);--> statement-breakpoint
CREATE INDEX `provider_events_object_id_idx` ON `provider_events` (`object_id`);--> statement-breakpoint
CREATE INDEX `sessions_user_id_idx` ON `sessions` (`user_id`);--> statement-breakpoint
CREATE INDEX `batches_model_id_state_idx` ON `batches` (`model_id`,`state`);--> statement-breakpoint
CREATE INDEX `holds_subject_idx` ON `holds` (`subject_type`,`subject_id`,`ended_at`);--> statement-breakpoint
CREATE INDEX `picks_unit_id_idx` ON `picks` (`unit_id`);--> statement-breakpoint
CREATE INDEX `picks_batch_id_idx` ON `picks` (`batch_id`);--> statement-breakpoint
CREATE INDEX `picks_lot_id_idx` ON `picks` (`lot_id`);--> statement-breakpoint
CREATE INDEX `reworks_unit_id_idx` ON `reworks` (`unit_id`);--> statement-breakpoint
CREATE INDEX `unit_allocations_unit_id_idx` ON `unit_allocations` (`unit_id`);--> statement-breakpoint
CREATE INDEX `unit_allocations_order_line_id_idx` ON `unit_allocations` (`order_line_id`);--> statement-breakpoint
CREATE INDEX `units_batch_id_stage_idx` ON `units` (`batch_id`,`stage`);--> statement-breakpoint
CREATE INDEX `units_stage_idx` ON `units` (`stage`);--> statement-breakpoint
CREATE INDEX `lots_part_id_state_idx` ON `lots` (`part_id`,`state`,`received_at`);--> statement-breakpoint
CREATE INDEX `store_entries_lot_id_idx` ON `store_entries` (`lot_id`,`id`);