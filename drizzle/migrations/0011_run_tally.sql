CREATE TABLE "run_tally" (
	"run_id" uuid PRIMARY KEY NOT NULL,
	"points" integer DEFAULT 0 NOT NULL,
	"meeting_limits" integer DEFAULT 0 NOT NULL,
	"outcomes" integer[] DEFAULT '{}' NOT NULL,
	"best_point" integer,
	"best_objective" double precision,
	"best_results" double precision[]
);
--> statement-breakpoint
ALTER TABLE "run_tally" ADD CONSTRAINT "run_tally_run_id_run_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."run"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
INSERT INTO "run_tally" ("run_id", "points", "meeting_limits", "outcomes", "best_point", "best_objective", "best_results")
SELECT r.id, coalesce(s.points, 0), coalesce(s.meeting_limits, 0), coalesce(t.outcomes, '{}'), b.best_point, b.best_objective, b.best_results
FROM run r
LEFT JOIN LATERAL (
  SELECT sum(points)::int AS points, sum(meeting_limits)::int AS meeting_limits FROM run_chunk WHERE run_id = r.id) s ON true
LEFT JOIN LATERAL (
  SELECT array_agg(n ORDER BY outcome)::int[] AS outcomes FROM (
    SELECT outcome, sum(count) AS n FROM run_chunk, unnest(outcomes) WITH ORDINALITY AS o(count, outcome)
    WHERE run_id = r.id GROUP BY outcome) u) t ON true
LEFT JOIN LATERAL (
  SELECT best_point, best_objective, best_results FROM run_chunk
  WHERE run_id = r.id AND best_point IS NOT NULL ORDER BY best_objective, best_point LIMIT 1) b ON true;
