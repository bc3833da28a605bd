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
DROP INDEX "molecules_team_created";--> statement-breakpoint
ALTER TABLE "molecules" ADD COLUMN "fingerprint" bit(512);--> statement-breakpoint
ALTER TABLE "note_mentions" ADD CONSTRAINT "note_mentions_note_id_notes_id_fk" FOREIGN KEY ("note_id") REFERENCES "public"."notes"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "note_mentions" ADD CONSTRAINT "note_mentions_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notes" ADD CONSTRAINT "notes_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notes" ADD CONSTRAINT "notes_molecule_id_molecules_id_fk" FOREIGN KEY ("molecule_id") REFERENCES "public"."molecules"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notes" ADD CONSTRAINT "notes_parent_id_notes_id_fk" FOREIGN KEY ("parent_id") REFERENCES "public"."notes"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notes" ADD CONSTRAINT "notes_author_id_users_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notes" ADD CONSTRAINT "notes_result_id_results_id_fk" FOREIGN KEY ("result_id") REFERENCES "public"."results"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notes" ADD CONSTRAINT "notes_resolved_by_users_id_fk" FOREIGN KEY ("resolved_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "note_mentions_user" ON "note_mentions" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "notes_molecule" ON "notes" USING btree ("molecule_id","created_at");--> statement-breakpoint
CREATE INDEX "notes_parent" ON "notes" USING btree ("parent_id");--> statement-breakpoint
CREATE INDEX "notes_team_open" ON "notes" USING btree ("team_id","created_at") WHERE "notes"."parent_id" is null and "notes"."resolved_at" is null;--> statement-breakpoint
CREATE INDEX "entries_name_parts" ON "entries" USING gin ("name" gin_trgm_ops);--> statement-breakpoint
CREATE INDEX "molecules_smiles_parts" ON "molecules" USING gin ("smiles" gin_trgm_ops);--> statement-breakpoint
CREATE INDEX "molecules_without_fingerprint" ON "molecules" USING btree ("created_at") WHERE "molecules"."fingerprint" is null;--> statement-breakpoint
CREATE INDEX "molecules_team_created" ON "molecules" USING btree ("team_id","created_at","id");