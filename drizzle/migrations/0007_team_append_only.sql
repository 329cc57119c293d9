CREATE TRIGGER "accepted_record_append_only" BEFORE UPDATE OR DELETE OR TRUNCATE ON "accepted_record"
  FOR EACH STATEMENT EXECUTE FUNCTION "refuse_change"();
--> statement-breakpoint
CREATE TRIGGER "baseline_append_only" BEFORE UPDATE OR DELETE OR TRUNCATE ON "baseline"
  FOR EACH STATEMENT EXECUTE FUNCTION "refuse_change"();
--> statement-breakpoint
ALTER TABLE "accepted_record" ENABLE ALWAYS TRIGGER "accepted_record_append_only";
--> statement-breakpoint
ALTER TABLE "baseline" ENABLE ALWAYS TRIGGER "baseline_append_only";
