ALTER TABLE "alert" ADD COLUMN "moc90" "int8multirange";--> statement-breakpoint
CREATE INDEX "alert_moc90" ON "alert" USING gist ("moc90" multirange_ops);