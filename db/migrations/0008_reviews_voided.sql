ALTER TABLE "comments" ADD COLUMN "version" integer DEFAULT 1 NOT NULL;--> statement-breakpoint
ALTER TABLE "reviews" ADD COLUMN "voided_by" uuid;--> statement-breakpoint
ALTER TABLE "reviews" ADD COLUMN "voided_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "reviews" ADD CONSTRAINT "reviews_voided_by_users_id_fk" FOREIGN KEY ("voided_by") REFERENCES "public"."users"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reviews" ADD CONSTRAINT "reviews_voided" CHECK (num_nonnulls("reviews"."voided_by", "reviews"."voided_at") in (0, 2) and ("reviews"."voided_at" is null or "reviews"."outcome" = 'accepted'));--> statement-breakpoint
-- The application may raise the version of a comment with its resolution, and nothing else of it.
GRANT UPDATE (version) ON comments TO lodeterm_app;
