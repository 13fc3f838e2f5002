ALTER TABLE `jobs` ADD `enough_requested` boolean DEFAULT false NOT NULL;--> statement-breakpoint
ALTER TABLE `plans` ADD `other_envelopes` json;--> statement-breakpoint
ALTER TABLE `plans` ADD `wishes` json;--> statement-breakpoint
ALTER TABLE `plans` ADD `from_plan` int;--> statement-breakpoint
ALTER TABLE `plans` ADD `objectives` json;