ALTER TABLE "report" ADD COLUMN "withdrawn_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "report" ADD COLUMN "withdrawn_by" uuid;--> statement-breakpoint
ALTER TABLE "region" ADD COLUMN "not_found_count" integer DEFAULT 0 NOT NULL;--> statement-breakpoint
ALTER TABLE "region" ADD COLUMN "too_faint_chance" double precision;--> statement-breakpoint
ALTER TABLE "report" ADD CONSTRAINT "report_withdrawn_by_person_id_fk" FOREIGN KEY ("withdrawn_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "report" ADD CONSTRAINT "report_withdrawn_whole" CHECK (("report"."withdrawn_at" is null) = ("report"."withdrawn_by" is null));