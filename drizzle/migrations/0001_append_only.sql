-- What drizzle's schema language does not express: append-only tables, storage, partitions.

CREATE FUNCTION "refuse_change"() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION '% is append-only: % is refused', TG_TABLE_NAME, TG_OP USING ERRCODE = 'restrict_violation';
END
$$;
--> statement-breakpoint
CREATE TRIGGER "audit_entry_append_only" BEFORE UPDATE OR DELETE OR TRUNCATE ON "audit_entry"
  FOR EACH STATEMENT EXECUTE FUNCTION "refuse_change"();
--> statement-breakpoint
CREATE TRIGGER "study_revision_append_only" BEFORE UPDATE OR DELETE OR TRUNCATE ON "study_revision"
  FOR EACH STATEMENT EXECUTE FUNCTION "refuse_change"();
--> statement-breakpoint
-- Fires for triggers disabled by session_replication_role too: a superuser's replica session does not slip past.
ALTER TABLE "audit_entry" ENABLE ALWAYS TRIGGER "audit_entry_append_only";
--> statement-breakpoint
ALTER TABLE "study_revision" ENABLE ALWAYS TRIGGER "study_revision_append_only";
--> statement-breakpoint
-- Doubles of results do not compress; EXTERNAL spares the attempt at every write and the unpacking at every read.
ALTER TABLE "point_column" ALTER COLUMN "vals" SET STORAGE EXTERNAL;
--> statement-breakpoint
-- The month's partition of point_column, made when the first run of the month is planned. A month of results leaves
-- by DROP TABLE of its partition.
CREATE FUNCTION "ensure_point_column_partition"(day date) RETURNS text LANGUAGE plpgsql AS $$
DECLARE
  first_day date := date_trunc('month', day)::date;
  partition_name text := 'point_column_' || to_char(first_day, 'YYYY_MM');
BEGIN
  IF to_regclass(partition_name) IS NULL THEN
    PERFORM pg_advisory_xact_lock(hashtext('ensure_point_column_partition'));
    IF to_regclass(partition_name) IS NULL THEN
      EXECUTE format(
        'CREATE TABLE %I PARTITION OF point_column FOR VALUES FROM (%L) TO (%L)',
        partition_name, first_day, (first_day + interval '1 month')::date);
    END IF;
  END IF;
  RETURN partition_name;
END
$$;
--> statement-breakpoint
-- Ad-hoc queries: one row per point and column.
CREATE VIEW "point_value" AS
  SELECT pc.run_id, pc."column", rc.first_point + v.ordinality - 1 AS point, v.value
  FROM point_column pc
  JOIN run_chunk rc ON rc.run_id = pc.run_id AND rc.chunk = pc.chunk
  CROSS JOIN LATERAL unnest(pc.vals) WITH ORDINALITY AS v(value, ordinality);
