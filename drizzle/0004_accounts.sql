CREATE TABLE `outbox` (
	`id` text PRIMARY KEY NOT NULL,
	`recipient` text NOT NULL,
	`subject` text NOT NULL,
	`text` text NOT NULL,
	`createdAt` text NOT NULL,
	`sentAt` text,
	`tries` integer DEFAULT 0 NOT NULL,
	`nextTryAt` text NOT NULL,
	`fault` text
);
--> statement-breakpoint
CREATE INDEX `outbox_open` ON `outbox` (`sentAt`,`nextTryAt`);--> statement-breakpoint
CREATE TABLE `token` (
	`id` text PRIMARY KEY NOT NULL,
	`hash` text NOT NULL,
	`userId` text NOT NULL,
	`name` text NOT NULL,
	`scope` text NOT NULL,
	`createdAt` text NOT NULL,
	`expiresAt` text NOT NULL,
	`lastUsedAt` text,
	FOREIGN KEY (`userId`) REFERENCES `user`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE UNIQUE INDEX `token_hash` ON `token` (`hash`);--> statement-breakpoint
CREATE INDEX `token_user` ON `token` (`userId`);