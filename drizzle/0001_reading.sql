CREATE TYPE "public"."energy_unit" AS ENUM('kcal/mol', 'kJ/mol');--> statement-breakpoint
ALTER TABLE "users" ADD COLUMN "energy_unit" "energy_unit" DEFAULT 'kcal/mol' NOT NULL;