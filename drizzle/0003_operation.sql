CREATE TYPE "public"."delivery_state" AS ENUM('waiting', 'delivered', 'failed');--> statement-breakpoint
CREATE TYPE "public"."worker_order" AS ENUM('take', 'pause', 'drain');--> statement-breakpoint
CREATE TYPE "public"."worker_state" AS ENUM('taking', 'paused', 'draining', 'gone');--> statement-breakpoint
CREATE TABLE "operator_events" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"actor_id" uuid,
	"action" text NOT NULL,
	"subject" text NOT NULL,
	"address" text DEFAULT '' NOT NULL,
	"details" jsonb DEFAULT '{}'::jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "webhook_deliveries" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"webhook_id" uuid NOT NULL,
	"event" text NOT NULL,
	"body" text NOT NULL,
	"state" "delivery_state" DEFAULT 'waiting' NOT NULL,
	"attempts" smallint DEFAULT 0 NOT NULL,
	"step" smallint DEFAULT 0 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"next_at" timestamp with time zone DEFAULT now(),
	"started_at" timestamp with time zone,
	"attempted_at" timestamp with time zone,
	"status" smallint,
	"reason" text DEFAULT '' NOT NULL,
	"milliseconds" integer,
	CONSTRAINT "webhook_deliveries_waiting_has_next" CHECK (("webhook_deliveries"."state" = 'waiting') = ("webhook_deliveries"."next_at" is not null))
);
--> statement-breakpoint
CREATE TABLE "webhooks" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"created_by" uuid,
	"name" text NOT NULL,
	"url" text NOT NULL,
	"secret" text NOT NULL,
	"previous_secret" text,
	"previous_until" timestamp with time zone,
	"is_on" boolean DEFAULT true NOT NULL,
	"failing_since" timestamp with time zone,
	"given_up_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "webhooks_previous_secret_ends" CHECK (("webhooks"."previous_secret" is null) = ("webhooks"."previous_until" is null))
);
--> statement-breakpoint
CREATE TABLE "workers" (
	"name" text PRIMARY KEY NOT NULL,
	"version" text NOT NULL,
	"concurrency" smallint NOT NULL,
	"state" "worker_state" DEFAULT 'taking' NOT NULL,
	"wanted" "worker_order" DEFAULT 'take' NOT NULL,
	"started_at" timestamp with time zone DEFAULT now() NOT NULL,
	"beat_at" timestamp with time zone DEFAULT now() NOT NULL,
	"metrics" jsonb DEFAULT '[]'::jsonb NOT NULL
);
--> statement-breakpoint
DROP INDEX "tasks_queued";--> statement-breakpoint
ALTER TABLE "tasks" ADD COLUMN "queued_at" timestamp with time zone DEFAULT now() NOT NULL;--> statement-breakpoint
ALTER TABLE "users" ADD COLUMN "is_operator" boolean DEFAULT false NOT NULL;--> statement-breakpoint
ALTER TABLE "operator_events" ADD CONSTRAINT "operator_events_actor_id_users_id_fk" FOREIGN KEY ("actor_id") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "webhook_deliveries" ADD CONSTRAINT "webhook_deliveries_webhook_id_webhooks_id_fk" FOREIGN KEY ("webhook_id") REFERENCES "public"."webhooks"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "webhooks" ADD CONSTRAINT "webhooks_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "webhooks" ADD CONSTRAINT "webhooks_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "webhook_deliveries_webhook" ON "webhook_deliveries" USING btree ("webhook_id","created_at");--> statement-breakpoint
CREATE INDEX "webhook_deliveries_created" ON "webhook_deliveries" USING btree ("created_at");--> statement-breakpoint
CREATE INDEX "webhook_deliveries_waiting" ON "webhook_deliveries" USING btree ("next_at") WHERE "webhook_deliveries"."state" = 'waiting';--> statement-breakpoint
CREATE INDEX "webhooks_team" ON "webhooks" USING btree ("team_id","created_at");--> statement-breakpoint
CREATE INDEX "workers_beat" ON "workers" USING btree ("beat_at");--> statement-breakpoint
CREATE INDEX "tasks_failed" ON "tasks" USING btree ("finished_at") WHERE "tasks"."state" = 'failed';--> statement-breakpoint
CREATE INDEX "tasks_queued" ON "tasks" USING btree ("queued_at") WHERE "tasks"."state" = 'queued';