CREATE TRIGGER `store_entries_no_update` BEFORE UPDATE ON `store_entries` FOR EACH ROW
  SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a store entry is never changed';
--> statement-breakpoint
CREATE TRIGGER `store_entries_no_delete` BEFORE DELETE ON `store_entries` FOR EACH ROW
  SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a store entry is never deleted';
--> statement-breakpoint
CREATE TRIGGER `ledger_entries_no_update` BEFORE UPDATE ON `ledger_entries` FOR EACH ROW
  SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'an entry of the ledger of changes is never changed';
--> statement-breakpoint
CREATE TRIGGER `ledger_entries_no_delete` BEFORE DELETE ON `ledger_entries` FOR EACH ROW
  SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'an entry of the ledger of changes is never deleted';
--> statement-breakpoint
CREATE TRIGGER `test_runs_closed_is_closed` BEFORE UPDATE ON `test_runs` FOR EACH ROW
  IF OLD.`state` = 'closed' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a closed run does not change';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `test_runs_no_delete` BEFORE DELETE ON `test_runs` FOR EACH ROW
  SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a run is never deleted';
--> statement-breakpoint
CREATE TRIGGER `readings_into_open_run` BEFORE INSERT ON `readings` FOR EACH ROW
  IF (SELECT `state` FROM `test_runs` WHERE `id` = NEW.`test_run_id`) = 'closed' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a closed run takes no reading';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `readings_in_open_run` BEFORE UPDATE ON `readings` FOR EACH ROW
  IF (SELECT `state` FROM `test_runs` WHERE `id` = OLD.`test_run_id`) = 'closed' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a reading of a closed run does not change';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `readings_no_delete` BEFORE DELETE ON `readings` FOR EACH ROW
  SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a reading is never deleted';
--> statement-breakpoint
CREATE TRIGGER `run_points_no_update` BEFORE UPDATE ON `run_points` FOR EACH ROW
  SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'the verdict of a closed run does not change';
--> statement-breakpoint
CREATE TRIGGER `run_points_no_delete` BEFORE DELETE ON `run_points` FOR EACH ROW
  SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'the verdict of a closed run is never deleted';
--> statement-breakpoint
CREATE TRIGGER `certificates_only_gain_their_pdf` BEFORE UPDATE ON `certificates` FOR EACH ROW
  IF OLD.`file_id` IS NOT NULL
    OR NOT (OLD.`number` <=> NEW.`number` AND OLD.`letter` <=> NEW.`letter` AND OLD.`unit_id` <=> NEW.`unit_id`
      AND OLD.`test_run_id` <=> NEW.`test_run_id` AND OLD.`contact_id` <=> NEW.`contact_id`
      AND OLD.`destination_country` <=> NEW.`destination_country` AND OLD.`code` <=> NEW.`code`
      AND OLD.`statement` <=> NEW.`statement` AND OLD.`signature` <=> NEW.`signature`
      AND OLD.`signing_key_id` <=> NEW.`signing_key_id` AND OLD.`replaces_id` <=> NEW.`replaces_id`
      AND OLD.`reason` <=> NEW.`reason` AND OLD.`issued_at` <=> NEW.`issued_at` AND OLD.`issued_by` <=> NEW.`issued_by`) THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'an issued certificate does not change';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `certificates_no_delete` BEFORE DELETE ON `certificates` FOR EACH ROW
  SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'an issued certificate is never deleted';
--> statement-breakpoint
CREATE TRIGGER `bom_lines_into_draft` BEFORE INSERT ON `bom_lines` FOR EACH ROW
  IF (SELECT `state` FROM `bom_revisions` WHERE `id` = NEW.`bom_revision_id`) <> 'draft' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a released BOM revision does not change';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `bom_lines_of_draft` BEFORE UPDATE ON `bom_lines` FOR EACH ROW
  IF (SELECT `state` FROM `bom_revisions` WHERE `id` = OLD.`bom_revision_id`) <> 'draft' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a released BOM revision does not change';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `bom_lines_off_draft` BEFORE DELETE ON `bom_lines` FOR EACH ROW
  IF (SELECT `state` FROM `bom_revisions` WHERE `id` = OLD.`bom_revision_id`) <> 'draft' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a released BOM revision does not change';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `build_steps_into_draft` BEFORE INSERT ON `build_steps` FOR EACH ROW
  IF (SELECT `state` FROM `build_sheet_revisions` WHERE `id` = NEW.`build_sheet_revision_id`) <> 'draft' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a released build sheet revision does not change';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `build_steps_of_draft` BEFORE UPDATE ON `build_steps` FOR EACH ROW
  IF (SELECT `state` FROM `build_sheet_revisions` WHERE `id` = OLD.`build_sheet_revision_id`) <> 'draft' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a released build sheet revision does not change';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `build_steps_off_draft` BEFORE DELETE ON `build_steps` FOR EACH ROW
  IF (SELECT `state` FROM `build_sheet_revisions` WHERE `id` = OLD.`build_sheet_revision_id`) <> 'draft' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a released build sheet revision does not change';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `test_points_into_draft` BEFORE INSERT ON `test_points` FOR EACH ROW
  IF (SELECT `state` FROM `test_plan_revisions` WHERE `id` = NEW.`test_plan_revision_id`) <> 'draft' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a released test plan revision does not change';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `test_points_of_draft` BEFORE UPDATE ON `test_points` FOR EACH ROW
  IF (SELECT `state` FROM `test_plan_revisions` WHERE `id` = OLD.`test_plan_revision_id`) <> 'draft' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a released test plan revision does not change';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `test_points_off_draft` BEFORE DELETE ON `test_points` FOR EACH ROW
  IF (SELECT `state` FROM `test_plan_revisions` WHERE `id` = OLD.`test_plan_revision_id`) <> 'draft' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a released test plan revision does not change';
  END IF;
