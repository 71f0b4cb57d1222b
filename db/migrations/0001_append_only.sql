-- What was said stays said: these tables take new rows and nothing else.
CREATE TRIGGER `contents_no_update` BEFORE UPDATE ON `contents` BEGIN SELECT RAISE(ABORT, 'A stored content never changes.'); END;
--> statement-breakpoint
CREATE TRIGGER `contents_no_delete` BEFORE DELETE ON `contents` BEGIN SELECT RAISE(ABORT, 'A stored content never goes.'); END;
--> statement-breakpoint
CREATE TRIGGER `revisions_no_update` BEFORE UPDATE ON `revisions` BEGIN SELECT RAISE(ABORT, 'A revision never changes.'); END;
--> statement-breakpoint
CREATE TRIGGER `revisions_no_delete` BEFORE DELETE ON `revisions` BEGIN SELECT RAISE(ABORT, 'A revision never goes.'); END;
--> statement-breakpoint
CREATE TRIGGER `revision_states_no_update` BEFORE UPDATE ON `revision_states` BEGIN SELECT RAISE(ABORT, 'A transition never changes.'); END;
--> statement-breakpoint
CREATE TRIGGER `revision_states_no_delete` BEFORE DELETE ON `revision_states` BEGIN SELECT RAISE(ABORT, 'A transition never goes.'); END;
--> statement-breakpoint
CREATE TRIGGER `editions_no_update` BEFORE UPDATE ON `editions` BEGIN SELECT RAISE(ABORT, 'An edition never changes.'); END;
--> statement-breakpoint
CREATE TRIGGER `editions_no_delete` BEFORE DELETE ON `editions` BEGIN SELECT RAISE(ABORT, 'An edition never goes.'); END;
--> statement-breakpoint
CREATE TRIGGER `withdrawals_no_update` BEFORE UPDATE ON `withdrawals` BEGIN SELECT RAISE(ABORT, 'A withdrawal never changes.'); END;
--> statement-breakpoint
CREATE TRIGGER `withdrawals_no_delete` BEFORE DELETE ON `withdrawals` BEGIN SELECT RAISE(ABORT, 'A withdrawal never goes.'); END;
--> statement-breakpoint
CREATE TRIGGER `bench_profile_versions_no_update` BEFORE UPDATE ON `bench_profile_versions` BEGIN SELECT RAISE(ABORT, 'A version of a bench profile never changes.'); END;
--> statement-breakpoint
CREATE TRIGGER `bench_profile_versions_no_delete` BEFORE DELETE ON `bench_profile_versions` BEGIN SELECT RAISE(ABORT, 'A version of a bench profile never goes.'); END;
--> statement-breakpoint
CREATE TRIGGER `device_cards_no_update` BEFORE UPDATE ON `device_cards` BEGIN SELECT RAISE(ABORT, 'A device card never changes.'); END;
--> statement-breakpoint
CREATE TRIGGER `device_cards_no_delete` BEFORE DELETE ON `device_cards` BEGIN SELECT RAISE(ABORT, 'A device card never goes.'); END;
--> statement-breakpoint
CREATE TRIGGER `audit_no_update` BEFORE UPDATE ON `audit` BEGIN SELECT RAISE(ABORT, 'An audit row never changes.'); END;
--> statement-breakpoint
CREATE TRIGGER `audit_no_delete` BEFORE DELETE ON `audit` BEGIN SELECT RAISE(ABORT, 'An audit row never goes.'); END;
