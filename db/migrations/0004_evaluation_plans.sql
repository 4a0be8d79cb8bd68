CREATE TABLE "evaluation_plans" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"area" text NOT NULL,
	"contact" text NOT NULL,
	"onset" text NOT NULL,
	"case_definition" text NOT NULL,
	"comparison" text NOT NULL,
	"plan" "bytea" NOT NULL,
	"recorded_by" uuid,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "evaluation_plans_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "evaluation_plans_area" CHECK ("evaluation_plans"."area" in ('any', 'head', 'neck', 'shoulder', 'upper_arm', 'elbow', 'forearm', 'wrist', 'hand', 'chest', 'thoracic_spine', 'lumbosacral', 'abdomen', 'hip_groin', 'thigh', 'knee', 'lower_leg', 'ankle', 'foot', 'unspecified', 'multiple')),
	CONSTRAINT "evaluation_plans_contact" CHECK ("evaluation_plans"."contact" in ('any', 'without', 'non_contact', 'indirect', 'direct', 'unknown')),
	CONSTRAINT "evaluation_plans_onset" CHECK ("evaluation_plans"."onset" in ('any', 'sudden', 'gradual')),
	CONSTRAINT "evaluation_plans_definition" CHECK ("evaluation_plans"."case_definition" in ('time-loss', 'medical-attention')),
	CONSTRAINT "evaluation_plans_comparison" CHECK ("evaluation_plans"."comparison" in ('warmed-up', 'thirds'))
);
--> statement-breakpoint
ALTER TABLE "evaluation_plans" ADD CONSTRAINT "evaluation_plans_organisation_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "evaluation_plans_recorded_idx" ON "evaluation_plans" USING btree ("organisation_id","recorded_at");