DROP TABLE "analysis_part" CASCADE;--> statement-breakpoint
ALTER TABLE "analysis" DROP COLUMN "parts";