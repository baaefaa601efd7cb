CREATE TABLE `agency` (
	`id` text PRIMARY KEY NOT NULL,
	`workspaceId` text NOT NULL,
	`name` text NOT NULL,
	`createdAt` text NOT NULL,
	FOREIGN KEY (`workspaceId`) REFERENCES `workspace`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `agency_workspace` ON `agency` (`workspaceId`);--> statement-breakpoint
CREATE TABLE `edition` (
	`id` text PRIMARY KEY NOT NULL,
	`workspaceId` text NOT NULL,
	`runId` text NOT NULL,
	`slug` text NOT NULL,
	`n` integer NOT NULL,
	`title` text NOT NULL,
	`content` text NOT NULL,
	`licence` text NOT NULL,
	`createdAt` text NOT NULL,
	`createdBy` text,
	FOREIGN KEY (`workspaceId`) REFERENCES `workspace`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`runId`) REFERENCES `run`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `edition_n` ON `edition` (`slug`,`n`);--> statement-breakpoint
CREATE INDEX `edition_workspace` ON `edition` (`workspaceId`);--> statement-breakpoint
CREATE TABLE `error_source` (
	`id` text PRIMARY KEY NOT NULL,
	`workspaceId` text NOT NULL,
	`name` text NOT NULL,
	`createdAt` text NOT NULL,
	FOREIGN KEY (`workspaceId`) REFERENCES `workspace`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `error_source_name` ON `error_source` (`workspaceId`,`name`);--> statement-breakpoint
CREATE TABLE `idempotency` (
	`userId` text NOT NULL,
	`key` text NOT NULL,
	`request` text NOT NULL,
	`status` integer NOT NULL,
	`answer` text NOT NULL,
	`createdAt` text NOT NULL,
	PRIMARY KEY(`userId`, `key`)
);
--> statement-breakpoint
CREATE TABLE `invitation` (
	`hash` text PRIMARY KEY NOT NULL,
	`kind` text NOT NULL,
	`email` text,
	`workspaceId` text,
	`agencyId` text,
	`role` text,
	`createdAt` text NOT NULL,
	`createdBy` text,
	`expiresAt` text NOT NULL,
	`usedAt` text,
	FOREIGN KEY (`workspaceId`) REFERENCES `workspace`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`agencyId`) REFERENCES `agency`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `job` (
	`id` text PRIMARY KEY NOT NULL,
	`workspaceId` text NOT NULL,
	`kind` text NOT NULL,
	`state` text NOT NULL,
	`progress` real DEFAULT 0 NOT NULL,
	`input` text NOT NULL,
	`answer` text,
	`problem` text,
	`createdAt` text NOT NULL,
	`createdBy` text NOT NULL,
	`finishedAt` text,
	FOREIGN KEY (`workspaceId`) REFERENCES `workspace`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `job_state` ON `job` (`state`);--> statement-breakpoint
CREATE TABLE `log` (
	`seq` integer PRIMARY KEY AUTOINCREMENT NOT NULL,
	`at` text NOT NULL,
	`workspaceId` text,
	`actorId` text,
	`actor` text NOT NULL,
	`action` text NOT NULL,
	`entity` text NOT NULL,
	`entityId` text NOT NULL,
	`before` text,
	`after` text,
	`previousHash` text NOT NULL,
	`hash` text NOT NULL
);
--> statement-breakpoint
CREATE INDEX `log_workspace` ON `log` (`workspaceId`,`seq`);--> statement-breakpoint
CREATE TABLE `membership` (
	`id` text PRIMARY KEY NOT NULL,
	`workspaceId` text NOT NULL,
	`userId` text NOT NULL,
	`agencyId` text,
	`role` text NOT NULL,
	`revision` integer DEFAULT 1 NOT NULL,
	`createdAt` text NOT NULL,
	`createdBy` text,
	`deletedAt` text,
	FOREIGN KEY (`workspaceId`) REFERENCES `workspace`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`userId`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`agencyId`) REFERENCES `agency`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `membership_one` ON `membership` (`workspaceId`,`userId`,`role`) WHERE "membership"."deletedAt" is null;--> statement-breakpoint
CREATE TABLE `blob` (
	`sha256` text PRIMARY KEY NOT NULL,
	`bytes` integer NOT NULL,
	`type` text NOT NULL,
	`createdAt` text NOT NULL
);
--> statement-breakpoint
CREATE TABLE `outline_version` (
	`id` text PRIMARY KEY NOT NULL,
	`regionId` text NOT NULL,
	`n` integer NOT NULL,
	`geojson` text NOT NULL,
	`sha256` text NOT NULL,
	`areaM2` real NOT NULL,
	`createdAt` text NOT NULL,
	`createdBy` text,
	FOREIGN KEY (`regionId`) REFERENCES `region`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `outline_version_n` ON `outline_version` (`regionId`,`n`);--> statement-breakpoint
CREATE TABLE `region` (
	`id` text PRIMARY KEY NOT NULL,
	`workspaceId` text NOT NULL,
	`agencyId` text NOT NULL,
	`kind` text NOT NULL,
	`name` text NOT NULL,
	`note` text DEFAULT '' NOT NULL,
	`revision` integer DEFAULT 1 NOT NULL,
	`createdAt` text NOT NULL,
	`createdBy` text,
	`deletedAt` text,
	FOREIGN KEY (`workspaceId`) REFERENCES `workspace`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`agencyId`) REFERENCES `agency`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `region_workspace` ON `region` (`workspaceId`);--> statement-breakpoint
CREATE TABLE `run` (
	`id` text PRIMARY KEY NOT NULL,
	`scenarioId` text NOT NULL,
	`workspaceId` text NOT NULL,
	`n` integer NOT NULL,
	`name` text NOT NULL,
	`input` text NOT NULL,
	`inputSha256` text NOT NULL,
	`result` text NOT NULL,
	`resultSha256` text NOT NULL,
	`engine` text NOT NULL,
	`node` text NOT NULL,
	`createdAt` text NOT NULL,
	`createdBy` text,
	FOREIGN KEY (`scenarioId`) REFERENCES `scenario`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`workspaceId`) REFERENCES `workspace`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `run_n` ON `run` (`scenarioId`,`n`);--> statement-breakpoint
CREATE TABLE `scenario` (
	`id` text PRIMARY KEY NOT NULL,
	`workspaceId` text NOT NULL,
	`name` text NOT NULL,
	`draft` text NOT NULL,
	`revision` integer DEFAULT 1 NOT NULL,
	`createdAt` text NOT NULL,
	`createdBy` text,
	`deletedAt` text,
	FOREIGN KEY (`workspaceId`) REFERENCES `workspace`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `scenario_workspace` ON `scenario` (`workspaceId`);--> statement-breakpoint
CREATE TABLE `series` (
	`id` text PRIMARY KEY NOT NULL,
	`workspaceId` text NOT NULL,
	`regionId` text,
	`quantity` text NOT NULL,
	`name` text NOT NULL,
	`revision` integer DEFAULT 1 NOT NULL,
	`createdAt` text NOT NULL,
	`createdBy` text,
	`deletedAt` text,
	FOREIGN KEY (`workspaceId`) REFERENCES `workspace`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`regionId`) REFERENCES `region`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `series_region` ON `series` (`regionId`);--> statement-breakpoint
CREATE INDEX `series_workspace` ON `series` (`workspaceId`);--> statement-breakpoint
CREATE TABLE `series_data` (
	`versionId` text PRIMARY KEY NOT NULL,
	`mjd` blob NOT NULL,
	`value` blob NOT NULL,
	`sigma` blob,
	`flags` blob,
	FOREIGN KEY (`versionId`) REFERENCES `series_version`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `series_error` (
	`versionId` text NOT NULL,
	`sourceId` text NOT NULL,
	`sigmaGtPerYear` real NOT NULL,
	PRIMARY KEY(`versionId`, `sourceId`),
	FOREIGN KEY (`versionId`) REFERENCES `series_version`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`sourceId`) REFERENCES `error_source`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `series_version` (
	`id` text PRIMARY KEY NOT NULL,
	`seriesId` text NOT NULL,
	`n` integer NOT NULL,
	`state` text DEFAULT 'stored' NOT NULL,
	`originalSha256` text NOT NULL,
	`originalName` text NOT NULL,
	`dataSha256` text NOT NULL,
	`recipe` text NOT NULL,
	`reason` text NOT NULL,
	`source` text NOT NULL,
	`licence` text NOT NULL,
	`independence` text NOT NULL,
	`firstMjd` real NOT NULL,
	`lastMjd` real NOT NULL,
	`count` integer NOT NULL,
	`createdAt` text NOT NULL,
	`createdBy` text,
	FOREIGN KEY (`seriesId`) REFERENCES `series`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`originalSha256`) REFERENCES `blob`(`sha256`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `series_version_n` ON `series_version` (`seriesId`,`n`);--> statement-breakpoint
CREATE TABLE `session` (
	`hash` text PRIMARY KEY NOT NULL,
	`userId` text NOT NULL,
	`createdAt` text NOT NULL,
	`expiresAt` text NOT NULL,
	`lastSeenAt` text NOT NULL,
	FOREIGN KEY (`userId`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE TABLE `user` (
	`id` text PRIMARY KEY NOT NULL,
	`email` text NOT NULL,
	`name` text NOT NULL,
	`passwordHash` text NOT NULL,
	`operator` integer DEFAULT false NOT NULL,
	`createdAt` text NOT NULL
);
--> statement-breakpoint
CREATE UNIQUE INDEX `user_email` ON `user` (lower("email"));--> statement-breakpoint
CREATE TABLE `withdrawal` (
	`editionId` text PRIMARY KEY NOT NULL,
	`reason` text NOT NULL,
	`createdAt` text NOT NULL,
	`createdBy` text,
	FOREIGN KEY (`editionId`) REFERENCES `edition`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `workspace` (
	`id` text PRIMARY KEY NOT NULL,
	`name` text NOT NULL,
	`invented` integer DEFAULT false NOT NULL,
	`createdAt` text NOT NULL
);
