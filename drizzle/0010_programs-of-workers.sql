DROP TABLE "worker_programs" CASCADE;--> statement-breakpoint
ALTER TABLE "workers" ADD COLUMN "programs" jsonb DEFAULT '{}'::jsonb NOT NULL;