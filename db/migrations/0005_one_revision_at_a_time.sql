-- An edition of 100 000 levels in seconds: exclusion over ranges of editions costs half a millisecond a row, and guards that
-- ask for the newest edition once a row cost as much again.
--
-- Unique indexes over the rows that are open (published, with no end yet) say the same. A revision enters the table open, at
-- the edition being made, and ends once, at an edition being made: the guards below see to both. So every row that a sealed
-- edition shows was open when that edition was sealed, and two rows that overlap in any edition were open together in it;
-- and a row that has ended did so at the edition being made or before, so that none which enters later overlaps it.
ALTER TABLE species_revisions DROP CONSTRAINT species_revisions_one_per_edition;
--> statement-breakpoint
CREATE UNIQUE INDEX species_revisions_one_per_edition ON species_revisions (species_id) WHERE published_from IS NOT NULL AND published_until IS NULL;
--> statement-breakpoint
ALTER TABLE isotope_revisions DROP CONSTRAINT isotope_revisions_one_per_edition;
--> statement-breakpoint
CREATE UNIQUE INDEX isotope_revisions_one_per_edition ON isotope_revisions (isotope_id) WHERE published_from IS NOT NULL AND published_until IS NULL;
--> statement-breakpoint
ALTER TABLE source_revisions DROP CONSTRAINT source_revisions_one_per_edition;
--> statement-breakpoint
CREATE UNIQUE INDEX source_revisions_one_per_edition ON source_revisions (source_key) WHERE published_from IS NOT NULL AND published_until IS NULL;
--> statement-breakpoint
ALTER TABLE level_revisions DROP CONSTRAINT level_revisions_one_per_edition;
--> statement-breakpoint
CREATE UNIQUE INDEX level_revisions_one_per_edition ON level_revisions (level_id) WHERE published_from IS NOT NULL AND published_until IS NULL;
--> statement-breakpoint
ALTER TABLE measured_g_revisions DROP CONSTRAINT measured_g_revisions_one_per_edition;
--> statement-breakpoint
CREATE UNIQUE INDEX measured_g_revisions_one_per_edition ON measured_g_revisions (measured_g_id) WHERE published_from IS NOT NULL AND published_until IS NULL;
--> statement-breakpoint
ALTER TABLE hyperfine_revisions DROP CONSTRAINT hyperfine_revisions_one_per_edition;
--> statement-breakpoint
CREATE UNIQUE INDEX hyperfine_revisions_one_per_edition ON hyperfine_revisions (hyperfine_id) WHERE published_from IS NOT NULL AND published_until IS NULL;
--> statement-breakpoint
-- Two active levels of one species never agree in all that names them.
ALTER TABLE level_revisions DROP CONSTRAINT level_revisions_no_twins;
--> statement-breakpoint
CREATE UNIQUE INDEX level_revisions_no_twins ON level_revisions (
    species_id,
    configuration,
    (coupling || ' ' || coalesce(label, '') || ' ' || parity || ' ' || coalesce(two_s::text, '') || ',' || coalesce(l::text, '') || ','
      || coalesce(two_k::text, '') || ',' || coalesce(core_two_s::text, '') || ',' || coalesce(core_l::text, '') || ','
      || coalesce(core_two_j::text, '') || ',' || coalesce(l_outer::text, '') || ',' || coalesce(outer_two_j::text, '') || ',' || two_j::text
      || ',' || coalesce(repeat_index, 0)::text)
  ) WHERE published_from IS NOT NULL AND published_until IS NULL AND status = 'active';
--> statement-breakpoint
-- Row by row: what is published stays as it is. A draft is published open, never with its end already set.
CREATE OR REPLACE FUNCTION guard_revision() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  unended record;
BEGIN
  IF TG_OP = 'DELETE' THEN
    IF OLD.published_from IS NOT NULL THEN
      RAISE EXCEPTION '% %: a published revision is never deleted', TG_TABLE_NAME, OLD.id USING ERRCODE = 'LD001';
    END IF;
    RETURN OLD;
  END IF;
  IF OLD.published_from IS NULL THEN
    IF NEW.published_until IS NOT NULL THEN
      RAISE EXCEPTION '% %: a revision enters an edition before it leaves one', TG_TABLE_NAME, OLD.id USING ERRCODE = 'LD001';
    END IF;
    RETURN NEW;
  END IF;
  unended := NEW;
  unended.published_until := OLD.published_until;
  IF OLD.published_until IS NOT NULL OR NEW.published_until IS NULL OR unended *<> OLD THEN
    RAISE EXCEPTION '% %: of a published revision only published_until changes, once, from null to the next edition', TG_TABLE_NAME, OLD.id
      USING ERRCODE = 'LD001';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
-- Once a statement: revisions enter and leave at the edition that is being made (its row is not there yet), and no other.
-- One publisher at a time: the lock lasts to the end of the transaction.
CREATE FUNCTION guard_revisions() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  newest integer;
  wrong integer;
BEGIN
  PERFORM 1 FROM touched WHERE published_from IS NOT NULL LIMIT 1;
  IF NOT FOUND THEN
    RETURN NULL;
  END IF;
  PERFORM pg_advisory_xact_lock(7272741);
  SELECT coalesce(max(number), 0) INTO newest FROM editions;
  SELECT coalesce(published_until, published_from) INTO wrong FROM touched
    WHERE published_from IS NOT NULL AND coalesce(published_until, published_from) <> newest + 1 LIMIT 1;
  IF FOUND THEN
    RAISE EXCEPTION '%: edition % cannot be written to; the next edition is %', TG_TABLE_NAME, wrong, newest + 1 USING ERRCODE = 'LD001';
  END IF;
  IF TG_OP = 'INSERT' THEN
    PERFORM 1 FROM touched WHERE published_until IS NOT NULL LIMIT 1;
    IF FOUND THEN
      RAISE EXCEPTION '%: a revision enters an edition before it leaves one', TG_TABLE_NAME USING ERRCODE = 'LD001';
    END IF;
  END IF;
  RETURN NULL;
END $$;
--> statement-breakpoint
DROP TRIGGER species_revisions_guard ON species_revisions;
--> statement-breakpoint
CREATE TRIGGER species_revisions_guard BEFORE UPDATE OR DELETE ON species_revisions FOR EACH ROW EXECUTE FUNCTION guard_revision();
--> statement-breakpoint
CREATE TRIGGER species_revisions_guard_insert AFTER INSERT ON species_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_revisions();
--> statement-breakpoint
CREATE TRIGGER species_revisions_guard_update AFTER UPDATE ON species_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_revisions();
--> statement-breakpoint
DROP TRIGGER isotope_revisions_guard ON isotope_revisions;
--> statement-breakpoint
CREATE TRIGGER isotope_revisions_guard BEFORE UPDATE OR DELETE ON isotope_revisions FOR EACH ROW EXECUTE FUNCTION guard_revision();
--> statement-breakpoint
CREATE TRIGGER isotope_revisions_guard_insert AFTER INSERT ON isotope_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_revisions();
--> statement-breakpoint
CREATE TRIGGER isotope_revisions_guard_update AFTER UPDATE ON isotope_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_revisions();
--> statement-breakpoint
DROP TRIGGER source_revisions_guard ON source_revisions;
--> statement-breakpoint
CREATE TRIGGER source_revisions_guard BEFORE UPDATE OR DELETE ON source_revisions FOR EACH ROW EXECUTE FUNCTION guard_revision();
--> statement-breakpoint
CREATE TRIGGER source_revisions_guard_insert AFTER INSERT ON source_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_revisions();
--> statement-breakpoint
CREATE TRIGGER source_revisions_guard_update AFTER UPDATE ON source_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_revisions();
--> statement-breakpoint
DROP TRIGGER level_revisions_guard ON level_revisions;
--> statement-breakpoint
CREATE TRIGGER level_revisions_guard BEFORE UPDATE OR DELETE ON level_revisions FOR EACH ROW EXECUTE FUNCTION guard_revision();
--> statement-breakpoint
CREATE TRIGGER level_revisions_guard_insert AFTER INSERT ON level_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_revisions();
--> statement-breakpoint
CREATE TRIGGER level_revisions_guard_update AFTER UPDATE ON level_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_revisions();
--> statement-breakpoint
DROP TRIGGER measured_g_revisions_guard ON measured_g_revisions;
--> statement-breakpoint
CREATE TRIGGER measured_g_revisions_guard BEFORE UPDATE OR DELETE ON measured_g_revisions FOR EACH ROW EXECUTE FUNCTION guard_revision();
--> statement-breakpoint
CREATE TRIGGER measured_g_revisions_guard_insert AFTER INSERT ON measured_g_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_revisions();
--> statement-breakpoint
CREATE TRIGGER measured_g_revisions_guard_update AFTER UPDATE ON measured_g_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_revisions();
--> statement-breakpoint
DROP TRIGGER hyperfine_revisions_guard ON hyperfine_revisions;
--> statement-breakpoint
CREATE TRIGGER hyperfine_revisions_guard BEFORE UPDATE OR DELETE ON hyperfine_revisions FOR EACH ROW EXECUTE FUNCTION guard_revision();
--> statement-breakpoint
CREATE TRIGGER hyperfine_revisions_guard_insert AFTER INSERT ON hyperfine_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_revisions();
--> statement-breakpoint
CREATE TRIGGER hyperfine_revisions_guard_update AFTER UPDATE ON hyperfine_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_revisions();
