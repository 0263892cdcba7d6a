-- What the schema alone cannot say of curation: what has been published stays as it was reviewed, who may do what, and the
-- message that there is something to tell.

-- Deferred, since the edition's row is written last in its transaction. RESTRICT: neither editions nor published changes go.
ALTER TABLE amendments ADD CONSTRAINT amendments_published_in_edition FOREIGN KEY (published_in) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED;
--> statement-breakpoint
ALTER TABLE edition_changes
  ADD CONSTRAINT edition_changes_edition FOREIGN KEY (edition) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED,
  ADD CONSTRAINT edition_changes_amendment FOREIGN KEY (amendment_id) REFERENCES amendments (id) ON DELETE RESTRICT,
  ADD CONSTRAINT edition_changes_change FOREIGN KEY (change_id) REFERENCES amendment_changes (id) ON DELETE RESTRICT;
--> statement-breakpoint
-- SET NULL: changes outlive the report of the import that brought them. RESTRICT: a thread hangs on its first comment.
ALTER TABLE amendment_changes ADD CONSTRAINT amendment_changes_import FOREIGN KEY (import_id) REFERENCES imports (id) ON DELETE SET NULL;
--> statement-breakpoint
ALTER TABLE comments ADD CONSTRAINT comments_thread FOREIGN KEY (thread) REFERENCES comments (id) ON DELETE RESTRICT;
--> statement-breakpoint
-- An amendment that is published or withdrawn is a record: neither it nor its changes are written to again.
CREATE FUNCTION guard_amendment() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' THEN
    RAISE EXCEPTION 'amendment %: amendments are withdrawn, never deleted', OLD.id USING ERRCODE = 'LD001';
  END IF;
  IF OLD.state IN ('published', 'withdrawn') THEN
    RAISE EXCEPTION 'amendment %: it is % and stays as it is', OLD.id, OLD.state USING ERRCODE = 'LD001';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER amendments_guard BEFORE UPDATE OR DELETE ON amendments FOR EACH ROW EXECUTE FUNCTION guard_amendment();
--> statement-breakpoint
CREATE TRIGGER amendments_no_truncate BEFORE TRUNCATE ON amendments FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE FUNCTION guard_changes() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  closed record;
BEGIN
  SELECT a.id, a.state INTO closed FROM amendments a
    WHERE a.id IN (SELECT DISTINCT amendment_id FROM touched) AND a.state IN ('published', 'withdrawn') LIMIT 1;
  IF FOUND THEN
    RAISE EXCEPTION 'amendment %: it is %, and its changes stay as they are', closed.id, closed.state USING ERRCODE = 'LD001';
  END IF;
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE TRIGGER amendment_changes_guard_insert AFTER INSERT ON amendment_changes REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_changes();
--> statement-breakpoint
CREATE TRIGGER amendment_changes_guard_update AFTER UPDATE ON amendment_changes REFERENCING OLD TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_changes();
--> statement-breakpoint
CREATE TRIGGER amendment_changes_guard_delete AFTER DELETE ON amendment_changes REFERENCING OLD TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_changes();
--> statement-breakpoint
CREATE TRIGGER amendment_changes_no_truncate BEFORE TRUNCATE ON amendment_changes FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
-- The feed is read by its sequence: rows are added in the transaction of an edition, one publisher at a time, and stay.
CREATE FUNCTION guard_edition_change() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  newest integer;
  wrong integer;
BEGIN
  PERFORM pg_advisory_xact_lock(7272741);
  SELECT coalesce(max(number), 0) INTO newest FROM editions;
  SELECT edition INTO wrong FROM touched WHERE edition <> newest + 1 LIMIT 1;
  IF FOUND THEN
    RAISE EXCEPTION 'edition_changes: edition % cannot be written to; the next edition is %', wrong, newest + 1 USING ERRCODE = 'LD001';
  END IF;
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE TRIGGER edition_changes_guard AFTER INSERT ON edition_changes REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_edition_change();
--> statement-breakpoint
CREATE TRIGGER edition_changes_keep BEFORE UPDATE OR DELETE ON edition_changes FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER edition_changes_no_truncate BEFORE TRUNCATE ON edition_changes FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
-- Ordinals go one way.
CREATE FUNCTION guard_ordinal_counter() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF NEW.next <= OLD.next OR NEW.species_id <> OLD.species_id THEN
    RAISE EXCEPTION 'ordinal_counters %: an ordinal is never given twice', OLD.species_id USING ERRCODE = 'LD001';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER ordinal_counters_guard BEFORE UPDATE ON ordinal_counters FOR EACH ROW EXECUTE FUNCTION guard_ordinal_counter();
--> statement-breakpoint
-- Wakes whoever spreads notices, mails and deliveries.
CREATE FUNCTION tell_notices() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  PERFORM pg_notify('lodeterm_notices', '');
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE TRIGGER notice_events_tell AFTER INSERT ON notice_events FOR EACH STATEMENT EXECUTE FUNCTION tell_notices();
--> statement-breakpoint
GRANT SELECT, INSERT ON amendment_authors, edition_changes TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON ordinal_counters, reviews, imports, invitations, password_resets, webhooks TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE, DELETE ON amendment_changes, import_rows, follows, notice_events, mails, webhook_deliveries TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE (resolved_at, resolved_by) ON comments TO lodeterm_app;
