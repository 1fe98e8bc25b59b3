CREATE TABLE `accounts` (
	`id` text PRIMARY KEY NOT NULL,
	`email` text NOT NULL,
	`name` text NOT NULL,
	`password_hash` text NOT NULL,
	`language` text NOT NULL,
	`created_at` text NOT NULL
);
--> statement-breakpoint
CREATE UNIQUE INDEX `accounts_email_unique` ON `accounts` (`email`);--> statement-breakpoint
CREATE TABLE `companies` (
	`id` text PRIMARY KEY NOT NULL,
	`name` text NOT NULL,
	`currency` text NOT NULL,
	`language` text NOT NULL,
	`time_zone` text NOT NULL,
	`version` integer NOT NULL,
	`creation_hash` text NOT NULL,
	`created_at` text NOT NULL
);
--> statement-breakpoint
CREATE TABLE `invitations` (
	`company_id` text NOT NULL,
	`id` text NOT NULL,
	`email` text NOT NULL,
	`roles` text NOT NULL,
	`language` text NOT NULL,
	`token_hash` text NOT NULL,
	`invited_by` text NOT NULL,
	`creation_hash` text NOT NULL,
	`created_at` text NOT NULL,
	`expires_at` text NOT NULL,
	`accepted_at` text,
	`withdrawn_at` text,
	`version` integer NOT NULL,
	PRIMARY KEY(`company_id`, `id`),
	FOREIGN KEY (`company_id`) REFERENCES `companies`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `invitations_token_hash_unique` ON `invitations` (`token_hash`);--> statement-breakpoint
CREATE TABLE `memberships` (
	`id` text PRIMARY KEY NOT NULL,
	`company_id` text NOT NULL,
	`account_id` text NOT NULL,
	`roles` text NOT NULL,
	`state` text NOT NULL,
	`last_seen_at` text,
	`joined_at` text NOT NULL,
	`version` integer NOT NULL,
	FOREIGN KEY (`company_id`) REFERENCES `companies`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`account_id`) REFERENCES `accounts`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `memberships_company_account` ON `memberships` (`company_id`,`account_id`);--> statement-breakpoint
CREATE INDEX `memberships_account` ON `memberships` (`account_id`);--> statement-breakpoint
CREATE TABLE `password_resets` (
	`token_hash` text PRIMARY KEY NOT NULL,
	`account_id` text NOT NULL,
	`created_at` text NOT NULL,
	`expires_at` text NOT NULL,
	`used_at` text,
	FOREIGN KEY (`account_id`) REFERENCES `accounts`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `password_resets_account` ON `password_resets` (`account_id`);--> statement-breakpoint
CREATE TABLE `sessions` (
	`id_hash` text PRIMARY KEY NOT NULL,
	`account_id` text,
	`company_id` text,
	`data` text NOT NULL,
	`created_at` text NOT NULL,
	`last_used_at` text NOT NULL,
	`expires_at` text NOT NULL,
	FOREIGN KEY (`account_id`) REFERENCES `accounts`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`) REFERENCES `companies`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `sessions_account` ON `sessions` (`account_id`);--> statement-breakpoint
CREATE INDEX `sessions_expiry` ON `sessions` (`expires_at`);--> statement-breakpoint
CREATE TABLE `sign_ups` (
	`token_hash` text PRIMARY KEY NOT NULL,
	`email` text NOT NULL,
	`name` text NOT NULL,
	`password_hash` text NOT NULL,
	`company` text NOT NULL,
	`created_at` text NOT NULL,
	`expires_at` text NOT NULL
);
--> statement-breakpoint
CREATE TABLE `audit_entries` (
	`id` integer PRIMARY KEY AUTOINCREMENT NOT NULL,
	`company_id` text NOT NULL,
	`at` text NOT NULL,
	`actor_id` text,
	`actor_name` text NOT NULL,
	`action` text NOT NULL,
	`subject` text NOT NULL,
	`subject_id` text,
	`changes` text NOT NULL,
	FOREIGN KEY (`company_id`) REFERENCES `companies`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `audit_company` ON `audit_entries` (`company_id`,`id`);--> statement-breakpoint
CREATE TABLE `emails` (
	`id` text PRIMARY KEY NOT NULL,
	`to_address` text NOT NULL,
	`subject` text NOT NULL,
	`text` text NOT NULL,
	`html` text NOT NULL,
	`state` text NOT NULL,
	`attempts` integer NOT NULL,
	`next_attempt_at` text NOT NULL,
	`last_error` text,
	`created_at` text NOT NULL,
	`sent_at` text
);
--> statement-breakpoint
CREATE INDEX `emails_waiting` ON `emails` (`state`,`next_attempt_at`);--> statement-breakpoint
CREATE TABLE `compressors` (
	`company_id` text NOT NULL,
	`id` text NOT NULL,
	`version` integer NOT NULL,
	`creation_hash` text NOT NULL,
	`created_at` text NOT NULL,
	`updated_at` text NOT NULL,
	`updated_by` text NOT NULL,
	`archived_at` text,
	`deleted_at` text,
	`name` text NOT NULL,
	`rated_free_air_m3_min` real NOT NULL,
	`curve` text NOT NULL,
	`set_pressure_kpa` real NOT NULL,
	`unload_pressure_kpa` real,
	`cooling` text NOT NULL,
	`engine` text,
	`condition_factor` real,
	`full_load_fuel_l_per_h` real,
	`ownership` text NOT NULL,
	`rented_from` text,
	`rented_until` text,
	PRIMARY KEY(`company_id`, `id`),
	FOREIGN KEY (`company_id`) REFERENCES `companies`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `compressors_name` ON `compressors` (`company_id`,`name`,`id`);--> statement-breakpoint
CREATE TABLE `rig_days` (
	`company_id` text NOT NULL,
	`rig_id` text NOT NULL,
	`local_date` text NOT NULL,
	`compressor_id` text,
	`site_id` text,
	`picked_by_id` text NOT NULL,
	`picked_by` text NOT NULL,
	`picked_at` text NOT NULL,
	PRIMARY KEY(`company_id`, `rig_id`, `local_date`),
	FOREIGN KEY (`picked_by_id`) REFERENCES `accounts`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`rig_id`) REFERENCES `rigs`(`company_id`,`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`compressor_id`) REFERENCES `compressors`(`company_id`,`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`site_id`) REFERENCES `sites`(`company_id`,`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `rigs` (
	`company_id` text NOT NULL,
	`id` text NOT NULL,
	`version` integer NOT NULL,
	`creation_hash` text NOT NULL,
	`created_at` text NOT NULL,
	`updated_at` text NOT NULL,
	`updated_by` text NOT NULL,
	`archived_at` text,
	`deleted_at` text,
	`name` text NOT NULL,
	`air_line` text,
	`pot` text,
	`outlets` text NOT NULL,
	`hood_count` integer NOT NULL,
	`hood_free_air_m3_min` real NOT NULL,
	`tools_free_air_m3_min` real,
	`target_nozzle_pressure_kpa` real NOT NULL,
	`bit_set` text NOT NULL,
	`compressor_id` text,
	`site_id` text,
	`hour` text NOT NULL,
	PRIMARY KEY(`company_id`, `id`),
	FOREIGN KEY (`company_id`) REFERENCES `companies`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`compressor_id`) REFERENCES `compressors`(`company_id`,`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`site_id`) REFERENCES `sites`(`company_id`,`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `rigs_name` ON `rigs` (`company_id`,`name`,`id`);--> statement-breakpoint
CREATE TABLE `sites` (
	`company_id` text NOT NULL,
	`id` text NOT NULL,
	`version` integer NOT NULL,
	`creation_hash` text NOT NULL,
	`created_at` text NOT NULL,
	`updated_at` text NOT NULL,
	`updated_by` text NOT NULL,
	`archived_at` text,
	`deleted_at` text,
	`name` text NOT NULL,
	`altitude_m` real NOT NULL,
	`air_temperature_c` real NOT NULL,
	`relative_humidity_pct` real,
	`time_zone` text NOT NULL,
	PRIMARY KEY(`company_id`, `id`),
	FOREIGN KEY (`company_id`) REFERENCES `companies`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `sites_name` ON `sites` (`company_id`,`name`,`id`);--> statement-breakpoint
CREATE TRIGGER `audit_entries_stay` BEFORE UPDATE ON `audit_entries` BEGIN SELECT RAISE(ABORT, 'audit entries are never changed'); END;
--> statement-breakpoint
CREATE TRIGGER `audit_entries_remain` BEFORE DELETE ON `audit_entries` BEGIN SELECT RAISE(ABORT, 'audit entries are never deleted'); END;
