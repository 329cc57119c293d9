CREATE TABLE "app_setting" (
	"key" text PRIMARY KEY NOT NULL,
	"value" jsonb NOT NULL,
	"changed_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "audit_entry" (
	"id" bigint PRIMARY KEY GENERATED ALWAYS AS IDENTITY (sequence name "audit_entry_id_seq" INCREMENT BY 1 MINVALUE 1 MAXVALUE 9223372036854775807 START WITH 1 CACHE 1),
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"person_id" uuid,
	"person_name" text NOT NULL,
	"address" text DEFAULT '' NOT NULL,
	"act" text NOT NULL,
	"subject" text NOT NULL,
	"subject_id" text NOT NULL,
	"project_id" uuid,
	"before" jsonb,
	"after" jsonb
);
--> statement-breakpoint
CREATE TABLE "auth_flow" (
	"id_hash" text PRIMARY KEY NOT NULL,
	"nonce" text NOT NULL,
	"code_verifier" text NOT NULL,
	"return_to" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "person" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"issuer" text,
	"subject" text,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"role" text,
	"units" text DEFAULT 'si' NOT NULL,
	"theme" text DEFAULT 'system' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"signed_in_at" timestamp with time zone,
	CONSTRAINT "person_role" CHECK ("person"."role" in ('administrator', 'lead', 'engineer', 'analyst')),
	CONSTRAINT "person_units" CHECK ("person"."units" in ('si', 'us')),
	CONSTRAINT "person_theme" CHECK ("person"."theme" in ('system', 'light', 'dark')),
	CONSTRAINT "person_identity" CHECK (("person"."issuer" is null) = ("person"."subject" is null))
);
--> statement-breakpoint
CREATE TABLE "session" (
	"id_hash" text PRIMARY KEY NOT NULL,
	"public_id" uuid DEFAULT gen_random_uuid() NOT NULL,
	"person_id" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"seen_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"revoked_at" timestamp with time zone,
	"user_agent" text DEFAULT '' NOT NULL,
	"id_token" text,
	CONSTRAINT "session_public_id_unique" UNIQUE("public_id")
);
--> statement-breakpoint
CREATE TABLE "project" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text NOT NULL,
	"description" text DEFAULT '' NOT NULL,
	"invented" boolean DEFAULT false NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "project_member" (
	"project_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"added_by" uuid,
	"added_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "project_member_project_id_person_id_pk" PRIMARY KEY("project_id","person_id")
);
--> statement-breakpoint
CREATE TABLE "point_column" (
	"planned_on" date NOT NULL,
	"run_id" uuid NOT NULL,
	"column" text NOT NULL,
	"chunk" integer NOT NULL,
	"vals" double precision[] NOT NULL,
	CONSTRAINT "point_column_run_id_column_chunk_planned_on_pk" PRIMARY KEY("run_id","column","chunk","planned_on")
) PARTITION BY RANGE ("planned_on");
--> statement-breakpoint
CREATE TABLE "point_result" (
	"run_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"point" integer NOT NULL,
	"engine_version" text NOT NULL,
	"case" jsonb NOT NULL,
	"result" jsonb NOT NULL,
	"stored_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "point_result_run_id_kind_point_pk" PRIMARY KEY("run_id","kind","point")
);
--> statement-breakpoint
CREATE TABLE "run" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"study_id" uuid NOT NULL,
	"revision_id" uuid NOT NULL,
	"engine_version" text NOT NULL,
	"points" integer NOT NULL,
	"chunk_points" integer NOT NULL,
	"state" text DEFAULT 'queued' NOT NULL,
	"requested_by" uuid,
	"planned_at" timestamp with time zone DEFAULT now() NOT NULL,
	"planned_on" date DEFAULT (now() at time zone 'utc')::date NOT NULL,
	"started_at" timestamp with time zone,
	"ended_at" timestamp with time zone,
	"cancel_requested_at" timestamp with time zone,
	"content_hash" text,
	"best_point" integer,
	"refined" jsonb,
	"fault" text,
	CONSTRAINT "run_state" CHECK ("run"."state" in ('queued', 'running', 'done', 'cancelled', 'failed')),
	CONSTRAINT "run_points" CHECK ("run"."points" between 1 and 1000000),
	CONSTRAINT "run_chunk_points" CHECK ("run"."chunk_points" >= 1)
);
--> statement-breakpoint
CREATE TABLE "run_chunk" (
	"run_id" uuid NOT NULL,
	"chunk" integer NOT NULL,
	"first_point" integer NOT NULL,
	"points" integer NOT NULL,
	"best_point" integer,
	"best_objective" double precision,
	"content_hash" text,
	"compute_seconds" double precision,
	"stored_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "run_chunk_run_id_chunk_pk" PRIMARY KEY("run_id","chunk")
);
--> statement-breakpoint
CREATE TABLE "study" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"project_id" uuid NOT NULL,
	"name" text NOT NULL,
	"origin" text DEFAULT '' NOT NULL,
	"invented" boolean DEFAULT false NOT NULL,
	"seed_key" text,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"changed_at" timestamp with time zone DEFAULT now() NOT NULL,
	"archived_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "study_draft" (
	"study_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"definition" jsonb NOT NULL,
	"base_revision" integer NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"saved_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "study_draft_study_id_person_id_pk" PRIMARY KEY("study_id","person_id")
);
--> statement-breakpoint
CREATE TABLE "study_revision" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"study_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"definition" jsonb NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "study_revision_number_from_one" CHECK ("study_revision"."number" >= 1)
);
--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "project" ADD CONSTRAINT "project_created_by_person_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "project_member" ADD CONSTRAINT "project_member_project_id_project_id_fk" FOREIGN KEY ("project_id") REFERENCES "public"."project"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "project_member" ADD CONSTRAINT "project_member_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "project_member" ADD CONSTRAINT "project_member_added_by_person_id_fk" FOREIGN KEY ("added_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "point_result" ADD CONSTRAINT "point_result_run_id_run_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."run"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run" ADD CONSTRAINT "run_study_id_study_id_fk" FOREIGN KEY ("study_id") REFERENCES "public"."study"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run" ADD CONSTRAINT "run_revision_id_study_revision_id_fk" FOREIGN KEY ("revision_id") REFERENCES "public"."study_revision"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run" ADD CONSTRAINT "run_requested_by_person_id_fk" FOREIGN KEY ("requested_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run_chunk" ADD CONSTRAINT "run_chunk_run_id_run_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."run"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "study" ADD CONSTRAINT "study_project_id_project_id_fk" FOREIGN KEY ("project_id") REFERENCES "public"."project"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "study" ADD CONSTRAINT "study_created_by_person_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "study_draft" ADD CONSTRAINT "study_draft_study_id_study_id_fk" FOREIGN KEY ("study_id") REFERENCES "public"."study"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "study_draft" ADD CONSTRAINT "study_draft_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "study_revision" ADD CONSTRAINT "study_revision_study_id_study_id_fk" FOREIGN KEY ("study_id") REFERENCES "public"."study"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "study_revision" ADD CONSTRAINT "study_revision_created_by_person_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "audit_entry_project" ON "audit_entry" USING btree ("project_id","id");--> statement-breakpoint
CREATE INDEX "audit_entry_subject" ON "audit_entry" USING btree ("subject","subject_id");--> statement-breakpoint
CREATE INDEX "auth_flow_expires" ON "auth_flow" USING btree ("expires_at");--> statement-breakpoint
CREATE UNIQUE INDEX "person_issuer_subject" ON "person" USING btree ("issuer","subject");--> statement-breakpoint
CREATE UNIQUE INDEX "person_invited_email" ON "person" USING btree (lower("email")) WHERE "person"."subject" is null;--> statement-breakpoint
CREATE INDEX "person_email" ON "person" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "session_person" ON "session" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "session_expires" ON "session" USING btree ("expires_at");--> statement-breakpoint
CREATE UNIQUE INDEX "project_name" ON "project" USING btree (lower("name"));--> statement-breakpoint
CREATE INDEX "project_member_person" ON "project_member" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "run_study_planned" ON "run" USING btree ("study_id","planned_at");--> statement-breakpoint
CREATE INDEX "study_project_changed" ON "study" USING btree ("project_id","changed_at");--> statement-breakpoint
CREATE UNIQUE INDEX "study_seed_key" ON "study" USING btree ("project_id","seed_key") WHERE "study"."seed_key" is not null;--> statement-breakpoint
CREATE UNIQUE INDEX "study_revision_number" ON "study_revision" USING btree ("study_id","number");