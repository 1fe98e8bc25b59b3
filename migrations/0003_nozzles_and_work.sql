CREATE TABLE `bore_checks` (
	`company_id` text NOT NULL,
	`id` text NOT NULL,
	`creation_hash` text NOT NULL,
	`at` text NOT NULL,
	`by_id` text NOT NULL,
	`by` text NOT NULL,
	`received_at` text NOT NULL,
	`supersedes_id` text,
	`nozzle_id` text NOT NULL,
	`rig_id` text,
	`method` text NOT NULL,
	`bit_set` text,
	`passed_mm` real,
	`refused_mm` real,
	`bore_mm` real,
	`accuracy_mm` real,
	`looks_oval` integer NOT NULL,
	`is_cracked` integer NOT NULL,
	`photo_id` text,
	PRIMARY KEY(`company_id`, `id`),
	FOREIGN KEY (`by_id`) REFERENCES `accounts`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`nozzle_id`) REFERENCES `nozzles`(`company_id`,`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`rig_id`) REFERENCES `rigs`(`company_id`,`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `bore_checks_nozzle` ON `bore_checks` (`company_id`,`nozzle_id`);--> statement-breakpoint
CREATE TABLE `gauge_readings` (
	`company_id` text NOT NULL,
	`id` text NOT NULL,
	`creation_hash` text NOT NULL,
	`at` text NOT NULL,
	`by_id` text NOT NULL,
	`by` text NOT NULL,
	`received_at` text NOT NULL,
	`supersedes_id` text,
	`rig_id` text NOT NULL,
	`outlet_index` integer NOT NULL,
	`compressor_id` text NOT NULL,
	`site_id` text NOT NULL,
	`nozzle_id` text,
	`compressor_pressure_kpa` real NOT NULL,
	`nozzle_pressure_kpa` real NOT NULL,
	`bore_mm` real NOT NULL,
	`compressor_accuracy_kpa` real,
	`nozzle_accuracy_kpa` real,
	`set_aside_by` text,
	`set_aside_at` text,
	PRIMARY KEY(`company_id`, `id`),
	FOREIGN KEY (`by_id`) REFERENCES `accounts`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`rig_id`) REFERENCES `rigs`(`company_id`,`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`compressor_id`) REFERENCES `compressors`(`company_id`,`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`site_id`) REFERENCES `sites`(`company_id`,`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `media` (
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
	`abrasive` text NOT NULL,
	`bulk_density_kg_m3` real,
	`mohs_hardness` real,
	`has_free_silica` integer NOT NULL,
	PRIMARY KEY(`company_id`, `id`),
	FOREIGN KEY (`company_id`) REFERENCES `companies`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `media_name` ON `media` (`company_id`,`name`,`id`);--> statement-breakpoint
CREATE TABLE `nozzle_events` (
	`company_id` text NOT NULL,
	`id` text NOT NULL,
	`creation_hash` text NOT NULL,
	`at` text NOT NULL,
	`by_id` text NOT NULL,
	`by` text NOT NULL,
	`received_at` text NOT NULL,
	`supersedes_id` text,
	`nozzle_id` text NOT NULL,
	`kind` text NOT NULL,
	`rig_id` text,
	`outlet_index` integer,
	`breakage` text,
	`note` text,
	PRIMARY KEY(`company_id`, `id`),
	FOREIGN KEY (`by_id`) REFERENCES `accounts`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`nozzle_id`) REFERENCES `nozzles`(`company_id`,`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`rig_id`) REFERENCES `rigs`(`company_id`,`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `nozzle_events_nozzle` ON `nozzle_events` (`company_id`,`nozzle_id`);--> statement-breakpoint
CREATE TABLE `nozzles` (
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
	`tag` text,
	`number_sixteenths` integer,
	`new_bore_mm` real,
	`shape` text NOT NULL,
	`liner` text,
	`discharge_coefficient` real,
	`thread` text,
	`entry_mm` real,
	`hours_before` real,
	`box_rig_id` text,
	`photo_id` text,
	`price_minor` integer,
	PRIMARY KEY(`company_id`, `id`),
	FOREIGN KEY (`company_id`) REFERENCES `companies`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`box_rig_id`) REFERENCES `rigs`(`company_id`,`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `nozzles_name` ON `nozzles` (`company_id`,`name`,`id`);--> statement-breakpoint
CREATE TABLE `photos` (
	`company_id` text NOT NULL,
	`id` text NOT NULL,
	`file_name` text NOT NULL,
	`content_hash` text NOT NULL,
	`bytes` integer NOT NULL,
	`width_px` integer NOT NULL,
	`height_px` integer NOT NULL,
	`by_id` text NOT NULL,
	`by` text NOT NULL,
	`received_at` text NOT NULL,
	PRIMARY KEY(`company_id`, `id`),
	FOREIGN KEY (`company_id`) REFERENCES `companies`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`by_id`) REFERENCES `accounts`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `shifts` (
	`company_id` text NOT NULL,
	`id` text NOT NULL,
	`creation_hash` text NOT NULL,
	`at` text NOT NULL,
	`by_id` text NOT NULL,
	`by` text NOT NULL,
	`received_at` text NOT NULL,
	`supersedes_id` text,
	`rig_id` text NOT NULL,
	`local_date` text NOT NULL,
	`blast_hours` real NOT NULL,
	`medium_id` text,
	`is_wet` integer NOT NULL,
	`nozzle_pressure_kpa` real,
	`area_m2` real,
	`note` text,
	PRIMARY KEY(`company_id`, `id`),
	FOREIGN KEY (`by_id`) REFERENCES `accounts`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`rig_id`) REFERENCES `rigs`(`company_id`,`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`company_id`,`medium_id`) REFERENCES `media`(`company_id`,`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `shifts_newest` ON `shifts` (`company_id`,`local_date`,`received_at`,`id`);
--> statement-breakpoint
-- What was known of the nozzle of each outlet becomes a nozzle, mounted there. The outlet keeps it as its usual one.
CREATE TEMP TABLE `outlet_nozzles` AS
SELECT
	`rigs`.`company_id`,
	`rigs`.`id` AS `rig_id`,
	`rigs`.`name` AS `rig_name`,
	`rigs`.`updated_at`,
	`rigs`.`updated_by`,
	`outlet`.`key` AS `outlet_index`,
	json_extract(`outlet`.`value`, '$.nozzle') AS `nozzle`,
	lower(hex(randomblob(4))) || '-' || lower(hex(randomblob(2))) || '-4' || substr(lower(hex(randomblob(2))), 2) || '-' || substr('89ab', 1 + (abs(random()) % 4), 1) || substr(lower(hex(randomblob(2))), 2) || '-' || lower(hex(randomblob(6))) AS `nozzle_id`,
	-- its updater by the audit, by name, or else the company's first owner, or whoever was there first
	coalesce(
		(SELECT `actor_id` FROM `audit_entries` WHERE `audit_entries`.`company_id` = `rigs`.`company_id` AND `subject_id` = `rigs`.`id` AND `action` LIKE 'rig.%' AND `action` <> 'rig.today-picked' AND `actor_name` = `rigs`.`updated_by` AND EXISTS (SELECT 1 FROM `accounts` WHERE `accounts`.`id` = `actor_id`) ORDER BY `audit_entries`.`id` DESC LIMIT 1),
		(SELECT `account_id` FROM `memberships` JOIN `accounts` ON `accounts`.`id` = `account_id` WHERE `memberships`.`company_id` = `rigs`.`company_id` AND `accounts`.`name` = `rigs`.`updated_by` ORDER BY `joined_at` LIMIT 1),
		(SELECT `account_id` FROM `memberships` WHERE `memberships`.`company_id` = `rigs`.`company_id` AND EXISTS (SELECT 1 FROM json_each(`roles`) WHERE `json_each`.`value` = 'owner') ORDER BY `joined_at` LIMIT 1),
		(SELECT `account_id` FROM `memberships` WHERE `memberships`.`company_id` = `rigs`.`company_id` ORDER BY `joined_at` LIMIT 1)
	) AS `by_id`,
	-- A tag has at most 30 characters. A name that fits keeps its own; a long one is cut and numbered, so that no two are alike.
	CASE
		WHEN length(CAST(`rigs`.`name` AS BLOB)) <= 28 AND instr(`rigs`.`name`, '~') = 0 THEN `rigs`.`name`
		ELSE substr(`rigs`.`name`, 1, iif(length(CAST(`rigs`.`name` AS BLOB)) = length(`rigs`.`name`), 22, 11)) || '~' || dense_rank() OVER (
			PARTITION BY `rigs`.`company_id`, length(CAST(`rigs`.`name` AS BLOB)) <= 28 AND instr(`rigs`.`name`, '~') = 0
			ORDER BY `rigs`.`name`, `rigs`.`id`
		)
	END || ' ' || (`outlet`.`key` + 1) AS `tag`
FROM `rigs`, json_each(`rigs`.`outlets`) AS `outlet`
WHERE `rigs`.`deleted_at` IS NULL;--> statement-breakpoint
INSERT INTO `nozzles` (`company_id`, `id`, `version`, `creation_hash`, `created_at`, `updated_at`, `updated_by`, `name`, `tag`, `number_sixteenths`, `new_bore_mm`, `shape`, `discharge_coefficient`, `box_rig_id`)
SELECT `company_id`, `nozzle_id`, 1, '', `updated_at`, `updated_at`, `updated_by`, `tag`, `tag`, json_extract(`nozzle`, '$.numberSixteenths'), json_extract(`nozzle`, '$.newBoreMm'), json_extract(`nozzle`, '$.shape'), json_extract(`nozzle`, '$.dischargeCoefficient'), `rig_id`
FROM `outlet_nozzles`;--> statement-breakpoint
INSERT INTO `nozzle_events` (`company_id`, `id`, `creation_hash`, `at`, `by_id`, `by`, `received_at`, `nozzle_id`, `kind`, `rig_id`, `outlet_index`)
SELECT `company_id`, lower(hex(randomblob(4))) || '-' || lower(hex(randomblob(2))) || '-4' || substr(lower(hex(randomblob(2))), 2) || '-' || substr('89ab', 1 + (abs(random()) % 4), 1) || substr(lower(hex(randomblob(2))), 2) || '-' || lower(hex(randomblob(6))), '', `updated_at`, `by_id`, `updated_by`, `updated_at`, `nozzle_id`, 'mounted', `rig_id`, `outlet_index`
FROM `outlet_nozzles` WHERE `by_id` IS NOT NULL;--> statement-breakpoint
-- How it was measured nobody wrote down: a caliper, good to 0.4 mm (from memory).
INSERT INTO `bore_checks` (`company_id`, `id`, `creation_hash`, `at`, `by_id`, `by`, `received_at`, `nozzle_id`, `rig_id`, `method`, `bore_mm`, `accuracy_mm`, `looks_oval`, `is_cracked`)
SELECT `company_id`, lower(hex(randomblob(4))) || '-' || lower(hex(randomblob(2))) || '-4' || substr(lower(hex(randomblob(2))), 2) || '-' || substr('89ab', 1 + (abs(random()) % 4), 1) || substr(lower(hex(randomblob(2))), 2) || '-' || lower(hex(randomblob(6))), '', `updated_at`, `by_id`, `updated_by`, `updated_at`, `nozzle_id`, `rig_id`, 'caliper', json_extract(`nozzle`, '$.boreNowMm'), 0.4, 0, 0
FROM `outlet_nozzles` WHERE `by_id` IS NOT NULL AND json_extract(`nozzle`, '$.boreNowMm') IS NOT NULL;--> statement-breakpoint
DROP TABLE `outlet_nozzles`;
