CREATE TABLE `materials` (
	`id` char(20) NOT NULL,
	`workshop_id` char(20) NOT NULL,
	`name` varchar(80) NOT NULL,
	`profile` json NOT NULL,
	`version` int NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`updated_at` datetime(3) NOT NULL,
	CONSTRAINT `materials_id` PRIMARY KEY(`id`),
	CONSTRAINT `materials_name` UNIQUE(`workshop_id`,`name`)
);
--> statement-breakpoint
ALTER TABLE `materials` ADD CONSTRAINT `materials_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE cascade ON UPDATE no action;