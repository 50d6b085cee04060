ALTER TABLE "packet" ADD COLUMN "key_id" uuid;--> statement-breakpoint
ALTER TABLE "packet" ADD COLUMN "person_id" uuid;--> statement-breakpoint
ALTER TABLE "packet" ADD COLUMN "channel" text DEFAULT 'api' NOT NULL;--> statement-breakpoint
ALTER TABLE "packet" ADD COLUMN "file_key" text;--> statement-breakpoint
ALTER TABLE "packet" ADD COLUMN "file_name" text;--> statement-breakpoint
ALTER TABLE "packet" ADD COLUMN "file_bytes" bigint;--> statement-breakpoint
ALTER TABLE "packet" ADD COLUMN "state" text DEFAULT 'received' NOT NULL;--> statement-breakpoint
ALTER TABLE "packet" ADD COLUMN "judged_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "packet" ADD COLUMN "code" text;--> statement-breakpoint
ALTER TABLE "packet" ADD COLUMN "detail" text DEFAULT '' NOT NULL;--> statement-breakpoint
ALTER TABLE "stream" ADD COLUMN "param_map" jsonb DEFAULT '{}'::jsonb NOT NULL;--> statement-breakpoint
ALTER TABLE "stream" ADD COLUMN "silence_noted_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "packet" ADD CONSTRAINT "packet_key_id_stream_key_id_fk" FOREIGN KEY ("key_id") REFERENCES "public"."stream_key"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "packet" ADD CONSTRAINT "packet_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "packet_unsettled" ON "packet" USING btree ("state","received_at") WHERE "packet"."state" in ('received', 'refused');--> statement-breakpoint
UPDATE "packet" SET "state" = 'taken', "judged_at" = "received_at";--> statement-breakpoint
INSERT INTO "packet" ("stream_id", "content_type", "body", "sha256", "received_at", "state", "judged_at", "code", "detail")
SELECT "stream_id", '', '', '', "at", 'dismissed', "at", "code", "detail" FROM "packet_refusal";--> statement-breakpoint
DROP TABLE "packet_refusal";
