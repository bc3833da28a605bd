ALTER TYPE "public"."task_kind" ADD VALUE 'opinion';--> statement-breakpoint
ALTER TYPE "public"."task_kind" ADD VALUE 'ranking';--> statement-breakpoint
ALTER TYPE "public"."task_kind" ADD VALUE 'heat';--> statement-breakpoint
CREATE TABLE "worker_programs" (
	"worker" text NOT NULL,
	"program" text NOT NULL,
	"version" text NOT NULL,
	"seen_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "worker_programs_worker_program_pk" PRIMARY KEY("worker","program")
);
--> statement-breakpoint
ALTER TABLE "profile_curves" ADD COLUMN "opinion_id" uuid;--> statement-breakpoint
ALTER TABLE "profile_curves" ADD CONSTRAINT "profile_curves_opinion_id_results_id_fk" FOREIGN KEY ("opinion_id") REFERENCES "public"."results"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "profile_curves_opinion" ON "profile_curves" USING btree ("opinion_id");