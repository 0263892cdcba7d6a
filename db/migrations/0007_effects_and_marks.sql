ALTER TABLE "idempotency_keys" ADD COLUMN "committed" boolean DEFAULT false NOT NULL;--> statement-breakpoint
ALTER TABLE "users" ADD COLUMN "closed_by_setting" boolean DEFAULT false NOT NULL;--> statement-breakpoint
-- Demo accounts that are closed and that nobody has closed were closed by the setting.
UPDATE users u SET closed_by_setting = true WHERE u.demo AND NOT u.active
  AND NOT EXISTS (SELECT FROM audit_events a WHERE a.action = 'person.close' AND a.subject_kind = 'user' AND a.subject_id = u.id::text);
