ALTER TABLE "reception_logs" ADD COLUMN "interval_s" double precision;--> statement-breakpoint
ALTER TABLE "reception_logs" ADD COLUMN "verdicts" json;