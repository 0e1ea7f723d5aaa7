DROP INDEX "sessions_token_hash";--> statement-breakpoint
DROP INDEX "sessions_previous_token_hash";