ALTER TABLE `revisions` ADD `proxy_key` varchar(200);--> statement-breakpoint
ALTER TABLE `revisions` ADD `choices` json;--> statement-breakpoint
ALTER TABLE `revisions` ADD `is_accepted` boolean DEFAULT false NOT NULL;--> statement-breakpoint
ALTER TABLE `revisions` ADD `created_by` char(20);--> statement-breakpoint
ALTER TABLE `workshops` ADD `usual_unit` json;--> statement-breakpoint
ALTER TABLE `revisions` ADD CONSTRAINT `revisions_created_by_users_id_fk` FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;