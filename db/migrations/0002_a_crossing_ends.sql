ALTER TABLE "flags" ADD COLUMN "ended_at" timestamp (3) with time zone;
--> statement-breakpoint
drop index flags_one_per_period;
--> statement-breakpoint
-- One standing crossing per rule and period; a later one is a flag of its own.
create unique index flags_one_per_period on flags (rule_id, period_key) where ended_at is null;
