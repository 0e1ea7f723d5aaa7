ALTER TABLE "documents" ADD COLUMN "facts_sha256" text NOT NULL;--> statement-breakpoint
CREATE INDEX "documents_facts_sha256" ON "documents" USING btree ("facts_sha256");