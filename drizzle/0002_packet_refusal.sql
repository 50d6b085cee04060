CREATE TABLE "packet_refusal" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"stream_id" uuid NOT NULL,
	"at" timestamp with time zone NOT NULL,
	"code" text NOT NULL,
	"detail" text NOT NULL
);
--> statement-breakpoint
ALTER TABLE "packet_refusal" ADD CONSTRAINT "packet_refusal_stream_id_stream_id_fk" FOREIGN KEY ("stream_id") REFERENCES "public"."stream"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "packet_refusal_stream_at" ON "packet_refusal" USING btree ("stream_id","at");