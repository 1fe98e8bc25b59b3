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
CREATE INDEX `shifts_rig` ON `shifts` (`company_id`,`rig_id`,`local_date`);