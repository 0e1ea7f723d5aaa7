CREATE TABLE "accounts" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"container_id" uuid,
	"machine_id" uuid,
	"party_id" uuid,
	"place" text,
	CONSTRAINT "accounts_site_id" UNIQUE("site_id","id"),
	CONSTRAINT "accounts_once" UNIQUE NULLS NOT DISTINCT("site_id","kind","container_id","machine_id","party_id","place")
);
--> statement-breakpoint
CREATE TABLE "balances" (
	"account_id" uuid NOT NULL,
	"stream_id" uuid NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"litres" numeric(38, 18) NOT NULL,
	"kilograms" numeric(38, 18) NOT NULL,
	"pieces" integer NOT NULL,
	"version" bigint NOT NULL,
	CONSTRAINT "balances_account_id_stream_id_pk" PRIMARY KEY("account_id","stream_id")
);
--> statement-breakpoint
CREATE TABLE "books" (
	"site_id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"last_line_no" bigint DEFAULT 0 NOT NULL,
	"last_hash" text NOT NULL
);
--> statement-breakpoint
CREATE TABLE "movements" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"line_no" bigint NOT NULL,
	"stream_id" uuid NOT NULL,
	"from_account_id" uuid NOT NULL,
	"to_account_id" uuid NOT NULL,
	"litres" numeric(38, 18) NOT NULL,
	"kilograms" numeric(38, 18) NOT NULL,
	"pieces" integer NOT NULL,
	"entered_value" text NOT NULL,
	"entered_unit" text NOT NULL,
	"method" text NOT NULL,
	"spread_percent" text,
	"is_estimate" boolean NOT NULL,
	"reason" text NOT NULL,
	"counts_as" text NOT NULL,
	"reverses" uuid,
	"drain_id" uuid,
	"drain_revision" integer,
	"pickup_id" uuid,
	"pickup_line_id" uuid,
	"transfer_id" uuid,
	"occurred_at" timestamp (3) with time zone NOT NULL,
	"occurred_on" date NOT NULL,
	"recorded_at" timestamp (3) with time zone NOT NULL,
	"recorded_by" uuid NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"previous_hash" text NOT NULL,
	"hash" text NOT NULL,
	CONSTRAINT "movements_line_no_once" UNIQUE("site_id","line_no"),
	CONSTRAINT "movements_reversed_once" UNIQUE("reverses"),
	CONSTRAINT "movements_move_something" CHECK ("movements"."litres" >= 0 and "movements"."kilograms" >= 0 and "movements"."pieces" >= 0
        and ("movements"."litres" > 0 or "movements"."kilograms" > 0 or "movements"."pieces" > 0)),
	CONSTRAINT "movements_between_two_accounts" CHECK ("movements"."from_account_id" <> "movements"."to_account_id"),
	CONSTRAINT "movements_reversal_names_its_target" CHECK (("movements"."reason" = 'reversal') = ("movements"."reverses" is not null)
        and ("movements"."reason" = 'reversal' or "movements"."counts_as" = "movements"."reason"))
);
--> statement-breakpoint
CREATE TABLE "number_series" (
	"organisation_id" uuid NOT NULL,
	"scope_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"year" integer NOT NULL,
	"last" integer NOT NULL,
	CONSTRAINT "number_series_scope_id_kind_year_pk" PRIMARY KEY("scope_id","kind","year")
);
--> statement-breakpoint
CREATE TABLE "drain_revisions" (
	"organisation_id" uuid NOT NULL,
	"drain_id" uuid NOT NULL,
	"revision" integer NOT NULL,
	"facts" jsonb NOT NULL,
	"act" text NOT NULL,
	"reason_code" text,
	"reason_text" text DEFAULT '' NOT NULL,
	"made_by" uuid NOT NULL,
	"made_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "drain_revisions_drain_id_revision_pk" PRIMARY KEY("drain_id","revision")
);
--> statement-breakpoint
CREATE TABLE "drains" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"number" text NOT NULL,
	"machine_id" uuid,
	"machine_text" text DEFAULT '' NOT NULL,
	"stream_id" uuid NOT NULL,
	"occurred_at" timestamp (3) with time zone NOT NULL,
	"occurred_on" date NOT NULL,
	"entered_value" text NOT NULL,
	"entered_unit" text NOT NULL,
	"litres" numeric(38, 18) NOT NULL,
	"method" text NOT NULL,
	"is_estimate" boolean NOT NULL,
	"state" text NOT NULL,
	"revision" integer NOT NULL,
	"recorded_at" timestamp (3) with time zone NOT NULL,
	"recorded_by" uuid NOT NULL,
	"content_hash" text NOT NULL,
	CONSTRAINT "drains_organisation_id" UNIQUE("organisation_id","id"),
	CONSTRAINT "drains_number_once" UNIQUE("organisation_id","number")
);
--> statement-breakpoint
CREATE TABLE "marks" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"drain_id" uuid,
	"container_id" uuid,
	"code" text NOT NULL,
	"details" jsonb NOT NULL,
	"raised_at" timestamp (3) with time zone NOT NULL,
	"reviewed_at" timestamp (3) with time zone,
	"reviewed_by" uuid,
	"review_note" text,
	CONSTRAINT "marks_organisation_id" UNIQUE("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "transfers" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"content_hash" text NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"recorded_at" timestamp (3) with time zone NOT NULL,
	"recorded_by" uuid NOT NULL
);
--> statement-breakpoint
CREATE TABLE "organisations" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"phone" text DEFAULT '' NOT NULL,
	"is_demo" boolean DEFAULT false NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "people" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"phone" text DEFAULT '' NOT NULL,
	"role" text NOT NULL,
	"password_hash" text NOT NULL,
	"version" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"retired_at" timestamp (3) with time zone,
	CONSTRAINT "people_organisation_id" UNIQUE("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "person_sites" (
	"organisation_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	CONSTRAINT "person_sites_person_id_site_id_pk" PRIMARY KEY("person_id","site_id")
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"token_hash" text NOT NULL,
	"previous_token_hash" text,
	"rotated_at" timestamp (3) with time zone NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"ended_at" timestamp (3) with time zone,
	"device" text DEFAULT '' NOT NULL
);
--> statement-breakpoint
CREATE TABLE "containers" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"code" text NOT NULL,
	"type" text NOT NULL,
	"description" text DEFAULT '' NOT NULL,
	"stream_id" uuid NOT NULL,
	"capacity_value" text NOT NULL,
	"capacity_unit" text NOT NULL,
	"capacity_litres" numeric(38, 18) NOT NULL,
	"fill_percent" text NOT NULL,
	"fill_line_litres" numeric(38, 18) NOT NULL,
	"tare_kilograms" numeric(38, 18),
	"place" text DEFAULT '' NOT NULL,
	"version" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"retired_at" timestamp (3) with time zone,
	CONSTRAINT "containers_organisation_id" UNIQUE("organisation_id","id"),
	CONSTRAINT "containers_code_once" UNIQUE("organisation_id","code")
);
--> statement-breakpoint
CREATE TABLE "fluids" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"name" text NOT NULL,
	"stream_id" uuid NOT NULL,
	"version" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"retired_at" timestamp (3) with time zone,
	CONSTRAINT "fluids_organisation_id" UNIQUE("organisation_id","id"),
	CONSTRAINT "fluids_name_once" UNIQUE("organisation_id","name")
);
--> statement-breakpoint
CREATE TABLE "holds" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"container_id" uuid NOT NULL,
	"reason" text NOT NULL,
	"halogens_ppm" text,
	"held_by" uuid NOT NULL,
	"held_at" timestamp (3) with time zone NOT NULL,
	"released_by" uuid,
	"released_at" timestamp (3) with time zone,
	"release_note" text
);
--> statement-breakpoint
CREATE TABLE "machines" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"code" text NOT NULL,
	"make" text DEFAULT '' NOT NULL,
	"model" text DEFAULT '' NOT NULL,
	"kind" text NOT NULL,
	"serial" text DEFAULT '' NOT NULL,
	"fluid_id" uuid NOT NULL,
	"reservoir_value" text,
	"reservoir_unit" text,
	"reservoir_litres" numeric(38, 18),
	"system_value" text,
	"system_unit" text,
	"system_litres" numeric(38, 18),
	"version" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"retired_at" timestamp (3) with time zone,
	CONSTRAINT "machines_organisation_id" UNIQUE("organisation_id","id"),
	CONSTRAINT "machines_code_once" UNIQUE("organisation_id","code")
);
--> statement-breakpoint
CREATE TABLE "parties" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"name" text NOT NULL,
	"identification_number" text NOT NULL,
	"address" text DEFAULT '' NOT NULL,
	"email" text NOT NULL,
	"phone" text DEFAULT '' NOT NULL,
	"contact_name" text DEFAULT '' NOT NULL,
	"version" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"retired_at" timestamp (3) with time zone,
	CONSTRAINT "parties_organisation_id" UNIQUE("organisation_id","id"),
	CONSTRAINT "parties_name_once" UNIQUE("organisation_id","kind","name")
);
--> statement-breakpoint
CREATE TABLE "permits" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"party_id" uuid NOT NULL,
	"number" text NOT NULL,
	"starts_on" date NOT NULL,
	"ends_on" date NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"retired_at" timestamp (3) with time zone
);
--> statement-breakpoint
CREATE TABLE "sites" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"code" text NOT NULL,
	"name" text NOT NULL,
	"address" text DEFAULT '' NOT NULL,
	"phone" text DEFAULT '' NOT NULL,
	"identification_number" text DEFAULT '' NOT NULL,
	"time_zone" text NOT NULL,
	"profile" text NOT NULL,
	"volume_unit" text NOT NULL,
	"mass_unit" text NOT NULL,
	"version" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"retired_at" timestamp (3) with time zone,
	CONSTRAINT "sites_organisation_id" UNIQUE("organisation_id","id"),
	CONSTRAINT "sites_code_once" UNIQUE("organisation_id","code")
);
--> statement-breakpoint
CREATE TABLE "streams" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"code" text NOT NULL,
	"name" text NOT NULL,
	"kind" text NOT NULL,
	"label_words" text DEFAULT '' NOT NULL,
	"waste_code" text DEFAULT '' NOT NULL,
	"rule_classes" jsonb NOT NULL,
	"density" numeric(38, 18),
	"density_basis" text,
	"version" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"retired_at" timestamp (3) with time zone,
	CONSTRAINT "streams_organisation_id" UNIQUE("organisation_id","id"),
	CONSTRAINT "streams_code_once" UNIQUE("organisation_id","code")
);
--> statement-breakpoint
CREATE TABLE "documents" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"pickup_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"revision" integer NOT NULL,
	"facts" jsonb NOT NULL,
	"pages" integer NOT NULL,
	"bytes" "bytea" NOT NULL,
	"sha256" text NOT NULL,
	"made_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "documents_revision_once" UNIQUE("pickup_id","revision")
);
--> statement-breakpoint
CREATE TABLE "pickup_lines" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"pickup_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"container_id" uuid NOT NULL,
	"stream_id" uuid NOT NULL,
	"shipped_value" text NOT NULL,
	"shipped_unit" text NOT NULL,
	"shipped_litres" numeric(38, 18) NOT NULL,
	"shipped_kilograms" numeric(38, 18) NOT NULL,
	"pieces" integer DEFAULT 0 NOT NULL,
	"container_count" integer DEFAULT 1 NOT NULL,
	"received_value" text,
	"received_unit" text,
	"received_litres" numeric(38, 18),
	"received_kilograms" numeric(38, 18),
	"received_pieces" integer,
	"received_method" text,
	"received_note" text DEFAULT '' NOT NULL,
	"received_density" numeric(38, 18),
	"removed" boolean DEFAULT false NOT NULL,
	CONSTRAINT "pickup_lines_organisation_id" UNIQUE("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "pickups" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"number" text,
	"stage" text NOT NULL,
	"hauler_id" uuid,
	"facility_id" uuid,
	"planned_on" date NOT NULL,
	"order_number" text DEFAULT '' NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"version" integer NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"created_by" uuid NOT NULL,
	"issued_at" timestamp (3) with time zone,
	"issued_by" uuid,
	"signed_out_at" timestamp (3) with time zone,
	"return_due_on" date,
	"received_at" timestamp (3) with time zone,
	"received_on" date,
	"received_by" uuid,
	"received_ticket" text DEFAULT '' NOT NULL,
	"received_note" text DEFAULT '' NOT NULL,
	"settled_at" timestamp (3) with time zone,
	"settled_by" uuid,
	"settle_cause" text,
	"settle_note" text DEFAULT '' NOT NULL,
	"voided_at" timestamp (3) with time zone,
	"voided_by" uuid,
	"void_reason" text DEFAULT '' NOT NULL,
	"content_hash" text NOT NULL,
	CONSTRAINT "pickups_organisation_id" UNIQUE("organisation_id","id"),
	CONSTRAINT "pickups_number_once" UNIQUE("organisation_id","number")
);
--> statement-breakpoint
CREATE TABLE "signatures" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"pickup_id" uuid NOT NULL,
	"party" text NOT NULL,
	"name" text NOT NULL,
	"capacity" text DEFAULT '' NOT NULL,
	"strokes" jsonb,
	"dispute" text DEFAULT '' NOT NULL,
	"document_sha256" text NOT NULL,
	"signed_at" timestamp (3) with time zone NOT NULL,
	"signed_offset" text NOT NULL,
	"taken_by" uuid NOT NULL,
	CONSTRAINT "signatures_party_once" UNIQUE("pickup_id","party")
);
--> statement-breakpoint
CREATE TABLE "flags" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"rule_id" uuid NOT NULL,
	"rule_version" integer NOT NULL,
	"period_key" text NOT NULL,
	"level" text NOT NULL,
	"state" text NOT NULL,
	"rule" jsonb NOT NULL,
	"finding" jsonb NOT NULL,
	"raised_at" timestamp (3) with time zone NOT NULL,
	"changed_at" timestamp (3) with time zone NOT NULL,
	"reviewed_at" timestamp (3) with time zone,
	"reviewed_by" uuid,
	"review_note" text,
	CONSTRAINT "flags_organisation_id" UNIQUE("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "rules" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"origin" text NOT NULL,
	"pack_rule_id" text,
	"definition" jsonb NOT NULL,
	"enabled" boolean NOT NULL,
	"version" integer NOT NULL,
	"changed_at" timestamp (3) with time zone NOT NULL,
	"changed_by" uuid,
	"change_reason" text DEFAULT '' NOT NULL,
	"retired_at" timestamp (3) with time zone,
	CONSTRAINT "rules_organisation_id" UNIQUE("organisation_id","id"),
	CONSTRAINT "rules_pack_rule_once" UNIQUE("site_id","pack_rule_id")
);
--> statement-breakpoint
CREATE TABLE "audit" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"site_id" uuid,
	"person_id" uuid,
	"act" text NOT NULL,
	"subject_kind" text NOT NULL,
	"subject_id" uuid NOT NULL,
	"details" jsonb NOT NULL,
	"at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "outbox" (
	"id" uuid PRIMARY KEY NOT NULL,
	"organisation_id" uuid NOT NULL,
	"to_address" text NOT NULL,
	"to_name" text NOT NULL,
	"subject" text NOT NULL,
	"body" text NOT NULL,
	"document_id" uuid,
	"attachment_name" text,
	"created_at" timestamp (3) with time zone NOT NULL,
	"state" text NOT NULL,
	"attempts" integer DEFAULT 0 NOT NULL,
	"next_attempt_at" timestamp (3) with time zone NOT NULL,
	"sent_at" timestamp (3) with time zone,
	"last_error" text DEFAULT '' NOT NULL
);
--> statement-breakpoint
ALTER TABLE "accounts" ADD CONSTRAINT "accounts_site" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "accounts" ADD CONSTRAINT "accounts_container" FOREIGN KEY ("organisation_id","container_id") REFERENCES "public"."containers"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "accounts" ADD CONSTRAINT "accounts_machine" FOREIGN KEY ("organisation_id","machine_id") REFERENCES "public"."machines"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "accounts" ADD CONSTRAINT "accounts_party" FOREIGN KEY ("organisation_id","party_id") REFERENCES "public"."parties"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "books" ADD CONSTRAINT "books_site" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "movements" ADD CONSTRAINT "movements_reverses" FOREIGN KEY ("reverses") REFERENCES "public"."movements"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "movements" ADD CONSTRAINT "movements_from" FOREIGN KEY ("site_id","from_account_id") REFERENCES "public"."accounts"("site_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "movements" ADD CONSTRAINT "movements_to" FOREIGN KEY ("site_id","to_account_id") REFERENCES "public"."accounts"("site_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "movements" ADD CONSTRAINT "movements_stream" FOREIGN KEY ("organisation_id","stream_id") REFERENCES "public"."streams"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "movements" ADD CONSTRAINT "movements_site" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "drain_revisions" ADD CONSTRAINT "drain_revisions_drain" FOREIGN KEY ("organisation_id","drain_id") REFERENCES "public"."drains"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "drains" ADD CONSTRAINT "drains_site" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "drains" ADD CONSTRAINT "drains_machine" FOREIGN KEY ("organisation_id","machine_id") REFERENCES "public"."machines"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "drains" ADD CONSTRAINT "drains_stream" FOREIGN KEY ("organisation_id","stream_id") REFERENCES "public"."streams"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "marks" ADD CONSTRAINT "marks_site" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "marks" ADD CONSTRAINT "marks_drain" FOREIGN KEY ("organisation_id","drain_id") REFERENCES "public"."drains"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "marks" ADD CONSTRAINT "marks_container" FOREIGN KEY ("organisation_id","container_id") REFERENCES "public"."containers"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "transfers" ADD CONSTRAINT "transfers_site" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "people" ADD CONSTRAINT "people_organisation_id_organisations_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "person_sites" ADD CONSTRAINT "person_sites_person" FOREIGN KEY ("organisation_id","person_id") REFERENCES "public"."people"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "person_sites" ADD CONSTRAINT "person_sites_site" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_person" FOREIGN KEY ("organisation_id","person_id") REFERENCES "public"."people"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "containers" ADD CONSTRAINT "containers_site" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "containers" ADD CONSTRAINT "containers_stream" FOREIGN KEY ("organisation_id","stream_id") REFERENCES "public"."streams"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fluids" ADD CONSTRAINT "fluids_stream" FOREIGN KEY ("organisation_id","stream_id") REFERENCES "public"."streams"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "holds" ADD CONSTRAINT "holds_container" FOREIGN KEY ("organisation_id","container_id") REFERENCES "public"."containers"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "machines" ADD CONSTRAINT "machines_site" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "machines" ADD CONSTRAINT "machines_fluid" FOREIGN KEY ("organisation_id","fluid_id") REFERENCES "public"."fluids"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "permits" ADD CONSTRAINT "permits_party" FOREIGN KEY ("organisation_id","party_id") REFERENCES "public"."parties"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "documents" ADD CONSTRAINT "documents_pickup" FOREIGN KEY ("organisation_id","pickup_id") REFERENCES "public"."pickups"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickup_lines" ADD CONSTRAINT "pickup_lines_pickup" FOREIGN KEY ("organisation_id","pickup_id") REFERENCES "public"."pickups"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickup_lines" ADD CONSTRAINT "pickup_lines_container" FOREIGN KEY ("organisation_id","container_id") REFERENCES "public"."containers"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickup_lines" ADD CONSTRAINT "pickup_lines_stream" FOREIGN KEY ("organisation_id","stream_id") REFERENCES "public"."streams"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickups" ADD CONSTRAINT "pickups_site" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickups" ADD CONSTRAINT "pickups_hauler" FOREIGN KEY ("organisation_id","hauler_id") REFERENCES "public"."parties"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickups" ADD CONSTRAINT "pickups_facility" FOREIGN KEY ("organisation_id","facility_id") REFERENCES "public"."parties"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "signatures" ADD CONSTRAINT "signatures_pickup" FOREIGN KEY ("organisation_id","pickup_id") REFERENCES "public"."pickups"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "flags" ADD CONSTRAINT "flags_rule" FOREIGN KEY ("organisation_id","rule_id") REFERENCES "public"."rules"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rules" ADD CONSTRAINT "rules_site" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "balances_site" ON "balances" USING btree ("site_id");--> statement-breakpoint
CREATE INDEX "movements_from_account" ON "movements" USING btree ("from_account_id","occurred_on");--> statement-breakpoint
CREATE INDEX "movements_to_account" ON "movements" USING btree ("to_account_id","occurred_on");--> statement-breakpoint
CREATE INDEX "movements_site_day" ON "movements" USING btree ("site_id","occurred_on");--> statement-breakpoint
CREATE INDEX "movements_drain" ON "movements" USING btree ("drain_id");--> statement-breakpoint
CREATE INDEX "movements_pickup" ON "movements" USING btree ("pickup_id");--> statement-breakpoint
CREATE INDEX "drains_site_time" ON "drains" USING btree ("site_id","occurred_at","id");--> statement-breakpoint
CREATE INDEX "drains_machine_time" ON "drains" USING btree ("machine_id","occurred_at");--> statement-breakpoint
CREATE INDEX "marks_drain_id" ON "marks" USING btree ("drain_id");--> statement-breakpoint
CREATE INDEX "marks_site_open" ON "marks" USING btree ("site_id","reviewed_at");--> statement-breakpoint
CREATE UNIQUE INDEX "people_email_once" ON "people" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "sessions_token_hash" ON "sessions" USING btree ("token_hash");--> statement-breakpoint
CREATE INDEX "sessions_previous_token_hash" ON "sessions" USING btree ("previous_token_hash");--> statement-breakpoint
CREATE INDEX "sessions_person_id" ON "sessions" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "holds_container_id" ON "holds" USING btree ("container_id");--> statement-breakpoint
CREATE INDEX "permits_party_id" ON "permits" USING btree ("party_id");--> statement-breakpoint
CREATE INDEX "documents_sha256" ON "documents" USING btree ("sha256");--> statement-breakpoint
CREATE INDEX "pickup_lines_pickup_id" ON "pickup_lines" USING btree ("pickup_id","position");--> statement-breakpoint
CREATE INDEX "pickups_site_stage" ON "pickups" USING btree ("site_id","stage");--> statement-breakpoint
CREATE INDEX "flags_site_state" ON "flags" USING btree ("site_id","state");--> statement-breakpoint
CREATE INDEX "flags_rule_period" ON "flags" USING btree ("rule_id","period_key");--> statement-breakpoint
CREATE INDEX "audit_subject" ON "audit" USING btree ("subject_id","at");--> statement-breakpoint
CREATE INDEX "audit_organisation_time" ON "audit" USING btree ("organisation_id","at");--> statement-breakpoint
CREATE INDEX "outbox_due" ON "outbox" USING btree ("state","next_attempt_at");