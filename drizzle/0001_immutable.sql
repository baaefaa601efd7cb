-- A run, an edition, a log entry and a stored version never change: the database itself forbids it.
CREATE TRIGGER `run_no_update` BEFORE UPDATE ON `run` BEGIN SELECT RAISE(ABORT, 'a run is immutable'); END;
--> statement-breakpoint
CREATE TRIGGER `run_no_delete` BEFORE DELETE ON `run` BEGIN SELECT RAISE(ABORT, 'a run is immutable'); END;
--> statement-breakpoint
CREATE TRIGGER `edition_no_update` BEFORE UPDATE ON `edition` BEGIN SELECT RAISE(ABORT, 'an edition is immutable'); END;
--> statement-breakpoint
CREATE TRIGGER `edition_no_delete` BEFORE DELETE ON `edition` BEGIN SELECT RAISE(ABORT, 'an edition is immutable'); END;
--> statement-breakpoint
CREATE TRIGGER `log_no_update` BEFORE UPDATE ON `log` BEGIN SELECT RAISE(ABORT, 'the change log is immutable'); END;
--> statement-breakpoint
CREATE TRIGGER `log_no_delete` BEFORE DELETE ON `log` BEGIN SELECT RAISE(ABORT, 'the change log is immutable'); END;
--> statement-breakpoint
CREATE TRIGGER `series_data_no_update` BEFORE UPDATE ON `series_data` BEGIN SELECT RAISE(ABORT, 'stored series data are immutable'); END;
--> statement-breakpoint
CREATE TRIGGER `outline_version_no_update` BEFORE UPDATE ON `outline_version` BEGIN SELECT RAISE(ABORT, 'a stored outline is immutable'); END;
