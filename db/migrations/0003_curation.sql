CREATE TABLE "amendment_authors" (
	"amendment_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	CONSTRAINT "amendment_authors_amendment_id_user_id_pk" PRIMARY KEY("amendment_id","user_id")
);
--> statement-breakpoint
CREATE TABLE "amendment_changes" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"amendment_id" uuid NOT NULL,
	"position" bigint GENERATED ALWAYS AS IDENTITY (sequence name "amendment_changes_position_seq" INCREMENT BY 1 MINVALUE 1 MAXVALUE 9223372036854775807 START WITH 1 CACHE 1),
	"kind" text NOT NULL,
	"action" text NOT NULL,
	"subject" text NOT NULL,
	"species_id" text,
	"given" jsonb NOT NULL,
	"row" jsonb,
	"reason" text,
	"successor" text,
	"comment" text,
	"base_revision" integer,
	"findings" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"errors" integer DEFAULT 0 NOT NULL,
	"warnings" integer DEFAULT 0 NOT NULL,
	"author" uuid NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"import_id" uuid,
	"import_row" integer,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "amendment_changes_once" UNIQUE("amendment_id","kind","subject"),
	CONSTRAINT "amendment_changes_kind" CHECK ("amendment_changes"."kind" in ('level', 'source', 'species', 'isotope', 'hyperfine')),
	CONSTRAINT "amendment_changes_action" CHECK ("amendment_changes"."action" in ('create', 'replace', 'retire') and ("amendment_changes"."action" <> 'retire' or "amendment_changes"."kind" = 'level')),
	CONSTRAINT "amendment_changes_counts" CHECK ("amendment_changes"."errors" >= 0 and "amendment_changes"."warnings" >= 0 and "amendment_changes"."version" >= 1),
	CONSTRAINT "amendment_changes_row" CHECK ("amendment_changes"."row" is not null or "amendment_changes"."errors" > 0)
);
--> statement-breakpoint
CREATE TABLE "comments" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"amendment_id" uuid NOT NULL,
	"change_id" uuid,
	"thread" uuid,
	"author" uuid NOT NULL,
	"text" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"resolved_at" timestamp with time zone,
	"resolved_by" uuid,
	CONSTRAINT "comments_text" CHECK (length(btrim("comments"."text")) between 1 and 10000),
	CONSTRAINT "comments_resolved" CHECK (num_nonnulls("comments"."resolved_at", "comments"."resolved_by") in (0, 2))
);
--> statement-breakpoint
CREATE TABLE "ordinal_counters" (
	"species_id" text PRIMARY KEY NOT NULL,
	"next" integer NOT NULL,
	CONSTRAINT "ordinal_counters_next" CHECK ("ordinal_counters"."next" >= 1)
);
--> statement-breakpoint
CREATE TABLE "reviews" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"amendment_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"asked_by" uuid NOT NULL,
	"asked_at" timestamp with time zone DEFAULT now() NOT NULL,
	"comment" text DEFAULT '' NOT NULL,
	"outcome" text,
	"closed_by" uuid,
	"closed_at" timestamp with time zone,
	"closing_comment" text,
	CONSTRAINT "reviews_outcome" CHECK ("reviews"."outcome" in ('accepted', 'returned', 'withdrawn', 'edited')),
	CONSTRAINT "reviews_closed" CHECK (num_nonnulls("reviews"."outcome", "reviews"."closed_by", "reviews"."closed_at") in (0, 3))
);
--> statement-breakpoint
CREATE TABLE "edition_changes" (
	"sequence" bigint PRIMARY KEY GENERATED ALWAYS AS IDENTITY (sequence name "edition_changes_sequence_seq" INCREMENT BY 1 MINVALUE 1 MAXVALUE 9223372036854775807 START WITH 1 CACHE 1),
	"edition" integer NOT NULL,
	"kind" text NOT NULL,
	"subject" text NOT NULL,
	"action" text NOT NULL,
	"amendment_id" uuid NOT NULL,
	"change_id" uuid NOT NULL
);
--> statement-breakpoint
CREATE TABLE "import_rows" (
	"import_id" uuid NOT NULL,
	"row" integer NOT NULL,
	"verdict" text NOT NULL,
	"level_id" text,
	"findings" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"fields" jsonb DEFAULT '[]'::jsonb NOT NULL,
	CONSTRAINT "import_rows_import_id_row_pk" PRIMARY KEY("import_id","row"),
	CONSTRAINT "import_rows_verdict_known" CHECK ("import_rows"."verdict" in ('new', 'changed', 'same', 'ambiguous', 'error'))
);
--> statement-breakpoint
CREATE TABLE "imports" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"amendment_id" uuid NOT NULL,
	"author" uuid NOT NULL,
	"file_name" text NOT NULL,
	"sha256" text NOT NULL,
	"bytes" integer NOT NULL,
	"dry_run" boolean NOT NULL,
	"reading" jsonb NOT NULL,
	"state" text DEFAULT 'running' NOT NULL,
	"rows_total" integer DEFAULT 0 NOT NULL,
	"rows_done" integer DEFAULT 0 NOT NULL,
	"counts" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"problems" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"alive_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "imports_state" CHECK ("imports"."state" in ('running', 'done', 'refused', 'stopped', 'failed')),
	CONSTRAINT "imports_sha256" CHECK ("imports"."sha256" ~ '^[0-9a-f]{64}$'),
	CONSTRAINT "imports_rows" CHECK ("imports"."rows_done" between 0 and "imports"."rows_total")
);
--> statement-breakpoint
CREATE TABLE "follows" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"user_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"subject" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "follows_kind" CHECK ("follows"."kind" in ('species', 'level', 'line'))
);
--> statement-breakpoint
CREATE TABLE "mails" (
	"id" bigint PRIMARY KEY GENERATED ALWAYS AS IDENTITY (sequence name "mails_id_seq" INCREMENT BY 1 MINVALUE 1 MAXVALUE 9223372036854775807 START WITH 1 CACHE 1),
	"event_id" bigint,
	"recipient" text NOT NULL,
	"subject" text NOT NULL,
	"text" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"sent_at" timestamp with time zone,
	"attempts" integer DEFAULT 0 NOT NULL,
	"next_attempt_at" timestamp with time zone DEFAULT now() NOT NULL,
	"last_error" text,
	"failed_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "notice_events" (
	"id" bigint PRIMARY KEY GENERATED ALWAYS AS IDENTITY (sequence name "notice_events_id_seq" INCREMENT BY 1 MINVALUE 1 MAXVALUE 9223372036854775807 START WITH 1 CACHE 1),
	"kind" text NOT NULL,
	"payload" jsonb NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"spread_at" timestamp with time zone,
	"attempts" integer DEFAULT 0 NOT NULL,
	"last_error" text,
	CONSTRAINT "notice_events_kind" CHECK ("notice_events"."kind" in ('review.asked', 'review.returned', 'review.accepted', 'edition.published', 'invitation.made', 'password.reset'))
);
--> statement-breakpoint
CREATE TABLE "webhook_deliveries" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"webhook_id" uuid NOT NULL,
	"event_id" bigint,
	"event" text NOT NULL,
	"body" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"attempts" integer DEFAULT 0 NOT NULL,
	"next_attempt_at" timestamp with time zone DEFAULT now() NOT NULL,
	"delivered_at" timestamp with time zone,
	"failed_at" timestamp with time zone,
	"response_status" integer,
	"last_error" text
);
--> statement-breakpoint
CREATE TABLE "webhooks" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner" uuid NOT NULL,
	"name" text NOT NULL,
	"url" text NOT NULL,
	"secret" text NOT NULL,
	"events" jsonb NOT NULL,
	"active" boolean DEFAULT true NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"removed_at" timestamp with time zone,
	CONSTRAINT "webhooks_url" CHECK ("webhooks"."url" ~ '^https?://' and length("webhooks"."url") <= 2000),
	CONSTRAINT "webhooks_name" CHECK (length(btrim("webhooks"."name")) between 1 and 200)
);
--> statement-breakpoint
CREATE TABLE "invitations" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"role" text NOT NULL,
	"sha256" "bytea" NOT NULL,
	"invited_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"accepted_at" timestamp with time zone,
	"accepted_by" uuid,
	"revoked_at" timestamp with time zone,
	CONSTRAINT "invitations_role" CHECK ("invitations"."role" in ('reader', 'curator', 'admin')),
	CONSTRAINT "invitations_email_shape" CHECK ("invitations"."email" ~ '^[^@[:space:]]+@[^@[:space:]]+$' and length("invitations"."email") <= 320),
	CONSTRAINT "invitations_ends" CHECK (num_nonnulls("invitations"."accepted_at", "invitations"."revoked_at") <= 1)
);
--> statement-breakpoint
CREATE TABLE "password_resets" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"user_id" uuid NOT NULL,
	"sha256" "bytea" NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"used_at" timestamp with time zone
);
--> statement-breakpoint
ALTER TABLE "amendments" DROP CONSTRAINT "amendments_state";--> statement-breakpoint
-- A returned amendment is a draft again.
UPDATE "amendments" SET "state" = 'draft' WHERE "state" = 'returned';--> statement-breakpoint
ALTER TABLE "api_keys" ADD COLUMN "made_with" uuid;--> statement-breakpoint
ALTER TABLE "users" ADD COLUMN "version" integer DEFAULT 1 NOT NULL;--> statement-breakpoint
ALTER TABLE "amendments" ADD COLUMN "published_in" integer;--> statement-breakpoint
ALTER TABLE "amendment_authors" ADD CONSTRAINT "amendment_authors_amendment_id_amendments_id_fk" FOREIGN KEY ("amendment_id") REFERENCES "public"."amendments"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "amendment_authors" ADD CONSTRAINT "amendment_authors_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "amendment_changes" ADD CONSTRAINT "amendment_changes_amendment_id_amendments_id_fk" FOREIGN KEY ("amendment_id") REFERENCES "public"."amendments"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "amendment_changes" ADD CONSTRAINT "amendment_changes_author_users_id_fk" FOREIGN KEY ("author") REFERENCES "public"."users"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comments" ADD CONSTRAINT "comments_amendment_id_amendments_id_fk" FOREIGN KEY ("amendment_id") REFERENCES "public"."amendments"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comments" ADD CONSTRAINT "comments_change_id_amendment_changes_id_fk" FOREIGN KEY ("change_id") REFERENCES "public"."amendment_changes"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comments" ADD CONSTRAINT "comments_author_users_id_fk" FOREIGN KEY ("author") REFERENCES "public"."users"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comments" ADD CONSTRAINT "comments_resolved_by_users_id_fk" FOREIGN KEY ("resolved_by") REFERENCES "public"."users"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reviews" ADD CONSTRAINT "reviews_amendment_id_amendments_id_fk" FOREIGN KEY ("amendment_id") REFERENCES "public"."amendments"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reviews" ADD CONSTRAINT "reviews_asked_by_users_id_fk" FOREIGN KEY ("asked_by") REFERENCES "public"."users"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reviews" ADD CONSTRAINT "reviews_closed_by_users_id_fk" FOREIGN KEY ("closed_by") REFERENCES "public"."users"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "import_rows" ADD CONSTRAINT "import_rows_import_id_imports_id_fk" FOREIGN KEY ("import_id") REFERENCES "public"."imports"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "imports" ADD CONSTRAINT "imports_amendment_id_amendments_id_fk" FOREIGN KEY ("amendment_id") REFERENCES "public"."amendments"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "imports" ADD CONSTRAINT "imports_author_users_id_fk" FOREIGN KEY ("author") REFERENCES "public"."users"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "follows" ADD CONSTRAINT "follows_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mails" ADD CONSTRAINT "mails_event_id_notice_events_id_fk" FOREIGN KEY ("event_id") REFERENCES "public"."notice_events"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "webhook_deliveries" ADD CONSTRAINT "webhook_deliveries_webhook_id_webhooks_id_fk" FOREIGN KEY ("webhook_id") REFERENCES "public"."webhooks"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "webhook_deliveries" ADD CONSTRAINT "webhook_deliveries_event_id_notice_events_id_fk" FOREIGN KEY ("event_id") REFERENCES "public"."notice_events"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "webhooks" ADD CONSTRAINT "webhooks_owner_users_id_fk" FOREIGN KEY ("owner") REFERENCES "public"."users"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_invited_by_users_id_fk" FOREIGN KEY ("invited_by") REFERENCES "public"."users"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_accepted_by_users_id_fk" FOREIGN KEY ("accepted_by") REFERENCES "public"."users"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "password_resets" ADD CONSTRAINT "password_resets_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "amendment_changes_order" ON "amendment_changes" USING btree ("amendment_id","position");--> statement-breakpoint
CREATE INDEX "comments_of_amendment" ON "comments" USING btree ("amendment_id","created_at");--> statement-breakpoint
CREATE UNIQUE INDEX "reviews_one_open" ON "reviews" USING btree ("amendment_id") WHERE "reviews"."outcome" is null;--> statement-breakpoint
CREATE INDEX "reviews_of_amendment" ON "reviews" USING btree ("amendment_id","asked_at");--> statement-breakpoint
CREATE INDEX "edition_changes_edition" ON "edition_changes" USING btree ("edition","sequence");--> statement-breakpoint
CREATE INDEX "edition_changes_subject" ON "edition_changes" USING btree ("kind","subject");--> statement-breakpoint
CREATE INDEX "import_rows_verdict" ON "import_rows" USING btree ("import_id","verdict","row");--> statement-breakpoint
CREATE INDEX "imports_of_amendment" ON "imports" USING btree ("amendment_id","created_at");--> statement-breakpoint
CREATE UNIQUE INDEX "follows_once" ON "follows" USING btree ("user_id","kind","subject");--> statement-breakpoint
CREATE INDEX "follows_subject" ON "follows" USING btree ("kind","subject");--> statement-breakpoint
CREATE INDEX "mails_waiting" ON "mails" USING btree ("next_attempt_at") WHERE "mails"."sent_at" is null and "mails"."failed_at" is null;--> statement-breakpoint
CREATE UNIQUE INDEX "mails_once" ON "mails" USING btree ("event_id","recipient");--> statement-breakpoint
CREATE INDEX "notice_events_waiting" ON "notice_events" USING btree ("id") WHERE "notice_events"."spread_at" is null;--> statement-breakpoint
CREATE INDEX "webhook_deliveries_waiting" ON "webhook_deliveries" USING btree ("next_attempt_at") WHERE "webhook_deliveries"."delivered_at" is null and "webhook_deliveries"."failed_at" is null;--> statement-breakpoint
CREATE INDEX "webhook_deliveries_log" ON "webhook_deliveries" USING btree ("webhook_id","created_at");--> statement-breakpoint
CREATE UNIQUE INDEX "webhook_deliveries_once" ON "webhook_deliveries" USING btree ("webhook_id","event_id");--> statement-breakpoint
CREATE UNIQUE INDEX "invitations_sha256" ON "invitations" USING btree ("sha256");--> statement-breakpoint
CREATE UNIQUE INDEX "invitations_open" ON "invitations" USING btree (lower("email")) WHERE "invitations"."accepted_at" is null and "invitations"."revoked_at" is null;--> statement-breakpoint
CREATE UNIQUE INDEX "password_resets_sha256" ON "password_resets" USING btree ("sha256");--> statement-breakpoint
CREATE INDEX "password_resets_user" ON "password_resets" USING btree ("user_id","created_at");--> statement-breakpoint
ALTER TABLE "api_keys" ADD CONSTRAINT "api_keys_made_with_api_keys_id_fk" FOREIGN KEY ("made_with") REFERENCES "public"."api_keys"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "amendments_of_state" ON "amendments" USING btree ("state");--> statement-breakpoint
ALTER TABLE "users" ADD CONSTRAINT "users_version" CHECK ("users"."version" >= 1);--> statement-breakpoint
ALTER TABLE "amendments" ADD CONSTRAINT "amendments_published" CHECK (("amendments"."state" = 'published') = ("amendments"."published_in" is not null));--> statement-breakpoint
ALTER TABLE "amendments" ADD CONSTRAINT "amendments_state" CHECK ("amendments"."state" in ('draft', 'in_review', 'accepted', 'published', 'withdrawn'));