ALTER TABLE `reworks` ADD `found_cause` varchar(120);--> statement-breakpoint
ALTER TABLE `reworks` ADD `confirmed_by_run_id` bigint unsigned;--> statement-breakpoint
ALTER TABLE `reworks` ADD CONSTRAINT `reworks_confirmed_by_run_id_test_runs_id_fk` FOREIGN KEY (`confirmed_by_run_id`) REFERENCES `test_runs`(`id`) ON DELETE no action ON UPDATE no action;