CREATE TABLE "alert" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"stream_id" uuid NOT NULL,
	"packet_id" text NOT NULL,
	"serial" integer NOT NULL,
	"raw_id" bigint NOT NULL,
	"role" text NOT NULL,
	"kind" text NOT NULL,
	"cites" jsonb NOT NULL,
	"t0" timestamp with time zone NOT NULL,
	"received_at" timestamp with time zone NOT NULL,
	"shape" jsonb,
	"significance" double precision,
	"false_alarm_per_year" double precision,
	"remarks" text DEFAULT '' NOT NULL,
	"transient_id" uuid NOT NULL,
	"membership" text NOT NULL,
	"log_odds" double precision,
	"live" boolean DEFAULT true NOT NULL,
	CONSTRAINT "alert_stream_packet_serial" UNIQUE("stream_id","packet_id","serial")
);
--> statement-breakpoint
CREATE TABLE "packet" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"stream_id" uuid NOT NULL,
	"content_type" text NOT NULL,
	"body" "bytea" NOT NULL,
	"sha256" text NOT NULL,
	"received_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "stream" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"code" text NOT NULL,
	"name" text NOT NULL,
	"stream_class" text NOT NULL,
	"default_containment" double precision DEFAULT 0.9 NOT NULL,
	"default_systematic_deg" double precision DEFAULT 0 NOT NULL,
	"alerts_per_year" double precision DEFAULT 100 NOT NULL,
	"coincidence_window_s" double precision DEFAULT 3600 NOT NULL,
	"fade" jsonb NOT NULL,
	"silent_after_minutes" integer DEFAULT 1440 NOT NULL,
	"last_heard_at" timestamp with time zone,
	"retired_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "stream_code_unique" UNIQUE("code")
);
--> statement-breakpoint
CREATE TABLE "stream_key" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"stream_id" uuid NOT NULL,
	"label" text NOT NULL,
	"prefix" text NOT NULL,
	"hash" text NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"last_used_at" timestamp with time zone,
	"revoked_at" timestamp with time zone,
	CONSTRAINT "stream_key_hash_unique" UNIQUE("hash")
);
--> statement-breakpoint
CREATE TABLE "circular" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"number" integer,
	"transient_id" uuid NOT NULL,
	"title" text NOT NULL,
	"body" text NOT NULL,
	"author_id" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"published_at" timestamp with time zone,
	CONSTRAINT "circular_number_unique" UNIQUE("number")
);
--> statement-breakpoint
CREATE TABLE "circular_counter" (
	"series" text PRIMARY KEY NOT NULL,
	"last" integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE "delivery" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"circular_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"channel" text NOT NULL,
	"state" text DEFAULT 'queued' NOT NULL,
	"attempts" integer DEFAULT 0 NOT NULL,
	"last_error" text,
	"queued_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "delivery_once" UNIQUE("circular_id","person_id","channel")
);
--> statement-breakpoint
CREATE TABLE "push_device" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"person_id" uuid NOT NULL,
	"name" text NOT NULL,
	"endpoint" text NOT NULL,
	"p256dh" text NOT NULL,
	"auth" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"last_sent_at" timestamp with time zone,
	CONSTRAINT "push_device_endpoint_unique" UNIQUE("endpoint")
);
--> statement-breakpoint
CREATE TABLE "subscription" (
	"person_id" uuid PRIMARY KEY NOT NULL,
	"by_email" boolean DEFAULT true NOT NULL,
	"by_push" boolean DEFAULT false NOT NULL,
	"stream_codes" text[] DEFAULT '{}' NOT NULL,
	"telescope_id" uuid,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "closure" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"telescope_id" uuid NOT NULL,
	"during" "tstzrange" NOT NULL,
	"reason" text NOT NULL,
	"entered_by" uuid,
	"entered_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "telescope" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"code" text NOT NULL,
	"name" text NOT NULL,
	"site" text NOT NULL,
	"aperture_m" double precision NOT NULL,
	"lat_deg" double precision NOT NULL,
	"lon_deg" double precision NOT NULL,
	"height_m" double precision NOT NULL,
	"limits" jsonb NOT NULL,
	"detectors" jsonb NOT NULL,
	"depths" jsonb NOT NULL,
	"exposure_s" double precision NOT NULL,
	"overhead_s" double precision NOT NULL,
	"max_tiles" integer DEFAULT 24 NOT NULL,
	"retired_at" timestamp with time zone,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "telescope_code_unique" UNIQUE("code"),
	CONSTRAINT "telescope_code_form" CHECK ("telescope"."code" ~ '^[A-Z]{3}$'),
	CONSTRAINT "telescope_lat_range" CHECK ("telescope"."lat_deg" between -90 and 90),
	CONSTRAINT "telescope_lon_range" CHECK ("telescope"."lon_deg" between -180 and 180)
);
--> statement-breakpoint
CREATE TABLE "telescope_observer" (
	"telescope_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	CONSTRAINT "telescope_observer_telescope_id_person_id_pk" PRIMARY KEY("telescope_id","person_id")
);
--> statement-breakpoint
CREATE TABLE "watch" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"during" "tstzrange" NOT NULL,
	"first_person_id" uuid NOT NULL,
	"second_person_id" uuid
);
--> statement-breakpoint
CREATE TABLE "account" (
	"user_id" uuid NOT NULL,
	"type" text NOT NULL,
	"provider" text NOT NULL,
	"provider_account_id" text NOT NULL,
	"refresh_token" text,
	"access_token" text,
	"expires_at" integer,
	"token_type" text,
	"scope" text,
	"id_token" text,
	"session_state" text,
	CONSTRAINT "account_provider_provider_account_id_pk" PRIMARY KEY("provider","provider_account_id")
);
--> statement-breakpoint
CREATE TABLE "person" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text NOT NULL,
	"initials" text NOT NULL,
	"email" text NOT NULL,
	"email_verified" timestamp with time zone,
	"image" text,
	"organisation" text DEFAULT '' NOT NULL,
	"roles" text[] NOT NULL,
	"seeded" boolean DEFAULT false NOT NULL,
	"invited_at" timestamp with time zone DEFAULT now() NOT NULL,
	"joined_at" timestamp with time zone,
	"disabled_at" timestamp with time zone,
	CONSTRAINT "person_email_unique" UNIQUE("email"),
	CONSTRAINT "person_email_lower" CHECK ("person"."email" = lower("person"."email")),
	CONSTRAINT "person_roles_known" CHECK ("person"."roles" <@ array['duty','observer','pi','partner','steward']::text[] and cardinality("person"."roles") > 0)
);
--> statement-breakpoint
CREATE TABLE "session" (
	"session_token" text PRIMARY KEY NOT NULL,
	"user_id" uuid NOT NULL,
	"expires" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "verification_token" (
	"identifier" text NOT NULL,
	"token" text NOT NULL,
	"expires" timestamp with time zone NOT NULL,
	CONSTRAINT "verification_token_identifier_token_pk" PRIMARY KEY("identifier","token")
);
--> statement-breakpoint
CREATE TABLE "report" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"slot_id" uuid,
	"transient_id" uuid NOT NULL,
	"telescope_id" uuid,
	"kind" text NOT NULL,
	"filter" text,
	"observed_at" timestamp with time zone NOT NULL,
	"exposure_s" double precision,
	"magnitude" double precision,
	"magnitude_error" double precision,
	"limit_mag" double precision,
	"ra_deg" double precision,
	"dec_deg" double precision,
	"remarks" text DEFAULT '' NOT NULL,
	"reported_by" uuid NOT NULL,
	"reported_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "report_kind_values" CHECK (("report"."kind" = 'detection') = ("report"."magnitude" is not null) and ("report"."kind" = 'limit') = ("report"."limit_mag" is not null))
);
--> statement-breakpoint
CREATE TABLE "slot" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"transient_id" uuid NOT NULL,
	"telescope_id" uuid NOT NULL,
	"during" "tstzrange" NOT NULL,
	"state" text NOT NULL,
	"tiles" jsonb NOT NULL,
	"filter" text NOT NULL,
	"exposure_s" double precision NOT NULL,
	"catch" double precision NOT NULL,
	"region_version" integer NOT NULL,
	"claimed_by" uuid,
	"claimed_at" timestamp with time zone,
	"on_sky_at" timestamp with time zone,
	"ended_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "slot_claimed_whole" CHECK ("slot"."state" in ('offered', 'lapsed') or "slot"."claimed_by" is not null)
);
--> statement-breakpoint
CREATE TABLE "board_revision" (
	"only" boolean DEFAULT true NOT NULL,
	"value" bigint NOT NULL,
	CONSTRAINT "board_revision_only_pk" PRIMARY KEY("only"),
	CONSTRAINT "board_revision_one" CHECK ("board_revision"."only")
);
--> statement-breakpoint
CREATE TABLE "designation_counter" (
	"day" date PRIMARY KEY NOT NULL,
	"last" integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE "journal" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"transient_id" uuid NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"kind" text NOT NULL,
	"actor_id" uuid,
	"summary" text NOT NULL,
	"detail" jsonb DEFAULT '{}'::jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "outlook" (
	"transient_id" uuid PRIMARY KEY NOT NULL,
	"region_version" integer NOT NULL,
	"computed_at" timestamp with time zone NOT NULL,
	"network_catch" double precision NOT NULL,
	"cost_of_waiting_points" double precision NOT NULL,
	"body" jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "region" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"transient_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"computed_at" timestamp with time zone NOT NULL,
	"cause" text NOT NULL,
	"alert_count" integer NOT NULL,
	"method" text NOT NULL,
	"ra_deg" double precision NOT NULL,
	"dec_deg" double precision NOT NULL,
	"sigma_deg" double precision,
	"area50_deg2" double precision NOT NULL,
	"area90_deg2" double precision NOT NULL,
	"equivalent_radius_deg" double precision NOT NULL,
	"log_odds_agreement" double precision,
	"points" jsonb NOT NULL,
	"moc50" "int8multirange" NOT NULL,
	"moc90" "int8multirange" NOT NULL,
	CONSTRAINT "region_transient_version" UNIQUE("transient_id","version")
);
--> statement-breakpoint
CREATE TABLE "transient" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"designation" text NOT NULL,
	"t0" timestamp with time zone NOT NULL,
	"first_received_at" timestamp with time zone NOT NULL,
	"state" text DEFAULT 'open' NOT NULL,
	"is_test" boolean DEFAULT false NOT NULL,
	"is_drill" boolean DEFAULT false NOT NULL,
	"taken_by" uuid,
	"taken_at" timestamp with time zone,
	"decision" text,
	"decided_by" uuid,
	"decided_at" timestamp with time zone,
	"decision_reason" text DEFAULT '' NOT NULL,
	"region_version" integer DEFAULT 0 NOT NULL,
	"revision" bigint DEFAULT 0 NOT NULL,
	CONSTRAINT "transient_designation_unique" UNIQUE("designation"),
	CONSTRAINT "transient_taken_whole" CHECK (("transient"."taken_by" is null) = ("transient"."taken_at" is null)),
	CONSTRAINT "transient_decided_whole" CHECK (("transient"."decision" is null) = ("transient"."decided_at" is null))
);
--> statement-breakpoint
ALTER TABLE "alert" ADD CONSTRAINT "alert_stream_id_stream_id_fk" FOREIGN KEY ("stream_id") REFERENCES "public"."stream"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "alert" ADD CONSTRAINT "alert_raw_id_packet_id_fk" FOREIGN KEY ("raw_id") REFERENCES "public"."packet"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "alert" ADD CONSTRAINT "alert_transient_id_transient_id_fk" FOREIGN KEY ("transient_id") REFERENCES "public"."transient"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "packet" ADD CONSTRAINT "packet_stream_id_stream_id_fk" FOREIGN KEY ("stream_id") REFERENCES "public"."stream"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "stream_key" ADD CONSTRAINT "stream_key_stream_id_stream_id_fk" FOREIGN KEY ("stream_id") REFERENCES "public"."stream"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "stream_key" ADD CONSTRAINT "stream_key_created_by_person_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "circular" ADD CONSTRAINT "circular_transient_id_transient_id_fk" FOREIGN KEY ("transient_id") REFERENCES "public"."transient"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "circular" ADD CONSTRAINT "circular_author_id_person_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "delivery" ADD CONSTRAINT "delivery_circular_id_circular_id_fk" FOREIGN KEY ("circular_id") REFERENCES "public"."circular"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "delivery" ADD CONSTRAINT "delivery_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "push_device" ADD CONSTRAINT "push_device_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "subscription" ADD CONSTRAINT "subscription_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "subscription" ADD CONSTRAINT "subscription_telescope_id_telescope_id_fk" FOREIGN KEY ("telescope_id") REFERENCES "public"."telescope"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "closure" ADD CONSTRAINT "closure_telescope_id_telescope_id_fk" FOREIGN KEY ("telescope_id") REFERENCES "public"."telescope"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "closure" ADD CONSTRAINT "closure_entered_by_person_id_fk" FOREIGN KEY ("entered_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "telescope_observer" ADD CONSTRAINT "telescope_observer_telescope_id_telescope_id_fk" FOREIGN KEY ("telescope_id") REFERENCES "public"."telescope"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "telescope_observer" ADD CONSTRAINT "telescope_observer_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "watch" ADD CONSTRAINT "watch_first_person_id_person_id_fk" FOREIGN KEY ("first_person_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "watch" ADD CONSTRAINT "watch_second_person_id_person_id_fk" FOREIGN KEY ("second_person_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "account" ADD CONSTRAINT "account_user_id_person_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."person"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_user_id_person_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."person"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "report" ADD CONSTRAINT "report_slot_id_slot_id_fk" FOREIGN KEY ("slot_id") REFERENCES "public"."slot"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "report" ADD CONSTRAINT "report_transient_id_transient_id_fk" FOREIGN KEY ("transient_id") REFERENCES "public"."transient"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "report" ADD CONSTRAINT "report_telescope_id_telescope_id_fk" FOREIGN KEY ("telescope_id") REFERENCES "public"."telescope"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "report" ADD CONSTRAINT "report_reported_by_person_id_fk" FOREIGN KEY ("reported_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "slot" ADD CONSTRAINT "slot_transient_id_transient_id_fk" FOREIGN KEY ("transient_id") REFERENCES "public"."transient"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "slot" ADD CONSTRAINT "slot_telescope_id_telescope_id_fk" FOREIGN KEY ("telescope_id") REFERENCES "public"."telescope"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "slot" ADD CONSTRAINT "slot_claimed_by_person_id_fk" FOREIGN KEY ("claimed_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "journal" ADD CONSTRAINT "journal_transient_id_transient_id_fk" FOREIGN KEY ("transient_id") REFERENCES "public"."transient"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "journal" ADD CONSTRAINT "journal_actor_id_person_id_fk" FOREIGN KEY ("actor_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "outlook" ADD CONSTRAINT "outlook_transient_id_transient_id_fk" FOREIGN KEY ("transient_id") REFERENCES "public"."transient"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "region" ADD CONSTRAINT "region_transient_id_transient_id_fk" FOREIGN KEY ("transient_id") REFERENCES "public"."transient"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "transient" ADD CONSTRAINT "transient_taken_by_person_id_fk" FOREIGN KEY ("taken_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "transient" ADD CONSTRAINT "transient_decided_by_person_id_fk" FOREIGN KEY ("decided_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "alert_transient" ON "alert" USING btree ("transient_id");--> statement-breakpoint
CREATE INDEX "alert_t0" ON "alert" USING btree ("t0");--> statement-breakpoint
CREATE INDEX "packet_stream_received" ON "packet" USING btree ("stream_id","received_at");--> statement-breakpoint
CREATE INDEX "circular_transient" ON "circular" USING btree ("transient_id");--> statement-breakpoint
CREATE INDEX "delivery_state" ON "delivery" USING btree ("state");--> statement-breakpoint
CREATE INDEX "closure_telescope_during" ON "closure" USING gist ("during");--> statement-breakpoint
CREATE INDEX "report_transient" ON "report" USING btree ("transient_id");--> statement-breakpoint
CREATE INDEX "slot_transient" ON "slot" USING btree ("transient_id");--> statement-breakpoint
CREATE INDEX "slot_state" ON "slot" USING btree ("state");--> statement-breakpoint
CREATE INDEX "journal_transient" ON "journal" USING btree ("transient_id","id");--> statement-breakpoint
CREATE INDEX "region_moc90" ON "region" USING gist ("moc90" multirange_ops);--> statement-breakpoint
CREATE INDEX "transient_state" ON "transient" USING btree ("state");--> statement-breakpoint
CREATE INDEX "transient_t0" ON "transient" USING btree ("t0");