CREATE TABLE `grid` (
	`id` text PRIMARY KEY NOT NULL,
	`workspaceId` text NOT NULL,
	`name` text NOT NULL,
	`originalSha256` text NOT NULL,
	`originalName` text NOT NULL,
	`bytes` integer NOT NULL,
	`options` text NOT NULL,
	`description` text NOT NULL,
	`revision` integer DEFAULT 1 NOT NULL,
	`createdAt` text NOT NULL,
	`createdBy` text,
	`deletedAt` text,
	FOREIGN KEY (`workspaceId`) REFERENCES `workspace`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`originalSha256`) REFERENCES `blob`(`sha256`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `grid_workspace` ON `grid` (`workspaceId`);--> statement-breakpoint
CREATE TABLE `grid_pattern` (
	`versionId` text PRIMARY KEY NOT NULL,
	`gridId` text NOT NULL,
	`pattern` text NOT NULL,
	`sha256` text NOT NULL,
	`outlineSha256` text NOT NULL,
	FOREIGN KEY (`versionId`) REFERENCES `series_version`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`gridId`) REFERENCES `grid`(`id`) ON UPDATE no action ON DELETE no action
);
