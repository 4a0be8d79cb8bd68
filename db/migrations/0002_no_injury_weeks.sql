CREATE TABLE "no_injury_weeks" (
	"organisation_id" uuid NOT NULL,
	"team_id" uuid NOT NULL,
	"week_start" date NOT NULL,
	"confirmed_by" uuid,
	"confirmed_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "no_injury_weeks_organisation_id_team_id_week_start_pk" PRIMARY KEY("organisation_id","team_id","week_start")
);
--> statement-breakpoint
ALTER TABLE "no_injury_weeks" ADD CONSTRAINT "no_injury_weeks_organisation_id_team_id_teams_organisation_id_id_fk" FOREIGN KEY ("organisation_id","team_id") REFERENCES "public"."teams"("organisation_id","id") ON DELETE no action ON UPDATE no action;