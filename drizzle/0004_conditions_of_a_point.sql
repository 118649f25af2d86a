ALTER TABLE `test_points` ADD `supply_v` double;--> statement-breakpoint
ALTER TABLE `test_points` ADD `method` varchar(200) DEFAULT '' NOT NULL;