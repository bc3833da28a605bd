CREATE TYPE "public"."letter_purpose" AS ENUM('confirm-address', 'reset-password');--> statement-breakpoint
CREATE TYPE "public"."role" AS ENUM('reader', 'chemist', 'modeler', 'lead');--> statement-breakpoint
CREATE TYPE "public"."batch_source" AS ENUM('paste', 'draw', 'upload');--> statement-breakpoint
CREATE TYPE "public"."structure_format" AS ENUM('smiles', 'molfile');--> statement-breakpoint
CREATE TYPE "public"."task_kind" AS ENUM('conformers', 'scan', 'conjugation', 'strain');--> statement-breakpoint
CREATE TYPE "public"."task_state" AS ENUM('queued', 'running', 'done', 'failed', 'cancelled');--> statement-breakpoint
CREATE TYPE "public"."verdict" AS ENUM('ready', 'warning', 'error');--> statement-breakpoint
CREATE TABLE "batches" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"created_by" uuid,
	"name" text NOT NULL,
	"source" "batch_source" NOT NULL,
	"reading" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"plan" jsonb,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"submitted_at" timestamp with time zone,
	CONSTRAINT "batches_submitted_has_plan" CHECK ("batches"."submitted_at" is null or "batches"."plan" is not null)
);
--> statement-breakpoint
CREATE TABLE "conformers" (
	"result_id" uuid NOT NULL,
	"rank" integer NOT NULL,
	"energy" double precision NOT NULL,
	"relative" double precision NOT NULL,
	"degeneracy" integer NOT NULL,
	"population" double precision NOT NULL,
	"rmsd_to_lowest" double precision NOT NULL,
	"coordinates" "bytea" NOT NULL,
	CONSTRAINT "conformers_result_id_rank_pk" PRIMARY KEY("result_id","rank")
);
--> statement-breakpoint
CREATE TABLE "entries" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"batch_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"line" integer,
	"name" text NOT NULL,
	"input" text,
	"molecule_id" uuid,
	"verdict" "verdict" NOT NULL,
	"remarks" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"chosen_bonds" jsonb DEFAULT '[]'::jsonb NOT NULL,
	CONSTRAINT "entries_batch_position" UNIQUE("batch_id","position"),
	CONSTRAINT "entries_bad_row_has_no_molecule" CHECK (("entries"."verdict" = 'error') = ("entries"."molecule_id" is null))
);
--> statement-breakpoint
CREATE TABLE "events" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"team_id" uuid,
	"actor_id" uuid,
	"action" text NOT NULL,
	"subject" text NOT NULL,
	"details" jsonb DEFAULT '{}'::jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "letter_tokens" (
	"token_hash" text PRIMARY KEY NOT NULL,
	"user_id" uuid NOT NULL,
	"purpose" "letter_purpose" NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"used_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "memberships" (
	"team_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"role" "role" NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "memberships_team_id_user_id_pk" PRIMARY KEY("team_id","user_id")
);
--> statement-breakpoint
CREATE TABLE "molecules" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"digest" text NOT NULL,
	"smiles" text NOT NULL,
	"formula" text NOT NULL,
	"atom_count" smallint NOT NULL,
	"rotors" jsonb NOT NULL,
	"format" "structure_format" NOT NULL,
	"structure" text NOT NULL,
	"has_geometry" boolean NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "molecules_team_digest" UNIQUE("team_id","digest")
);
--> statement-breakpoint
CREATE TABLE "profile_curves" (
	"profile_id" uuid NOT NULL,
	"model" text NOT NULL,
	"relaxed" boolean NOT NULL,
	"energies" double precision[] NOT NULL,
	"reached" double precision[] NOT NULL,
	"coordinates" "bytea" NOT NULL,
	"stationary" jsonb NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "profile_curves_profile_id_model_relaxed_pk" PRIMARY KEY("profile_id","model","relaxed")
);
--> statement-breakpoint
CREATE TABLE "profiles" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"result_id" uuid NOT NULL,
	"torsion" integer[] NOT NULL,
	"angles" double precision[] NOT NULL
);
--> statement-breakpoint
CREATE TABLE "rate_buckets" (
	"key" text PRIMARY KEY NOT NULL,
	"tokens" double precision NOT NULL,
	"refilled_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "results" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"molecule_id" uuid NOT NULL,
	"kind" "task_kind" NOT NULL,
	"settings" jsonb NOT NULL,
	"settings_digest" text NOT NULL,
	"engine_version" text NOT NULL,
	"model" text NOT NULL,
	"molfile" text NOT NULL,
	"details" jsonb NOT NULL,
	"warnings" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"seconds" double precision NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "results_identity" UNIQUE("molecule_id","kind","settings_digest","engine_version")
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"user_id" uuid NOT NULL,
	"user_agent" text DEFAULT '' NOT NULL,
	"address" text DEFAULT '' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"seen_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"revoked_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "tasks" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"batch_id" uuid NOT NULL,
	"entry_id" uuid NOT NULL,
	"kind" "task_kind" NOT NULL,
	"settings" jsonb NOT NULL,
	"state" "task_state" DEFAULT 'queued' NOT NULL,
	"attempt" smallint DEFAULT 0 NOT NULL,
	"progress" real DEFAULT 0 NOT NULL,
	"stage" text DEFAULT '' NOT NULL,
	"worker" text,
	"error" jsonb,
	"result_id" uuid,
	"reused" boolean DEFAULT false NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"started_at" timestamp with time zone,
	"beat_at" timestamp with time zone,
	"finished_at" timestamp with time zone,
	CONSTRAINT "tasks_progress_range" CHECK ("tasks"."progress" between 0 and 1),
	CONSTRAINT "tasks_failed_says_why" CHECK (("tasks"."state" = 'failed') = ("tasks"."error" is not null))
);
--> statement-breakpoint
CREATE TABLE "teams" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "users" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"password_hash" text NOT NULL,
	"confirmed_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "users_email_unique" UNIQUE("email"),
	CONSTRAINT "users_email_lower_case" CHECK ("users"."email" = lower("users"."email"))
);
--> statement-breakpoint
ALTER TABLE "batches" ADD CONSTRAINT "batches_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "batches" ADD CONSTRAINT "batches_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "conformers" ADD CONSTRAINT "conformers_result_id_results_id_fk" FOREIGN KEY ("result_id") REFERENCES "public"."results"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_batch_id_batches_id_fk" FOREIGN KEY ("batch_id") REFERENCES "public"."batches"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_molecule_id_molecules_id_fk" FOREIGN KEY ("molecule_id") REFERENCES "public"."molecules"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "events" ADD CONSTRAINT "events_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "events" ADD CONSTRAINT "events_actor_id_users_id_fk" FOREIGN KEY ("actor_id") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "letter_tokens" ADD CONSTRAINT "letter_tokens_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "molecules" ADD CONSTRAINT "molecules_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "profile_curves" ADD CONSTRAINT "profile_curves_profile_id_profiles_id_fk" FOREIGN KEY ("profile_id") REFERENCES "public"."profiles"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "profiles" ADD CONSTRAINT "profiles_result_id_results_id_fk" FOREIGN KEY ("result_id") REFERENCES "public"."results"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "results" ADD CONSTRAINT "results_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "results" ADD CONSTRAINT "results_molecule_id_molecules_id_fk" FOREIGN KEY ("molecule_id") REFERENCES "public"."molecules"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "tasks" ADD CONSTRAINT "tasks_batch_id_batches_id_fk" FOREIGN KEY ("batch_id") REFERENCES "public"."batches"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "tasks" ADD CONSTRAINT "tasks_entry_id_entries_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entries"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "tasks" ADD CONSTRAINT "tasks_result_id_results_id_fk" FOREIGN KEY ("result_id") REFERENCES "public"."results"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "batches_team_submitted" ON "batches" USING btree ("team_id","submitted_at");--> statement-breakpoint
CREATE INDEX "batches_drafts" ON "batches" USING btree ("created_at") WHERE "batches"."submitted_at" is null;--> statement-breakpoint
CREATE INDEX "entries_molecule" ON "entries" USING btree ("molecule_id");--> statement-breakpoint
CREATE INDEX "events_team_at" ON "events" USING btree ("team_id","at");--> statement-breakpoint
CREATE INDEX "letter_tokens_user" ON "letter_tokens" USING btree ("user_id","purpose");--> statement-breakpoint
CREATE INDEX "memberships_user" ON "memberships" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "molecules_team_smiles" ON "molecules" USING btree ("team_id","smiles");--> statement-breakpoint
CREATE INDEX "molecules_team_created" ON "molecules" USING btree ("team_id","created_at");--> statement-breakpoint
CREATE INDEX "profiles_result" ON "profiles" USING btree ("result_id");--> statement-breakpoint
CREATE INDEX "results_team_created" ON "results" USING btree ("team_id","created_at");--> statement-breakpoint
CREATE INDEX "sessions_user" ON "sessions" USING btree ("user_id","seen_at");--> statement-breakpoint
CREATE INDEX "tasks_batch_state" ON "tasks" USING btree ("batch_id","state");--> statement-breakpoint
CREATE INDEX "tasks_entry" ON "tasks" USING btree ("entry_id");--> statement-breakpoint
CREATE INDEX "tasks_result" ON "tasks" USING btree ("result_id");--> statement-breakpoint
CREATE INDEX "tasks_running" ON "tasks" USING btree ("beat_at") WHERE "tasks"."state" = 'running';--> statement-breakpoint
CREATE INDEX "tasks_queued" ON "tasks" USING btree ("created_at") WHERE "tasks"."state" = 'queued';