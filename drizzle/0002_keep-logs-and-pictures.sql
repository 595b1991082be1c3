CREATE TABLE "floor_pictures" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"author_id" uuid NOT NULL,
	"name" text NOT NULL,
	"type" text NOT NULL,
	"width_px" integer NOT NULL,
	"height_px" integer NOT NULL,
	"size" integer NOT NULL,
	"sha256" text NOT NULL,
	"bytes" "bytea" NOT NULL,
	"uploaded_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "floor_pictures_once" UNIQUE("team_id","sha256")
);
--> statement-breakpoint
CREATE TABLE "log_pieces" (
	"log_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"bytes" "bytea" NOT NULL,
	CONSTRAINT "log_pieces_log_id_number_pk" PRIMARY KEY("log_id","number")
);
--> statement-breakpoint
CREATE TABLE "log_readings" (
	"log_id" uuid PRIMARY KEY NOT NULL,
	"report" json NOT NULL,
	"link_traces" json NOT NULL
);
--> statement-breakpoint
CREATE TABLE "reception_logs" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"author_id" uuid NOT NULL,
	"name" text NOT NULL,
	"sort_key" text NOT NULL,
	"search_text" text NOT NULL,
	"file_name" text NOT NULL,
	"bytes" bigint NOT NULL,
	"sha256" text NOT NULL,
	"mapping" json NOT NULL,
	"reading_key" text NOT NULL,
	"rows" integer NOT NULL,
	"rows_used" integer NOT NULL,
	"troubles" integer NOT NULL,
	"links" integer NOT NULL,
	"packets" bigint NOT NULL,
	"lost" bigint NOT NULL,
	"uploaded_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "reception_logs_once" UNIQUE("team_id","reading_key")
);
--> statement-breakpoint
CREATE TABLE "revision_logs" (
	"scenario_id" uuid NOT NULL,
	"revision" integer NOT NULL,
	"log_id" uuid NOT NULL,
	CONSTRAINT "revision_logs_scenario_id_revision_pk" PRIMARY KEY("scenario_id","revision")
);
--> statement-breakpoint
CREATE TABLE "revision_pictures" (
	"scenario_id" uuid NOT NULL,
	"revision" integer NOT NULL,
	"picture_id" uuid NOT NULL,
	CONSTRAINT "revision_pictures_scenario_id_revision_pk" PRIMARY KEY("scenario_id","revision")
);
--> statement-breakpoint
ALTER TABLE "scenarios" ADD COLUMN "summary_version" integer DEFAULT 0 NOT NULL;--> statement-breakpoint
ALTER TABLE "floor_pictures" ADD CONSTRAINT "floor_pictures_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "floor_pictures" ADD CONSTRAINT "floor_pictures_author_id_users_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "log_pieces" ADD CONSTRAINT "log_pieces_log_id_reception_logs_id_fk" FOREIGN KEY ("log_id") REFERENCES "public"."reception_logs"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "log_readings" ADD CONSTRAINT "log_readings_log_id_reception_logs_id_fk" FOREIGN KEY ("log_id") REFERENCES "public"."reception_logs"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reception_logs" ADD CONSTRAINT "reception_logs_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reception_logs" ADD CONSTRAINT "reception_logs_author_id_users_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revision_logs" ADD CONSTRAINT "revision_logs_keep_log" FOREIGN KEY ("log_id") REFERENCES "public"."reception_logs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revision_logs" ADD CONSTRAINT "revision_logs_of_revision" FOREIGN KEY ("scenario_id","revision") REFERENCES "public"."revisions"("scenario_id","number") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revision_pictures" ADD CONSTRAINT "revision_pictures_keep_picture" FOREIGN KEY ("picture_id") REFERENCES "public"."floor_pictures"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revision_pictures" ADD CONSTRAINT "revision_pictures_of_revision" FOREIGN KEY ("scenario_id","revision") REFERENCES "public"."revisions"("scenario_id","number") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "reception_logs_team_uploaded" ON "reception_logs" USING btree ("team_id","uploaded_at");--> statement-breakpoint
CREATE INDEX "revision_logs_log" ON "revision_logs" USING btree ("log_id");--> statement-breakpoint
CREATE INDEX "revision_pictures_picture" ON "revision_pictures" USING btree ("picture_id");