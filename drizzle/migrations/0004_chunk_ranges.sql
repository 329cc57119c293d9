ALTER TABLE "run_chunk" ADD COLUMN "limits_not_met" integer[] DEFAULT '{}' NOT NULL;--> statement-breakpoint
ALTER TABLE "run_chunk" ADD COLUMN "least_results" double precision[] DEFAULT '{}' NOT NULL;--> statement-breakpoint
ALTER TABLE "run_chunk" ADD COLUMN "greatest_results" double precision[] DEFAULT '{}' NOT NULL;--> statement-breakpoint
ALTER TABLE "run_chunk" ALTER COLUMN "least_results" DROP DEFAULT;--> statement-breakpoint
ALTER TABLE "run_chunk" ALTER COLUMN "greatest_results" DROP DEFAULT;
