CREATE TABLE "analysis" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"kind" text NOT NULL,
	"study_id" uuid NOT NULL,
	"revision_id" uuid NOT NULL,
	"run_id" uuid,
	"request" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"engine_version" text NOT NULL,
	"state" text DEFAULT 'queued' NOT NULL,
	"parts" integer NOT NULL,
	"result" jsonb,
	"fault" text,
	"requested_by" uuid,
	"asked_at" timestamp with time zone DEFAULT now() NOT NULL,
	"started_at" timestamp with time zone,
	"ended_at" timestamp with time zone,
	CONSTRAINT "analysis_state" CHECK ("analysis"."state" in ('queued', 'running', 'done', 'cancelled', 'failed'))
);
--> statement-breakpoint
CREATE TABLE "analysis_part" (
	"analysis_id" uuid NOT NULL,
	"part" integer NOT NULL,
	"result" jsonb NOT NULL,
	"stored_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "bench_data" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"project_id" uuid NOT NULL,
	"name" text NOT NULL,
	"file_name" text NOT NULL,
	"original" "bytea" NOT NULL,
	"mapping" jsonb NOT NULL,
	"points" jsonb NOT NULL,
	"fit" jsonb,
	"uploaded_by" uuid NOT NULL,
	"uploaded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "mail_outbox" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"happening" text NOT NULL,
	"person_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"letter" jsonb NOT NULL,
	"queued_at" timestamp with time zone DEFAULT now() NOT NULL,
	"due_at" timestamp with time zone DEFAULT now() NOT NULL,
	"attempts" integer DEFAULT 0 NOT NULL,
	"sent_at" timestamp with time zone,
	"given_up_at" timestamp with time zone,
	"fault" text,
	CONSTRAINT "mail_outbox_happening_unique" UNIQUE("happening")
);
--> statement-breakpoint
CREATE TABLE "notice" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"person_id" uuid NOT NULL,
	"project_id" uuid,
	"kind" text NOT NULL,
	"sentence" text NOT NULL,
	"href" text NOT NULL,
	"happening" text NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"read_at" timestamp with time zone,
	CONSTRAINT "notice_happening_unique" UNIQUE("happening")
);
--> statement-breakpoint
CREATE TABLE "role_group" (
	"group" text PRIMARY KEY NOT NULL,
	"role" text NOT NULL,
	CONSTRAINT "role_group_role" CHECK ("role_group"."role" in ('administrator', 'lead', 'engineer', 'analyst'))
);
--> statement-breakpoint
CREATE TABLE "accepted_record" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"number" integer NOT NULL,
	"project_id" uuid NOT NULL,
	"study_id" uuid NOT NULL,
	"revision_id" uuid NOT NULL,
	"run_id" uuid NOT NULL,
	"review_id" uuid NOT NULL,
	"content" jsonb NOT NULL,
	"content_hash" text NOT NULL,
	"accepted_by" uuid NOT NULL,
	"accepted_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "baseline" (
	"project_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"record_id" uuid NOT NULL,
	"set_by" uuid,
	"set_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "baseline_project_id_number_pk" PRIMARY KEY("project_id","number")
);
--> statement-breakpoint
CREATE TABLE "comment" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"project_id" uuid NOT NULL,
	"study_id" uuid,
	"comparison_id" uuid,
	"body" text NOT NULL,
	"written_by" uuid NOT NULL,
	"written_at" timestamp with time zone DEFAULT now() NOT NULL,
	"withdrawn_at" timestamp with time zone,
	CONSTRAINT "comment_subject" CHECK (num_nonnulls("comment"."study_id", "comment"."comparison_id") = 1)
);
--> statement-breakpoint
CREATE TABLE "comparison" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"project_id" uuid NOT NULL,
	"name" text NOT NULL,
	"query" text NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "review" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"project_id" uuid NOT NULL,
	"study_id" uuid NOT NULL,
	"run_id" uuid NOT NULL,
	"point" integer,
	"note" text DEFAULT '' NOT NULL,
	"state" text DEFAULT 'asked' NOT NULL,
	"asked_by" uuid NOT NULL,
	"asked_at" timestamp with time zone DEFAULT now() NOT NULL,
	"answered_by" uuid,
	"answered_at" timestamp with time zone,
	"reason" text DEFAULT '' NOT NULL,
	CONSTRAINT "review_state" CHECK ("review"."state" in ('asked', 'accepted', 'returned', 'withdrawn')),
	CONSTRAINT "review_answered" CHECK (("review"."state" = 'asked') = ("review"."answered_at" is null))
);
--> statement-breakpoint
CREATE TABLE "saved_view" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"study_id" uuid NOT NULL,
	"name" text NOT NULL,
	"query" text NOT NULL,
	"shared" boolean DEFAULT true NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
ALTER TABLE "person" ADD COLUMN "groups" text[] DEFAULT '{}' NOT NULL;--> statement-breakpoint
ALTER TABLE "person" ADD COLUMN "mail_run_minutes" integer DEFAULT 5;--> statement-breakpoint
ALTER TABLE "person" ADD COLUMN "mail_reviews" boolean DEFAULT true NOT NULL;--> statement-breakpoint
ALTER TABLE "person" ADD COLUMN "mail_mentions" boolean DEFAULT true NOT NULL;--> statement-breakpoint
ALTER TABLE "person" ADD COLUMN "removed_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "analysis" ADD CONSTRAINT "analysis_study_id_study_id_fk" FOREIGN KEY ("study_id") REFERENCES "public"."study"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "analysis" ADD CONSTRAINT "analysis_revision_id_study_revision_id_fk" FOREIGN KEY ("revision_id") REFERENCES "public"."study_revision"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "analysis" ADD CONSTRAINT "analysis_run_id_run_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."run"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "analysis" ADD CONSTRAINT "analysis_requested_by_person_id_fk" FOREIGN KEY ("requested_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "analysis_part" ADD CONSTRAINT "analysis_part_analysis_id_analysis_id_fk" FOREIGN KEY ("analysis_id") REFERENCES "public"."analysis"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "bench_data" ADD CONSTRAINT "bench_data_project_id_project_id_fk" FOREIGN KEY ("project_id") REFERENCES "public"."project"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "bench_data" ADD CONSTRAINT "bench_data_uploaded_by_person_id_fk" FOREIGN KEY ("uploaded_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mail_outbox" ADD CONSTRAINT "mail_outbox_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notice" ADD CONSTRAINT "notice_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notice" ADD CONSTRAINT "notice_project_id_project_id_fk" FOREIGN KEY ("project_id") REFERENCES "public"."project"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "accepted_record" ADD CONSTRAINT "accepted_record_project_id_project_id_fk" FOREIGN KEY ("project_id") REFERENCES "public"."project"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "accepted_record" ADD CONSTRAINT "accepted_record_study_id_study_id_fk" FOREIGN KEY ("study_id") REFERENCES "public"."study"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "accepted_record" ADD CONSTRAINT "accepted_record_revision_id_study_revision_id_fk" FOREIGN KEY ("revision_id") REFERENCES "public"."study_revision"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "accepted_record" ADD CONSTRAINT "accepted_record_run_id_run_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."run"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "accepted_record" ADD CONSTRAINT "accepted_record_review_id_review_id_fk" FOREIGN KEY ("review_id") REFERENCES "public"."review"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "accepted_record" ADD CONSTRAINT "accepted_record_accepted_by_person_id_fk" FOREIGN KEY ("accepted_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "baseline" ADD CONSTRAINT "baseline_project_id_project_id_fk" FOREIGN KEY ("project_id") REFERENCES "public"."project"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "baseline" ADD CONSTRAINT "baseline_record_id_accepted_record_id_fk" FOREIGN KEY ("record_id") REFERENCES "public"."accepted_record"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "baseline" ADD CONSTRAINT "baseline_set_by_person_id_fk" FOREIGN KEY ("set_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comment" ADD CONSTRAINT "comment_project_id_project_id_fk" FOREIGN KEY ("project_id") REFERENCES "public"."project"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comment" ADD CONSTRAINT "comment_study_id_study_id_fk" FOREIGN KEY ("study_id") REFERENCES "public"."study"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comment" ADD CONSTRAINT "comment_comparison_id_comparison_id_fk" FOREIGN KEY ("comparison_id") REFERENCES "public"."comparison"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comment" ADD CONSTRAINT "comment_written_by_person_id_fk" FOREIGN KEY ("written_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comparison" ADD CONSTRAINT "comparison_project_id_project_id_fk" FOREIGN KEY ("project_id") REFERENCES "public"."project"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comparison" ADD CONSTRAINT "comparison_created_by_person_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "review" ADD CONSTRAINT "review_project_id_project_id_fk" FOREIGN KEY ("project_id") REFERENCES "public"."project"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "review" ADD CONSTRAINT "review_study_id_study_id_fk" FOREIGN KEY ("study_id") REFERENCES "public"."study"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "review" ADD CONSTRAINT "review_run_id_run_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."run"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "review" ADD CONSTRAINT "review_asked_by_person_id_fk" FOREIGN KEY ("asked_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "review" ADD CONSTRAINT "review_answered_by_person_id_fk" FOREIGN KEY ("answered_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "saved_view" ADD CONSTRAINT "saved_view_study_id_study_id_fk" FOREIGN KEY ("study_id") REFERENCES "public"."study"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "saved_view" ADD CONSTRAINT "saved_view_created_by_person_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "analysis_study" ON "analysis" USING btree ("study_id","asked_at");--> statement-breakpoint
CREATE UNIQUE INDEX "analysis_part_once" ON "analysis_part" USING btree ("analysis_id","part");--> statement-breakpoint
CREATE UNIQUE INDEX "bench_data_name" ON "bench_data" USING btree ("project_id",lower("name"));--> statement-breakpoint
CREATE INDEX "mail_outbox_due" ON "mail_outbox" USING btree ("due_at") WHERE "mail_outbox"."sent_at" is null and "mail_outbox"."given_up_at" is null;--> statement-breakpoint
CREATE INDEX "notice_person" ON "notice" USING btree ("person_id","at");--> statement-breakpoint
CREATE UNIQUE INDEX "accepted_record_number" ON "accepted_record" USING btree ("project_id","number");--> statement-breakpoint
CREATE UNIQUE INDEX "accepted_record_review" ON "accepted_record" USING btree ("review_id");--> statement-breakpoint
CREATE INDEX "accepted_record_study" ON "accepted_record" USING btree ("study_id");--> statement-breakpoint
CREATE INDEX "comment_study" ON "comment" USING btree ("study_id","written_at");--> statement-breakpoint
CREATE INDEX "comment_comparison" ON "comment" USING btree ("comparison_id","written_at");--> statement-breakpoint
CREATE UNIQUE INDEX "comparison_name" ON "comparison" USING btree ("project_id",lower("name"));--> statement-breakpoint
CREATE INDEX "review_project" ON "review" USING btree ("project_id","asked_at");--> statement-breakpoint
CREATE INDEX "review_study" ON "review" USING btree ("study_id","asked_at");--> statement-breakpoint
CREATE UNIQUE INDEX "review_open" ON "review" USING btree ("study_id") WHERE "review"."state" = 'asked';--> statement-breakpoint
CREATE UNIQUE INDEX "saved_view_name" ON "saved_view" USING btree ("study_id",lower("name"));