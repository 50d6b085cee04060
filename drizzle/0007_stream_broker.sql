CREATE TABLE "stream_broker" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"stream_id" uuid NOT NULL,
	"host" text NOT NULL,
	"port" integer NOT NULL,
	"ivorn_prefix" text DEFAULT '' NOT NULL,
	"enabled" boolean DEFAULT true NOT NULL,
	"connected_at" timestamp with time zone,
	"last_alive_at" timestamp with time zone,
	"last_error" text,
	"last_error_at" timestamp with time zone,
	CONSTRAINT "stream_broker_address" UNIQUE("stream_id","host","port")
);
--> statement-breakpoint
ALTER TABLE "stream_broker" ADD CONSTRAINT "stream_broker_stream_id_stream_id_fk" FOREIGN KEY ("stream_id") REFERENCES "public"."stream"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "alert_cites" ON "alert" USING gin ("cites" jsonb_path_ops);