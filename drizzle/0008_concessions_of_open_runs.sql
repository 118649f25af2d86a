CREATE TRIGGER `run_concessions_into_open_run` BEFORE INSERT ON `run_concessions` FOR EACH ROW
  IF (SELECT `state` FROM `test_runs` WHERE `id` = NEW.`test_run_id`) = 'closed' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a closed run takes no concession';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `run_concessions_in_open_run` BEFORE UPDATE ON `run_concessions` FOR EACH ROW
  IF (SELECT `state` FROM `test_runs` WHERE `id` = OLD.`test_run_id`) = 'closed' THEN
    SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a concession of a closed run does not change';
  END IF;
--> statement-breakpoint
CREATE TRIGGER `run_concessions_no_delete` BEFORE DELETE ON `run_concessions` FOR EACH ROW
  SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a concession is never deleted';
