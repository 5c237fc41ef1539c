CREATE TABLE "audit_log" (
	"id" uuid PRIMARY KEY NOT NULL,
	"at" timestamp (3) with time zone NOT NULL,
	"person_id" uuid,
	"act" text NOT NULL,
	"subject" text NOT NULL,
	"detail" jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "chart_draft_revisions" (
	"chart_id" text NOT NULL,
	"revision" integer NOT NULL,
	"document" jsonb NOT NULL,
	"saved_at" timestamp (3) with time zone NOT NULL,
	"saved_by" uuid NOT NULL,
	CONSTRAINT "chart_draft_revisions_chart_id_revision_pk" PRIMARY KEY("chart_id","revision")
);
--> statement-breakpoint
CREATE TABLE "chart_drafts" (
	"chart_id" text PRIMARY KEY NOT NULL,
	"document" jsonb NOT NULL,
	"content_hash" text NOT NULL,
	"revision" integer NOT NULL,
	"saved_at" timestamp (3) with time zone NOT NULL,
	"saved_by" uuid NOT NULL
);
--> statement-breakpoint
CREATE TABLE "chart_symptoms" (
	"chart_id" text NOT NULL,
	"start_id" text NOT NULL,
	"version" integer NOT NULL,
	"title" text NOT NULL,
	"chart_title" text NOT NULL,
	"classes" jsonb NOT NULL,
	"engines" jsonb NOT NULL,
	"words" text[] NOT NULL,
	"plain" text NOT NULL,
	"search" "tsvector" NOT NULL,
	CONSTRAINT "chart_symptoms_chart_id_start_id_pk" PRIMARY KEY("chart_id","start_id")
);
--> statement-breakpoint
CREATE TABLE "chart_versions" (
	"chart_id" text NOT NULL,
	"version" integer NOT NULL,
	"document" jsonb NOT NULL,
	"content_hash" text NOT NULL,
	"change_note" text NOT NULL,
	"published_at" timestamp (3) with time zone NOT NULL,
	"published_by" uuid NOT NULL,
	CONSTRAINT "chart_versions_chart_id_version_pk" PRIMARY KEY("chart_id","version"),
	CONSTRAINT "chart_versions_from_one" CHECK ("chart_versions"."version" >= 1)
);
--> statement-breakpoint
CREATE TABLE "charts" (
	"id" text PRIMARY KEY NOT NULL,
	"title" text NOT NULL,
	"version" integer,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "causes" (
	"id" text PRIMARY KEY NOT NULL,
	"title" text NOT NULL,
	"system" text NOT NULL,
	"is_unsafe" boolean NOT NULL,
	"is_contributing" boolean NOT NULL,
	"advice" text,
	"remedy" jsonb,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "models" (
	"id" text PRIMARY KEY NOT NULL,
	"maker" text NOT NULL,
	"name" text NOT NULL,
	"class" text NOT NULL,
	"engine" text NOT NULL,
	"limits" jsonb NOT NULL,
	"sources" jsonb NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "service_items" (
	"id" text PRIMARY KEY NOT NULL,
	"title" text NOT NULL,
	"minutes" double precision,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "spec_keys" (
	"id" text PRIMARY KEY NOT NULL,
	"title" text NOT NULL,
	"quantity" text NOT NULL,
	"unit" text NOT NULL,
	"general" jsonb,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "one_time_links" (
	"id" uuid PRIMARY KEY NOT NULL,
	"purpose" text NOT NULL,
	"person_id" uuid,
	"token_hash" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"used_at" timestamp (3) with time zone,
	CONSTRAINT "one_time_links_purpose_known" CHECK ("one_time_links"."purpose" in ('invite', 'reset', 'first-owner')),
	CONSTRAINT "one_time_links_person_named" CHECK (("one_time_links"."purpose" = 'first-owner') = ("one_time_links"."person_id" is null))
);
--> statement-breakpoint
CREATE TABLE "people" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"role" text NOT NULL,
	"password_hash" text,
	"is_active" boolean DEFAULT true NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"last_seen_at" timestamp (3) with time zone,
	CONSTRAINT "people_role_known" CHECK ("people"."role" in ('junior', 'lead', 'owner'))
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"id" uuid PRIMARY KEY NOT NULL,
	"person_id" uuid NOT NULL,
	"secret_hash" text NOT NULL,
	"browser" text NOT NULL,
	"started_at" timestamp (3) with time zone NOT NULL,
	"last_seen_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "shops" (
	"id" integer PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"number_format" jsonb NOT NULL,
	"is_demo" boolean NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "shops_one_row" CHECK ("shops"."id" = 1)
);
--> statement-breakpoint
CREATE TABLE "sign_in_throttles" (
	"key" text PRIMARY KEY NOT NULL,
	"tries" integer NOT NULL,
	"ends_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "walk_events" (
	"id" uuid PRIMARY KEY NOT NULL,
	"walk_id" uuid NOT NULL,
	"seq" integer NOT NULL,
	"type" text NOT NULL,
	"person_id" uuid NOT NULL,
	"device_id" uuid NOT NULL,
	"event" jsonb NOT NULL,
	"body_hash" text NOT NULL,
	"received_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "walk_events_from_one" CHECK ("walk_events"."seq" >= 1)
);
--> statement-breakpoint
CREATE TABLE "walk_people" (
	"walk_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	CONSTRAINT "walk_people_person_id_walk_id_pk" PRIMARY KEY("person_id","walk_id")
);
--> statement-breakpoint
CREATE TABLE "walk_side_events" (
	"id" uuid PRIMARY KEY NOT NULL,
	"walk_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"device_id" uuid NOT NULL,
	"event" jsonb NOT NULL,
	"body_hash" text NOT NULL,
	"status" text NOT NULL,
	"code" text NOT NULL,
	"received_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "walks" (
	"id" uuid PRIMARY KEY NOT NULL,
	"kind" text NOT NULL,
	"chart_id" text NOT NULL,
	"chart_title" text NOT NULL,
	"version" integer NOT NULL,
	"machine" jsonb NOT NULL,
	"machine_title" text NOT NULL,
	"phase" text NOT NULL,
	"is_paused" boolean NOT NULL,
	"is_open" boolean NOT NULL,
	"stands_at" text NOT NULL,
	"minutes_used" double precision NOT NULL,
	"cause_id" text,
	"cause_title" text,
	"has_question" boolean NOT NULL,
	"started_by" uuid NOT NULL,
	"holder_person_id" uuid NOT NULL,
	"holder_device_id" uuid NOT NULL,
	"started_at" timestamp (3) with time zone NOT NULL,
	"last_event_at" timestamp (3) with time zone NOT NULL,
	"last_seq" integer NOT NULL,
	CONSTRAINT "walks_from_one" CHECK ("walks"."last_seq" >= 1)
);
--> statement-breakpoint
ALTER TABLE "chart_draft_revisions" ADD CONSTRAINT "chart_draft_revisions_chart_id_charts_id_fk" FOREIGN KEY ("chart_id") REFERENCES "public"."charts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chart_draft_revisions" ADD CONSTRAINT "chart_draft_revisions_saved_by_people_id_fk" FOREIGN KEY ("saved_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chart_drafts" ADD CONSTRAINT "chart_drafts_chart_id_charts_id_fk" FOREIGN KEY ("chart_id") REFERENCES "public"."charts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chart_drafts" ADD CONSTRAINT "chart_drafts_saved_by_people_id_fk" FOREIGN KEY ("saved_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chart_symptoms" ADD CONSTRAINT "chart_symptoms_chart_id_version_chart_versions_chart_id_version_fk" FOREIGN KEY ("chart_id","version") REFERENCES "public"."chart_versions"("chart_id","version") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chart_versions" ADD CONSTRAINT "chart_versions_chart_id_charts_id_fk" FOREIGN KEY ("chart_id") REFERENCES "public"."charts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chart_versions" ADD CONSTRAINT "chart_versions_published_by_people_id_fk" FOREIGN KEY ("published_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "one_time_links" ADD CONSTRAINT "one_time_links_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "walk_events" ADD CONSTRAINT "walk_events_walk_id_walks_id_fk" FOREIGN KEY ("walk_id") REFERENCES "public"."walks"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "walk_people" ADD CONSTRAINT "walk_people_walk_id_walks_id_fk" FOREIGN KEY ("walk_id") REFERENCES "public"."walks"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "walk_people" ADD CONSTRAINT "walk_people_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "walks" ADD CONSTRAINT "walks_started_by_people_id_fk" FOREIGN KEY ("started_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "walks" ADD CONSTRAINT "walks_holder_person_id_people_id_fk" FOREIGN KEY ("holder_person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "audit_log_at_idx" ON "audit_log" USING btree ("at");--> statement-breakpoint
CREATE INDEX "chart_symptoms_search_idx" ON "chart_symptoms" USING gin ("search");--> statement-breakpoint
CREATE INDEX "chart_symptoms_plain_idx" ON "chart_symptoms" USING gin ("plain" gin_trgm_ops);--> statement-breakpoint
CREATE UNIQUE INDEX "one_time_links_token_hash_key" ON "one_time_links" USING btree ("token_hash");--> statement-breakpoint
CREATE INDEX "one_time_links_person_id_idx" ON "one_time_links" USING btree ("person_id");--> statement-breakpoint
CREATE UNIQUE INDEX "people_email_key" ON "people" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "sessions_person_id_idx" ON "sessions" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "sessions_last_seen_at_idx" ON "sessions" USING btree ("last_seen_at");--> statement-breakpoint
CREATE INDEX "sign_in_throttles_ends_at_idx" ON "sign_in_throttles" USING btree ("ends_at");--> statement-breakpoint
CREATE UNIQUE INDEX "walk_events_walk_id_seq_key" ON "walk_events" USING btree ("walk_id","seq");--> statement-breakpoint
CREATE INDEX "walk_side_events_walk_id_idx" ON "walk_side_events" USING btree ("walk_id","received_at");--> statement-breakpoint
CREATE INDEX "walks_started_at_idx" ON "walks" USING btree ("started_at" DESC NULLS LAST,"id" DESC NULLS LAST);