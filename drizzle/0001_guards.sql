CREATE EXTENSION IF NOT EXISTS btree_gist;--> statement-breakpoint
-- A telescope can't be claimed twice for overlapping times.
ALTER TABLE "slot" ADD CONSTRAINT "slot_no_overlap"
	EXCLUDE USING gist ("telescope_id" WITH =, "during" WITH &&)
	WHERE ("state" IN ('claimed', 'on sky', 'reported'));--> statement-breakpoint
ALTER TABLE "slot" ADD CONSTRAINT "slot_during_bounded"
	CHECK (NOT isempty("during") AND NOT lower_inf("during") AND NOT upper_inf("during"));--> statement-breakpoint
-- One person is on watch at a time.
ALTER TABLE "watch" ADD CONSTRAINT "watch_no_overlap" EXCLUDE USING gist ("during" WITH &&);--> statement-breakpoint
-- The journal is append-only.
CREATE FUNCTION journal_refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
	RAISE EXCEPTION 'the journal is append-only' USING ERRCODE = 'restrict_violation';
END $$;--> statement-breakpoint
CREATE TRIGGER journal_append_only BEFORE UPDATE OR DELETE ON "journal"
	FOR EACH ROW EXECUTE FUNCTION journal_refuse_change();--> statement-breakpoint
CREATE TRIGGER journal_no_truncate BEFORE TRUNCATE ON "journal"
	FOR EACH STATEMENT EXECUTE FUNCTION journal_refuse_change();--> statement-breakpoint
INSERT INTO "board_revision" ("only", "value") VALUES (true, 1);--> statement-breakpoint
INSERT INTO "circular_counter" ("series", "last") VALUES ('circular', 0);
