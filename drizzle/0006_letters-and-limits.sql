CREATE TYPE "public"."batch_letters" AS ENUM('off', 'each', 'daily');--> statement-breakpoint
CREATE TYPE "public"."letter_state" AS ENUM('waiting', 'claimed', 'handing-in', 'sent', 'unsure', 'given-up', 'expired');--> statement-breakpoint
CREATE TABLE "letters" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"address" text NOT NULL,
	"subject" text NOT NULL,
	"text" text,
	"html" text,
	"state" "letter_state" DEFAULT 'waiting' NOT NULL,
	"attempt" smallint DEFAULT 0 NOT NULL,
	"reason" text,
	"about" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"claimed_at" timestamp with time zone,
	"ended_at" timestamp with time zone,
	CONSTRAINT "letters_ended_has_no_body" CHECK (("letters"."ended_at" is null) = ("letters"."text" is not null) and ("letters"."text" is null) = ("letters"."html" is null))
);
--> statement-breakpoint
ALTER TABLE "batches" ADD COLUMN "finished_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "batches" ADD COLUMN "told_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "batches" ADD COLUMN "pinned_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "batches" ADD COLUMN "pinned_by" uuid;--> statement-breakpoint
ALTER TABLE "batches" ADD COLUMN "removal_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "batches" ADD COLUMN "removed_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "memberships" ADD COLUMN "limits" jsonb DEFAULT '{}'::jsonb NOT NULL;--> statement-breakpoint
ALTER TABLE "results" ADD COLUMN "made_for" uuid;--> statement-breakpoint
ALTER TABLE "results" ADD COLUMN "bytes" integer DEFAULT 0 NOT NULL;--> statement-breakpoint
ALTER TABLE "teams" ADD COLUMN "limits" jsonb DEFAULT '{}'::jsonb NOT NULL;--> statement-breakpoint
ALTER TABLE "teams" ADD COLUMN "storage_warned_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "teams" ADD COLUMN "deletion_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "users" ADD COLUMN "batch_letters" "batch_letters" DEFAULT 'each' NOT NULL;--> statement-breakpoint
CREATE INDEX "letters_open" ON "letters" USING btree ("created_at") WHERE "letters"."ended_at" is null;--> statement-breakpoint
CREATE INDEX "letters_state_ended" ON "letters" USING btree ("state","ended_at");--> statement-breakpoint
CREATE INDEX "letters_about" ON "letters" USING btree ("about") WHERE "letters"."about" is not null;--> statement-breakpoint
ALTER TABLE "batches" ADD CONSTRAINT "batches_pinned_by_users_id_fk" FOREIGN KEY ("pinned_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "results" ADD CONSTRAINT "results_made_for_users_id_fk" FOREIGN KEY ("made_for") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "batches_untold" ON "batches" USING btree ("finished_at") WHERE "batches"."finished_at" is not null and "batches"."told_at" is null;--> statement-breakpoint
CREATE INDEX "batches_kept" ON "batches" USING btree ("team_id","finished_at") WHERE "batches"."removed_at" is null and "batches"."pinned_at" is null;--> statement-breakpoint
CREATE INDEX "results_stored" ON "results" USING btree ("team_id","made_for","bytes");--> statement-breakpoint
CREATE INDEX "teams_deletion" ON "teams" USING btree ("deletion_at") WHERE "teams"."deletion_at" is not null;