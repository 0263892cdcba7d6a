-- An edition of 100 000 levels in seconds: foreign keys ask once a row, and took half of the time. Where what is named can be
-- neither deleted nor renamed (triggers refuse it to everyone), seeing to it once a statement is as good.

CREATE TABLE "editions_begun" (
	"number" integer PRIMARY KEY NOT NULL
);
--> statement-breakpoint
ALTER TABLE "level_revisions" DROP CONSTRAINT "level_revisions_amendment_id_amendments_id_fk";
--> statement-breakpoint
ALTER TABLE "level_revisions" DROP CONSTRAINT "level_revisions_energy_source_sources_key_fk";
--> statement-breakpoint
ALTER TABLE "level_revisions" DROP CONSTRAINT "level_revisions_level";
--> statement-breakpoint
ALTER TABLE "levels" DROP CONSTRAINT "levels_species_id_species_id_fk";
--> statement-breakpoint
ALTER TABLE "levels" DROP CONSTRAINT "levels_with_species";
--> statement-breakpoint
INSERT INTO editions_begun (number) SELECT number FROM editions;
--> statement-breakpoint
-- Deferred: an edition is begun before its row is written. RESTRICT: an edition is never deleted.
ALTER TABLE editions_begun ADD CONSTRAINT editions_begun_published FOREIGN KEY (number) REFERENCES editions (number) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED;
--> statement-breakpoint
CREATE TRIGGER editions_begun_keep BEFORE UPDATE OR DELETE ON editions_begun FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER editions_begun_no_truncate BEFORE TRUNCATE ON editions_begun FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
GRANT SELECT, INSERT ON editions_begun TO lodeterm_app;
--> statement-breakpoint
ALTER TABLE species_revisions DROP CONSTRAINT species_revisions_from_edition, DROP CONSTRAINT species_revisions_until_edition;
--> statement-breakpoint
ALTER TABLE isotope_revisions DROP CONSTRAINT isotope_revisions_from_edition, DROP CONSTRAINT isotope_revisions_until_edition;
--> statement-breakpoint
ALTER TABLE source_revisions DROP CONSTRAINT source_revisions_from_edition, DROP CONSTRAINT source_revisions_until_edition;
--> statement-breakpoint
ALTER TABLE level_revisions DROP CONSTRAINT level_revisions_from_edition, DROP CONSTRAINT level_revisions_until_edition;
--> statement-breakpoint
ALTER TABLE measured_g_revisions DROP CONSTRAINT measured_g_revisions_from_edition, DROP CONSTRAINT measured_g_revisions_until_edition;
--> statement-breakpoint
ALTER TABLE hyperfine_revisions DROP CONSTRAINT hyperfine_revisions_from_edition, DROP CONSTRAINT hyperfine_revisions_until_edition;
--> statement-breakpoint
-- Once a statement: revisions enter and leave at the edition that is being made (its row is not there yet), and no other; that
-- it is published in the end is what editions_begun sees to. One publisher at a time: the lock lasts to the end of the transaction.
CREATE OR REPLACE FUNCTION guard_revisions() RETURNS trigger LANGUAGE plpgsql AS $$
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
  INSERT INTO editions_begun (number) VALUES (newest + 1) ON CONFLICT DO NOTHING;
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE FUNCTION guard_level_species() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  wrong record;
BEGIN
  SELECT t.id, t.species_id INTO wrong FROM touched t WHERE NOT EXISTS (SELECT FROM species s WHERE s.id = t.species_id) LIMIT 1;
  IF FOUND THEN
    RAISE EXCEPTION 'level %: there is no species %', wrong.id, wrong.species_id USING ERRCODE = '23503', TABLE = 'levels', CONSTRAINT = 'levels_species';
  END IF;
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE TRIGGER levels_species AFTER INSERT ON levels REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_level_species();
--> statement-breakpoint
CREATE FUNCTION guard_level_references() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  wrong record;
BEGIN
  SELECT t.level_id, t.species_id INTO wrong FROM touched t
    WHERE NOT EXISTS (SELECT FROM levels l WHERE l.id = t.level_id AND l.species_id = t.species_id) LIMIT 1;
  IF FOUND THEN
    RAISE EXCEPTION 'level_revisions: there is no level % of species %', wrong.level_id, wrong.species_id
      USING ERRCODE = '23503', TABLE = 'level_revisions', CONSTRAINT = 'level_revisions_level';
  END IF;
  SELECT t.level_id, t.energy_source INTO wrong FROM touched t WHERE NOT EXISTS (SELECT FROM sources s WHERE s.key = t.energy_source) LIMIT 1;
  IF FOUND THEN
    RAISE EXCEPTION 'level_revisions: there is no source % (level %)', wrong.energy_source, wrong.level_id
      USING ERRCODE = '23503', TABLE = 'level_revisions', CONSTRAINT = 'level_revisions_energy_source';
  END IF;
  SELECT t.level_id, t.amendment_id INTO wrong FROM touched t
    WHERE t.amendment_id IS NOT NULL AND NOT EXISTS (SELECT FROM amendments a WHERE a.id = t.amendment_id) LIMIT 1;
  IF FOUND THEN
    RAISE EXCEPTION 'level_revisions: there is no amendment % (level %)', wrong.amendment_id, wrong.level_id
      USING ERRCODE = '23503', TABLE = 'level_revisions', CONSTRAINT = 'level_revisions_amendment';
  END IF;
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE TRIGGER level_revisions_references_insert AFTER INSERT ON level_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_level_references();
--> statement-breakpoint
CREATE TRIGGER level_revisions_references_update AFTER UPDATE ON level_revisions REFERENCING NEW TABLE AS touched FOR EACH STATEMENT EXECUTE FUNCTION guard_level_references();
--> statement-breakpoint
ALTER TABLE edition_changes DROP CONSTRAINT edition_changes_edition, DROP CONSTRAINT edition_changes_amendment, DROP CONSTRAINT edition_changes_change;
--> statement-breakpoint
-- The feed tells of changes of amendments that are published in the edition being made: from then on they stay as they are.
CREATE OR REPLACE FUNCTION guard_edition_change() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  newest integer;
  wrong record;
BEGIN
  PERFORM pg_advisory_xact_lock(7272741);
  SELECT coalesce(max(number), 0) INTO newest FROM editions;
  SELECT t.edition INTO wrong FROM touched t WHERE t.edition <> newest + 1 LIMIT 1;
  IF FOUND THEN
    RAISE EXCEPTION 'edition_changes: edition % cannot be written to; the next edition is %', wrong.edition, newest + 1 USING ERRCODE = 'LD001';
  END IF;
  SELECT t.change_id INTO wrong FROM touched t WHERE NOT EXISTS (
    SELECT FROM amendment_changes c JOIN amendments a ON a.id = c.amendment_id
    WHERE c.id = t.change_id AND a.id = t.amendment_id AND a.published_in = t.edition) LIMIT 1;
  IF FOUND THEN
    RAISE EXCEPTION 'edition_changes: change % is not of an amendment published in this edition', wrong.change_id
      USING ERRCODE = '23503', TABLE = 'edition_changes', CONSTRAINT = 'edition_changes_change';
  END IF;
  INSERT INTO editions_begun (number) VALUES (newest + 1) ON CONFLICT DO NOTHING;
  RETURN NULL;
END $$;
--> statement-breakpoint
-- An amendment keeps its identity, since revisions and the feed name it.
CREATE OR REPLACE FUNCTION guard_amendment() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' THEN
    RAISE EXCEPTION 'amendment %: amendments are withdrawn, never deleted', OLD.id USING ERRCODE = 'LD001';
  END IF;
  IF OLD.state IN ('published', 'withdrawn') OR NEW.id <> OLD.id THEN
    RAISE EXCEPTION 'amendment %: it is % and stays as it is', OLD.id, OLD.state USING ERRCODE = 'LD001';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
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
  IF OLD.published_until IS NOT NULL OR NEW.published_until IS NULL OR NEW.published_until <= OLD.published_from OR unended *<> OLD THEN
    RAISE EXCEPTION '% %: of a published revision only published_until changes, once, from null to the next edition', TG_TABLE_NAME, OLD.id
      USING ERRCODE = 'LD001';
  END IF;
  RETURN NEW;
END $$;
