CREATE TABLE `chain` (
	`id` text PRIMARY KEY NOT NULL,
	`workspaceId` text NOT NULL,
	`name` text NOT NULL,
	`chain` text NOT NULL,
	`revision` integer DEFAULT 1 NOT NULL,
	`createdAt` text NOT NULL,
	`createdBy` text,
	`deletedAt` text,
	FOREIGN KEY (`workspaceId`) REFERENCES `workspace`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`createdBy`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `chain_workspace` ON `chain` (`workspaceId`);