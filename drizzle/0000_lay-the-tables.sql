CREATE TABLE "activity" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"what" text NOT NULL,
	"subject_id" uuid,
	"subject_name" text,
	"revision" integer,
	"at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"position" bigserial NOT NULL
);
--> statement-breakpoint
CREATE TABLE "memberships" (
	"team_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"roles" text[] NOT NULL,
	CONSTRAINT "memberships_team_id_user_id_pk" PRIMARY KEY("team_id","user_id"),
	CONSTRAINT "memberships_roles_known" CHECK (cardinality("memberships"."roles") > 0 and "memberships"."roles" <@ array['trainee', 'engineer', 'reviewer', 'administrator']::text[])
);
--> statement-breakpoint
CREATE TABLE "revisions" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"scenario_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"name" text NOT NULL,
	"note" text NOT NULL,
	"scenario" json NOT NULL,
	"unrun" json NOT NULL,
	"author_id" uuid NOT NULL,
	"saved_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "revisions_scenario_number" UNIQUE("scenario_id","number"),
	CONSTRAINT "revisions_number_positive" CHECK ("revisions"."number" > 0)
);
--> statement-breakpoint
CREATE TABLE "run_series" (
	"run_id" uuid PRIMARY KEY NOT NULL,
	"bytes" "bytea" NOT NULL
);
--> statement-breakpoint
CREATE TABLE "runs" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"scenario_id" uuid NOT NULL,
	"revision" integer NOT NULL,
	"seed" bigint NOT NULL,
	"engine" text NOT NULL,
	"verdict" text NOT NULL,
	"verdict_word" text NOT NULL,
	"verdict_sentence" text NOT NULL,
	"ended" text NOT NULL,
	"ended_at_s" double precision NOT NULL,
	"duration_s" double precision NOT NULL,
	"sent" integer NOT NULL,
	"lost" integer NOT NULL,
	"figures" json NOT NULL,
	"limits" json NOT NULL,
	"events" json NOT NULL,
	"digest" text NOT NULL,
	"points" integer NOT NULL,
	"kept_points" integer NOT NULL,
	"kept_every" integer NOT NULL,
	"compressed_bytes" integer NOT NULL,
	"author_id" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"position" bigserial NOT NULL,
	CONSTRAINT "runs_once" UNIQUE("scenario_id","revision","seed","engine")
);
--> statement-breakpoint
CREATE TABLE "scenarios" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"owner_id" uuid NOT NULL,
	"latest_revision" integer NOT NULL,
	"name" text NOT NULL,
	"sort_key" text NOT NULL,
	"search_text" text NOT NULL,
	"plant_kind" text NOT NULL,
	"period_s" double precision NOT NULL,
	"round" json NOT NULL,
	"verdict" text NOT NULL,
	"verdict_word" text NOT NULL,
	"verdict_sentence" text NOT NULL,
	"latest_run_id" uuid,
	"sent" integer,
	"lost" integer,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"changed_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"archived_at" timestamp (3) with time zone
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"sid" varchar PRIMARY KEY NOT NULL,
	"sess" json NOT NULL,
	"expire" timestamp (6) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "settings" (
	"key" text PRIMARY KEY NOT NULL,
	"value" text NOT NULL
);
--> statement-breakpoint
CREATE TABLE "teams" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "users" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"password_hash" text NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
ALTER TABLE "activity" ADD CONSTRAINT "activity_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "activity" ADD CONSTRAINT "activity_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revisions" ADD CONSTRAINT "revisions_scenario_id_scenarios_id_fk" FOREIGN KEY ("scenario_id") REFERENCES "public"."scenarios"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revisions" ADD CONSTRAINT "revisions_author_id_users_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run_series" ADD CONSTRAINT "run_series_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_author_id_users_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_scenario_id_revision_revisions_scenario_id_number_fk" FOREIGN KEY ("scenario_id","revision") REFERENCES "public"."revisions"("scenario_id","number") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "scenarios" ADD CONSTRAINT "scenarios_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "scenarios" ADD CONSTRAINT "scenarios_owner_id_users_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "activity_team_at" ON "activity" USING btree ("team_id","at","position");--> statement-breakpoint
CREATE INDEX "activity_subject" ON "activity" USING btree ("subject_id");--> statement-breakpoint
CREATE INDEX "memberships_user" ON "memberships" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "runs_newest" ON "runs" USING btree ("scenario_id","created_at","position");--> statement-breakpoint
CREATE INDEX "scenarios_team_changed" ON "scenarios" USING btree ("team_id","changed_at","id");--> statement-breakpoint
CREATE INDEX "sessions_expire" ON "sessions" USING btree ("expire");--> statement-breakpoint
CREATE UNIQUE INDEX "users_email_unique" ON "users" USING btree (lower("email"));