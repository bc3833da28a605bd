CREATE TYPE "public"."energy_unit" AS ENUM('kcal/mol', 'kJ/mol');--> statement-breakpoint
ALTER TYPE "public"."batch_source" ADD VALUE 'program';--> statement-breakpoint
ALTER TYPE "public"."task_kind" ADD VALUE 'map' BEFORE 'conjugation';--> statement-breakpoint
CREATE TABLE "api_tokens" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"user_id" uuid NOT NULL,
	"team_id" uuid NOT NULL,
	"name" text NOT NULL,
	"token_hash" text NOT NULL,
	"scopes" text[] NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"used_at" timestamp with time zone,
	CONSTRAINT "api_tokens_token_hash_unique" UNIQUE("token_hash")
);
--> statement-breakpoint
CREATE TABLE "idempotent_answers" (
	"user_id" uuid NOT NULL,
	"team_id" uuid NOT NULL,
	"key" text NOT NULL,
	"request_digest" text NOT NULL,
	"answer" jsonb,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "idempotent_answers_team_id_user_id_key_pk" PRIMARY KEY("team_id","user_id","key")
);
--> statement-breakpoint
CREATE TABLE "invitations" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"email" text NOT NULL,
	"role" "role" NOT NULL,
	"token_hash" text NOT NULL,
	"invited_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"accepted_at" timestamp with time zone,
	CONSTRAINT "invitations_token_hash_unique" UNIQUE("token_hash"),
	CONSTRAINT "invitations_email_lower_case" CHECK ("invitations"."email" = lower("invitations"."email"))
);
--> statement-breakpoint
CREATE TABLE "maps" (
	"result_id" uuid PRIMARY KEY NOT NULL,
	"torsions" jsonb NOT NULL,
	"step" double precision NOT NULL,
	"per_axis" smallint NOT NULL,
	"energies" jsonb NOT NULL,
	"coordinates" "bytea" NOT NULL,
	"minima" jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "note_mentions" (
	"note_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	CONSTRAINT "note_mentions_note_id_user_id_pk" PRIMARY KEY("note_id","user_id")
);
--> statement-breakpoint
CREATE TABLE "notes" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"molecule_id" uuid NOT NULL,
	"parent_id" uuid,
	"author_id" uuid,
	"text" text NOT NULL,
	"bond" integer[],
	"result_id" uuid,
	"rank" integer,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"edited_at" timestamp with time zone,
	"resolved_at" timestamp with time zone,
	"resolved_by" uuid,
	CONSTRAINT "notes_bond_has_two_atoms" CHECK (cardinality("notes"."bond") = 2),
	CONSTRAINT "notes_replies_are_plain" CHECK ("notes"."parent_id" is null or ("notes"."resolved_at" is null and "notes"."bond" is null and "notes"."rank" is null))
);
--> statement-breakpoint
CREATE TABLE "partner_links" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"batch_id" uuid,
	"molecule_id" uuid,
	"token_hash" text NOT NULL,
	"password_hash" text,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"revoked_at" timestamp with time zone,
	"downloads" integer DEFAULT 0 NOT NULL,
	CONSTRAINT "partner_links_token_hash_unique" UNIQUE("token_hash"),
	CONSTRAINT "partner_links_one_subject" CHECK (("partner_links"."batch_id" is null) <> ("partner_links"."molecule_id" is null))
);
--> statement-breakpoint
DROP INDEX "events_team_at";--> statement-breakpoint
DROP INDEX "molecules_team_created";--> statement-breakpoint
ALTER TABLE "entries" ADD COLUMN "map_bonds" jsonb DEFAULT '[]'::jsonb NOT NULL;--> statement-breakpoint
ALTER TABLE "events" ADD COLUMN "address" text DEFAULT '' NOT NULL;--> statement-breakpoint
ALTER TABLE "molecules" ADD COLUMN "fingerprint" bit(512);--> statement-breakpoint
ALTER TABLE "users" ADD COLUMN "energy_unit" "energy_unit" DEFAULT 'kcal/mol' NOT NULL;--> statement-breakpoint
ALTER TABLE "api_tokens" ADD CONSTRAINT "api_tokens_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "api_tokens" ADD CONSTRAINT "api_tokens_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "idempotent_answers" ADD CONSTRAINT "idempotent_answers_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "idempotent_answers" ADD CONSTRAINT "idempotent_answers_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_invited_by_users_id_fk" FOREIGN KEY ("invited_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "maps" ADD CONSTRAINT "maps_result_id_results_id_fk" FOREIGN KEY ("result_id") REFERENCES "public"."results"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "note_mentions" ADD CONSTRAINT "note_mentions_note_id_notes_id_fk" FOREIGN KEY ("note_id") REFERENCES "public"."notes"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "note_mentions" ADD CONSTRAINT "note_mentions_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notes" ADD CONSTRAINT "notes_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notes" ADD CONSTRAINT "notes_molecule_id_molecules_id_fk" FOREIGN KEY ("molecule_id") REFERENCES "public"."molecules"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notes" ADD CONSTRAINT "notes_parent_id_notes_id_fk" FOREIGN KEY ("parent_id") REFERENCES "public"."notes"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notes" ADD CONSTRAINT "notes_author_id_users_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notes" ADD CONSTRAINT "notes_result_id_results_id_fk" FOREIGN KEY ("result_id") REFERENCES "public"."results"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notes" ADD CONSTRAINT "notes_resolved_by_users_id_fk" FOREIGN KEY ("resolved_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "partner_links" ADD CONSTRAINT "partner_links_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "partner_links" ADD CONSTRAINT "partner_links_batch_id_batches_id_fk" FOREIGN KEY ("batch_id") REFERENCES "public"."batches"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "partner_links" ADD CONSTRAINT "partner_links_molecule_id_molecules_id_fk" FOREIGN KEY ("molecule_id") REFERENCES "public"."molecules"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "partner_links" ADD CONSTRAINT "partner_links_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "api_tokens_user" ON "api_tokens" USING btree ("user_id","created_at");--> statement-breakpoint
CREATE INDEX "idempotent_answers_created" ON "idempotent_answers" USING btree ("created_at");--> statement-breakpoint
CREATE INDEX "invitations_team" ON "invitations" USING btree ("team_id","created_at");--> statement-breakpoint
CREATE INDEX "note_mentions_user" ON "note_mentions" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "notes_molecule" ON "notes" USING btree ("molecule_id","created_at");--> statement-breakpoint
CREATE INDEX "notes_parent" ON "notes" USING btree ("parent_id");--> statement-breakpoint
CREATE INDEX "notes_team_open" ON "notes" USING btree ("team_id","created_at") WHERE "notes"."parent_id" is null and "notes"."resolved_at" is null;--> statement-breakpoint
CREATE INDEX "partner_links_team" ON "partner_links" USING btree ("team_id","created_at");--> statement-breakpoint
CREATE INDEX "entries_remarked" ON "entries" USING btree ("batch_id","verdict") WHERE "entries"."verdict" <> 'ready';--> statement-breakpoint
CREATE INDEX "entries_name_parts" ON "entries" USING gin ("name" gin_trgm_ops);--> statement-breakpoint
CREATE INDEX "events_team" ON "events" USING btree ("team_id","id");--> statement-breakpoint
CREATE INDEX "molecules_smiles_parts" ON "molecules" USING gin ("smiles" gin_trgm_ops);--> statement-breakpoint
CREATE INDEX "molecules_without_fingerprint" ON "molecules" USING btree ("created_at") WHERE "molecules"."fingerprint" is null;--> statement-breakpoint
CREATE INDEX "tasks_done" ON "tasks" USING btree ("batch_id","finished_at") WHERE "tasks"."state" = 'done';--> statement-breakpoint
CREATE INDEX "molecules_team_created" ON "molecules" USING btree ("team_id","created_at","id");