-- What the schema alone cannot say: twins within an edition, what is published stays as it is, who may do what, and
-- the messages that keep every process's cache fresh.

-- Equality of texts beside overlap of ranges in one exclusion constraint.
CREATE EXTENSION IF NOT EXISTS btree_gist;
--> statement-breakpoint
-- Editions are time: an entity has at most one revision in any edition.
ALTER TABLE species_revisions ADD CONSTRAINT species_revisions_one_per_edition
  EXCLUDE USING gist (species_id WITH =, int4range(published_from, published_until) WITH &&) WHERE (published_from IS NOT NULL);
--> statement-breakpoint
ALTER TABLE isotope_revisions ADD CONSTRAINT isotope_revisions_one_per_edition
  EXCLUDE USING gist (isotope_id WITH =, int4range(published_from, published_until) WITH &&) WHERE (published_from IS NOT NULL);
--> statement-breakpoint
ALTER TABLE source_revisions ADD CONSTRAINT source_revisions_one_per_edition
  EXCLUDE USING gist (source_key WITH =, int4range(published_from, published_until) WITH &&) WHERE (published_from IS NOT NULL);
--> statement-breakpoint
ALTER TABLE level_revisions ADD CONSTRAINT level_revisions_one_per_edition
  EXCLUDE USING gist (level_id WITH =, int4range(published_from, published_until) WITH &&) WHERE (published_from IS NOT NULL);
--> statement-breakpoint
ALTER TABLE measured_g_revisions ADD CONSTRAINT measured_g_revisions_one_per_edition
  EXCLUDE USING gist (measured_g_id WITH =, int4range(published_from, published_until) WITH &&) WHERE (published_from IS NOT NULL);
--> statement-breakpoint
ALTER TABLE hyperfine_revisions ADD CONSTRAINT hyperfine_revisions_one_per_edition
  EXCLUDE USING gist (hyperfine_id WITH =, int4range(published_from, published_until) WITH &&) WHERE (published_from IS NOT NULL);
--> statement-breakpoint
-- Two active levels of one species never agree in all that names them within an edition. Momenta that a coupling does
-- not have stand as empty places in the name.
ALTER TABLE level_revisions ADD CONSTRAINT level_revisions_no_twins
  EXCLUDE USING gist (
    species_id WITH =,
    configuration WITH =,
    (coupling || ' ' || coalesce(label, '') || ' ' || parity || ' ' || coalesce(two_s::text, '') || ',' || coalesce(l::text, '') || ','
      || coalesce(two_k::text, '') || ',' || coalesce(core_two_s::text, '') || ',' || coalesce(core_l::text, '') || ','
      || coalesce(core_two_j::text, '') || ',' || coalesce(l_outer::text, '') || ',' || coalesce(outer_two_j::text, '') || ',' || two_j::text
      || ',' || coalesce(repeat_index, 0)::text) WITH =,
    int4range(published_from, published_until) WITH &&
  ) WHERE (published_from IS NOT NULL AND status = 'active');
--> statement-breakpoint
-- Deferred: an edition's row is written after its content, with the checksum of it. RESTRICT: an edition is never deleted.
ALTER TABLE species_revisions
  ADD CONSTRAINT species_revisions_from_edition FOREIGN KEY (published_from) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED,
  ADD CONSTRAINT species_revisions_until_edition FOREIGN KEY (published_until) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED;
--> statement-breakpoint
ALTER TABLE isotope_revisions
  ADD CONSTRAINT isotope_revisions_from_edition FOREIGN KEY (published_from) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED,
  ADD CONSTRAINT isotope_revisions_until_edition FOREIGN KEY (published_until) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED;
--> statement-breakpoint
ALTER TABLE source_revisions
  ADD CONSTRAINT source_revisions_from_edition FOREIGN KEY (published_from) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED,
  ADD CONSTRAINT source_revisions_until_edition FOREIGN KEY (published_until) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED;
--> statement-breakpoint
ALTER TABLE level_revisions
  ADD CONSTRAINT level_revisions_from_edition FOREIGN KEY (published_from) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED,
  ADD CONSTRAINT level_revisions_until_edition FOREIGN KEY (published_until) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED;
--> statement-breakpoint
ALTER TABLE measured_g_revisions
  ADD CONSTRAINT measured_g_revisions_from_edition FOREIGN KEY (published_from) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED,
  ADD CONSTRAINT measured_g_revisions_until_edition FOREIGN KEY (published_until) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED;
--> statement-breakpoint
ALTER TABLE hyperfine_revisions
  ADD CONSTRAINT hyperfine_revisions_from_edition FOREIGN KEY (published_from) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED,
  ADD CONSTRAINT hyperfine_revisions_until_edition FOREIGN KEY (published_until) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED;
--> statement-breakpoint
-- A revision enters an edition only while that edition is being made (its row is not there yet), and leaves the table at
-- no time. One publisher at a time: the lock lasts to the end of the transaction, so that a second one sees the first's
-- edition and cannot slip rows into it.
CREATE FUNCTION guard_revision() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  newest integer;
  entering integer;
BEGIN
  IF TG_OP = 'DELETE' THEN
    IF OLD.published_from IS NOT NULL THEN
      RAISE EXCEPTION '% %: a published revision is never deleted', TG_TABLE_NAME, OLD.id USING ERRCODE = 'LD001';
    END IF;
    RETURN OLD;
  END IF;
  IF TG_OP = 'UPDATE' AND OLD.published_from IS NOT NULL THEN
    IF OLD.published_until IS NOT NULL OR NEW.published_until IS NULL
       OR (to_jsonb(NEW) - 'published_until') IS DISTINCT FROM (to_jsonb(OLD) - 'published_until') THEN
      RAISE EXCEPTION '% %: of a published revision only published_until changes, once, from null to the next edition', TG_TABLE_NAME, OLD.id
        USING ERRCODE = 'LD001';
    END IF;
    entering := NEW.published_until;
  ELSE
    entering := NEW.published_from;
  END IF;
  IF entering IS NOT NULL THEN
    PERFORM pg_advisory_xact_lock(7272741);
    SELECT coalesce(max(number), 0) INTO newest FROM editions;
    IF entering <> newest + 1 OR (TG_OP = 'INSERT' AND NEW.published_until IS NOT NULL) THEN
      RAISE EXCEPTION '%: edition % cannot be written to; the next edition is %', TG_TABLE_NAME, entering, newest + 1 USING ERRCODE = 'LD001';
    END IF;
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE FUNCTION guard_edition() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  newest integer;
BEGIN
  PERFORM pg_advisory_xact_lock(7272741);
  SELECT coalesce(max(number), 0) INTO newest FROM editions;
  IF NEW.number <> newest + 1 THEN
    RAISE EXCEPTION 'edition %: the next edition is %', NEW.number, newest + 1 USING ERRCODE = 'LD001';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION '%: % is refused; its rows are added and read, nothing else', TG_TABLE_NAME, TG_OP USING ERRCODE = 'LD001';
END $$;
--> statement-breakpoint
CREATE TRIGGER species_revisions_guard BEFORE INSERT OR UPDATE OR DELETE ON species_revisions FOR EACH ROW EXECUTE FUNCTION guard_revision();
--> statement-breakpoint
CREATE TRIGGER species_revisions_no_truncate BEFORE TRUNCATE ON species_revisions FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER isotope_revisions_guard BEFORE INSERT OR UPDATE OR DELETE ON isotope_revisions FOR EACH ROW EXECUTE FUNCTION guard_revision();
--> statement-breakpoint
CREATE TRIGGER isotope_revisions_no_truncate BEFORE TRUNCATE ON isotope_revisions FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER source_revisions_guard BEFORE INSERT OR UPDATE OR DELETE ON source_revisions FOR EACH ROW EXECUTE FUNCTION guard_revision();
--> statement-breakpoint
CREATE TRIGGER source_revisions_no_truncate BEFORE TRUNCATE ON source_revisions FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER level_revisions_guard BEFORE INSERT OR UPDATE OR DELETE ON level_revisions FOR EACH ROW EXECUTE FUNCTION guard_revision();
--> statement-breakpoint
CREATE TRIGGER level_revisions_no_truncate BEFORE TRUNCATE ON level_revisions FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER measured_g_revisions_guard BEFORE INSERT OR UPDATE OR DELETE ON measured_g_revisions FOR EACH ROW EXECUTE FUNCTION guard_revision();
--> statement-breakpoint
CREATE TRIGGER measured_g_revisions_no_truncate BEFORE TRUNCATE ON measured_g_revisions FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER hyperfine_revisions_guard BEFORE INSERT OR UPDATE OR DELETE ON hyperfine_revisions FOR EACH ROW EXECUTE FUNCTION guard_revision();
--> statement-breakpoint
CREATE TRIGGER hyperfine_revisions_no_truncate BEFORE TRUNCATE ON hyperfine_revisions FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER editions_in_order BEFORE INSERT ON editions FOR EACH ROW EXECUTE FUNCTION guard_edition();
--> statement-breakpoint
CREATE TRIGGER editions_keep BEFORE UPDATE OR DELETE ON editions FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER editions_no_truncate BEFORE TRUNCATE ON editions FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER audit_events_keep BEFORE UPDATE OR DELETE ON audit_events FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER audit_events_no_truncate BEFORE TRUNCATE ON audit_events FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER species_keep BEFORE UPDATE OR DELETE ON species FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER species_no_truncate BEFORE TRUNCATE ON species FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER isotopes_keep BEFORE UPDATE OR DELETE ON isotopes FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER isotopes_no_truncate BEFORE TRUNCATE ON isotopes FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER sources_keep BEFORE UPDATE OR DELETE ON sources FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER sources_no_truncate BEFORE TRUNCATE ON sources FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER levels_keep BEFORE UPDATE OR DELETE ON levels FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER levels_no_truncate BEFORE TRUNCATE ON levels FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER measured_g_keep BEFORE UPDATE OR DELETE ON measured_g FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER measured_g_no_truncate BEFORE TRUNCATE ON measured_g FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER hyperfine_constants_keep BEFORE UPDATE OR DELETE ON hyperfine_constants FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER hyperfine_constants_no_truncate BEFORE TRUNCATE ON hyperfine_constants FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
-- Tells every process that something it may hold in memory about a caller is stale. Use times alone are not worth a message.
CREATE FUNCTION tell_access() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  about uuid;
BEGIN
  IF TG_OP = 'DELETE' THEN
    about := OLD.id;
  ELSE
    about := NEW.id;
    IF TG_OP = 'UPDATE' AND (to_jsonb(NEW) - 'last_used_at' - 'last_seen_at') IS NOT DISTINCT FROM (to_jsonb(OLD) - 'last_used_at' - 'last_seen_at') THEN
      RETURN NULL;
    END IF;
  END IF;
  PERFORM pg_notify('lodeterm_access', json_build_object('kind', TG_ARGV[0], 'id', about)::text);
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE TRIGGER api_keys_tell AFTER INSERT OR UPDATE OR DELETE ON api_keys FOR EACH ROW EXECUTE FUNCTION tell_access('key');
--> statement-breakpoint
CREATE TRIGGER sessions_tell AFTER INSERT OR UPDATE OR DELETE ON sessions FOR EACH ROW EXECUTE FUNCTION tell_access('session');
--> statement-breakpoint
CREATE TRIGGER users_tell AFTER INSERT OR UPDATE OR DELETE ON users FOR EACH ROW EXECUTE FUNCTION tell_access('user');
--> statement-breakpoint
CREATE FUNCTION tell_edition() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  PERFORM pg_notify('lodeterm_editions', json_build_object('number', NEW.number)::text);
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE TRIGGER editions_tell AFTER INSERT ON editions FOR EACH ROW EXECUTE FUNCTION tell_edition();
--> statement-breakpoint
-- The application's role owns nothing. It adds and reads; it changes only what a person may change. The migrator makes the
-- role where it is missing.
GRANT USAGE ON SCHEMA public TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT ON species, isotopes, sources, levels, measured_g, hyperfine_constants, editions, audit_events TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE (published_until) ON species_revisions TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE (published_until) ON isotope_revisions TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE (published_until) ON source_revisions TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE (published_until) ON level_revisions TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE (published_until) ON measured_g_revisions TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE (published_until) ON hyperfine_revisions TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON amendments, users TO lodeterm_app;
--> statement-breakpoint
-- A key's role, secret and owner stand for its life.
GRANT SELECT, INSERT, UPDATE (name, expires_at, revoked_at, last_used_at) ON api_keys TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE (expires_at, last_seen_at, ended_at) ON sessions TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE, DELETE ON sign_in_attempts, idempotency_keys TO lodeterm_app;
--> statement-breakpoint
-- So that readiness can tell whether the migrations in the code have been run.
GRANT USAGE ON SCHEMA drizzle TO lodeterm_app;
--> statement-breakpoint
GRANT SELECT ON drizzle.__drizzle_migrations TO lodeterm_app;
