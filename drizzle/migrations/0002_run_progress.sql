CREATE TABLE "worker" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"host" text NOT NULL,
	"process_id" integer NOT NULL,
	"threads" integer NOT NULL,
	"engine_version" text NOT NULL,
	"started_at" timestamp with time zone DEFAULT now() NOT NULL,
	"seen_at" timestamp with time zone DEFAULT now() NOT NULL,
	"drain_requested_at" timestamp with time zone,
	"holding" jsonb DEFAULT '[]'::jsonb NOT NULL
);
--> statement-breakpoint
ALTER TABLE "run_chunk" ALTER COLUMN "compute_seconds" SET NOT NULL;--> statement-breakpoint
ALTER TABLE "run" ADD COLUMN "paused_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "run_chunk" ADD COLUMN "outcomes" integer[] NOT NULL;--> statement-breakpoint
ALTER TABLE "run_chunk" ADD COLUMN "meeting_limits" integer NOT NULL;--> statement-breakpoint
ALTER TABLE "run_chunk" ADD COLUMN "best_results" double precision[];--> statement-breakpoint
ALTER TABLE "run_chunk" ADD COLUMN "worker_id" uuid;--> statement-breakpoint
ALTER TABLE "run" DROP COLUMN "cancel_requested_at";--> statement-breakpoint
ALTER TABLE "run_chunk" DROP COLUMN "content_hash";