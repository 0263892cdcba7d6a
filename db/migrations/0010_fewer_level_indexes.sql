-- An edition of 100 000 levels in less time: a revision of a level stood in five indexes, and the one against twins made a text of fourteen
-- values for each.
--
-- One open revision a level, and the revisions of a level by its id, are one index: among the published rows of a level at most one has no
-- end, and no two end at the same edition (0005 says why that is all that is wanted).
DROP INDEX "level_revisions_identity";
--> statement-breakpoint
DROP INDEX level_revisions_one_per_edition;
--> statement-breakpoint
CREATE UNIQUE INDEX level_revisions_one_per_edition ON level_revisions (level_id, published_until) NULLS NOT DISTINCT WHERE published_from IS NOT NULL;
--> statement-breakpoint
-- Two active levels of one species never agree in all that names them; what neither has is the same.
DROP INDEX level_revisions_no_twins;
--> statement-breakpoint
CREATE UNIQUE INDEX level_revisions_no_twins ON level_revisions (
    species_id, configuration, two_j, parity, coupling, label, two_s, l, two_k, core_two_s, core_l, core_two_j, l_outer, outer_two_j, repeat_index
  ) NULLS NOT DISTINCT WHERE published_from IS NOT NULL AND published_until IS NULL AND status = 'active';
--> statement-breakpoint
-- As 0006 made it, but for the changes that are not of an amendment of this edition, which are looked for in two joins and not one by one.
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
  SELECT min(t.change_id::text) AS change_id INTO wrong FROM touched t
    LEFT JOIN amendment_changes c ON c.id = t.change_id AND c.amendment_id = t.amendment_id
    LEFT JOIN amendments a ON a.id = t.amendment_id AND a.published_in = t.edition
    WHERE c.id IS NULL OR a.id IS NULL;
  IF wrong.change_id IS NOT NULL THEN
    RAISE EXCEPTION 'edition_changes: change % is not of an amendment published in this edition', wrong.change_id
      USING ERRCODE = '23503', TABLE = 'edition_changes', CONSTRAINT = 'edition_changes_change';
  END IF;
  INSERT INTO editions_begun (number) VALUES (newest + 1) ON CONFLICT DO NOTHING;
  RETURN NULL;
END $$;
