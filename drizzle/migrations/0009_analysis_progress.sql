ALTER TABLE "analysis" ADD COLUMN "progress" jsonb;--> statement-breakpoint
ALTER TABLE "analysis" ADD COLUMN "checkpoint" jsonb;