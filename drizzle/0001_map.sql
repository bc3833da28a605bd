ALTER TYPE "public"."task_kind" ADD VALUE 'map' BEFORE 'conjugation';--> statement-breakpoint
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
ALTER TABLE "entries" ADD COLUMN "map_bonds" jsonb DEFAULT '[]'::jsonb NOT NULL;--> statement-breakpoint
ALTER TABLE "maps" ADD CONSTRAINT "maps_result_id_results_id_fk" FOREIGN KEY ("result_id") REFERENCES "public"."results"("id") ON DELETE cascade ON UPDATE no action;