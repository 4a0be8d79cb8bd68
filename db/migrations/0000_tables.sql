CREATE SCHEMA "auth";
--> statement-breakpoint
CREATE SCHEMA "installation";
--> statement-breakpoint
CREATE TABLE "invitations" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"roles" text[] NOT NULL,
	"all_teams" boolean DEFAULT false NOT NULL,
	"team_ids" uuid[] DEFAULT '{}' NOT NULL,
	"token_hash" text NOT NULL,
	"invited_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"confirmed_by" uuid,
	"confirmed_at" timestamp with time zone,
	"accepted_by" uuid,
	"accepted_at" timestamp with time zone,
	"revoked_at" timestamp with time zone,
	CONSTRAINT "invitations_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "invitations_token" UNIQUE("organisation_id","token_hash"),
	CONSTRAINT "invitations_roles" CHECK ("invitations"."roles" <@ array['admin', 'lead', 'trainer', 'coach']::text[])
);
--> statement-breakpoint
CREATE TABLE "membership_roles" (
	"organisation_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"role" text NOT NULL,
	"granted_by" uuid,
	"granted_at" timestamp with time zone DEFAULT now() NOT NULL,
	"confirmed_by" uuid,
	"confirmed_at" timestamp with time zone,
	CONSTRAINT "membership_roles_organisation_id_person_id_role_pk" PRIMARY KEY("organisation_id","person_id","role"),
	CONSTRAINT "membership_roles_role" CHECK ("membership_roles"."role" in ('admin', 'lead', 'trainer', 'coach'))
);
--> statement-breakpoint
CREATE TABLE "membership_teams" (
	"organisation_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"team_id" uuid NOT NULL,
	CONSTRAINT "membership_teams_organisation_id_person_id_team_id_pk" PRIMARY KEY("organisation_id","person_id","team_id")
);
--> statement-breakpoint
CREATE TABLE "memberships" (
	"organisation_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"display_name" text NOT NULL,
	"email" text NOT NULL,
	"all_teams" boolean DEFAULT false NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "memberships_organisation_id_person_id_pk" PRIMARY KEY("organisation_id","person_id")
);
--> statement-breakpoint
CREATE TABLE "organisation_keys" (
	"organisation_id" uuid NOT NULL,
	"key_version" integer NOT NULL,
	"wrapped_key" "bytea" NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "organisation_keys_organisation_id_key_version_pk" PRIMARY KEY("organisation_id","key_version")
);
--> statement-breakpoint
CREATE TABLE "organisations" (
	"organisation_id" uuid NOT NULL,
	"slug" text NOT NULL,
	"name" text NOT NULL,
	"kind" text NOT NULL,
	"time_zone" text NOT NULL,
	"phone" text NOT NULL,
	"phone_hours" text,
	"age_bands" jsonb NOT NULL,
	"own_decision_age" integer DEFAULT 18 NOT NULL,
	"small_number" integer DEFAULT 5 NOT NULL,
	"retention_years" integer DEFAULT 8 NOT NULL,
	"notice_link_days" integer DEFAULT 14 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "organisations_organisation_id_pk" PRIMARY KEY("organisation_id"),
	CONSTRAINT "organisations_slug_unique" UNIQUE("slug"),
	CONSTRAINT "organisations_kind" CHECK ("organisations"."kind" in ('club', 'school'))
);
--> statement-breakpoint
CREATE TABLE "seasons" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"starts_on" date NOT NULL,
	"ends_on" date NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "seasons_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "seasons_name" UNIQUE("organisation_id","name")
);
--> statement-breakpoint
CREATE TABLE "sport_rules" (
	"organisation_id" uuid NOT NULL,
	"sport" text NOT NULL,
	"from_age" integer NOT NULL,
	"players_on_field" integer NOT NULL,
	"regulation_minutes" integer NOT NULL,
	CONSTRAINT "sport_rules_organisation_id_sport_from_age_pk" PRIMARY KEY("organisation_id","sport","from_age"),
	CONSTRAINT "sport_rules_sport" CHECK ("sport_rules"."sport" in ('soccer', 'basketball', 'handball', 'volleyball', 'rugby', 'field_hockey', 'netball', 'other'))
);
--> statement-breakpoint
CREATE TABLE "teams" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"name_key" text NOT NULL,
	"sport" text NOT NULL,
	"sex" text NOT NULL,
	"under_age" integer,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "teams_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "teams_name" UNIQUE("organisation_id","name_key"),
	CONSTRAINT "teams_sport" CHECK ("teams"."sport" in ('soccer', 'basketball', 'handball', 'volleyball', 'rugby', 'field_hockey', 'netball', 'other')),
	CONSTRAINT "teams_sex" CHECK ("teams"."sex" in ('girls', 'boys', 'women', 'men', 'mixed'))
);
--> statement-breakpoint
CREATE TABLE "auth"."account" (
	"id" uuid PRIMARY KEY NOT NULL,
	"account_id" text NOT NULL,
	"provider_id" text NOT NULL,
	"user_id" uuid NOT NULL,
	"access_token" text,
	"refresh_token" text,
	"id_token" text,
	"access_token_expires_at" timestamp with time zone,
	"refresh_token_expires_at" timestamp with time zone,
	"scope" text,
	"password" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "auth"."attempt" (
	"key" text PRIMARY KEY NOT NULL,
	"points" integer DEFAULT 0 NOT NULL,
	"expire" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "auth"."session" (
	"id" uuid PRIMARY KEY NOT NULL,
	"token" text NOT NULL,
	"user_id" uuid NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"ip_address" text,
	"user_agent" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "session_token_unique" UNIQUE("token")
);
--> statement-breakpoint
CREATE TABLE "auth"."user" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"email_verified" boolean DEFAULT false NOT NULL,
	"image" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "user_email_unique" UNIQUE("email")
);
--> statement-breakpoint
CREATE TABLE "auth"."verification" (
	"id" uuid PRIMARY KEY NOT NULL,
	"identifier" text NOT NULL,
	"value" text NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "availability_changes" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"reason_id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	"from_day" date NOT NULL,
	"state" text NOT NULL,
	"restrictions" text[] NOT NULL,
	"minutes_limit" integer,
	"expected_on" date,
	"set_by" uuid,
	"set_at" timestamp with time zone DEFAULT now() NOT NULL,
	"seq" integer NOT NULL,
	CONSTRAINT "availability_changes_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "availability_changes_state" CHECK ("availability_changes"."state" in ('full', 'modified', 'unavailable')),
	CONSTRAINT "availability_changes_restrictions" CHECK ("availability_changes"."restrictions" <@ array['no_cutting', 'no_contact', 'no_jumping', 'no_sprinting', 'straight_running_only', 'no_overhead', 'no_kicking', 'no_heading', 'non_weight_bearing', 'minutes_limit']::text[])
);
--> statement-breakpoint
CREATE TABLE "availability_reasons" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	"cause" text NOT NULL,
	"injury_id" uuid,
	"report_id" uuid,
	"recorded_by" uuid,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "availability_reasons_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "availability_reasons_cause" CHECK ("availability_reasons"."cause" in ('injury', 'illness', 'coach_report', 'other'))
);
--> statement-breakpoint
CREATE TABLE "import_aliases" (
	"organisation_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"header_key" text NOT NULL,
	"column_key" text NOT NULL,
	"set_by" uuid,
	"set_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "import_aliases_organisation_id_kind_header_key_pk" PRIMARY KEY("organisation_id","kind","header_key"),
	CONSTRAINT "import_aliases_header" UNIQUE("organisation_id","kind","header_key")
);
--> statement-breakpoint
CREATE TABLE "import_changes" (
	"organisation_id" uuid NOT NULL,
	"import_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"record_table" text NOT NULL,
	"record_key" jsonb NOT NULL,
	"before" jsonb,
	"result_version" integer NOT NULL,
	CONSTRAINT "import_changes_organisation_id_import_id_position_pk" PRIMARY KEY("organisation_id","import_id","position")
);
--> statement-breakpoint
CREATE TABLE "import_chunks" (
	"organisation_id" uuid NOT NULL,
	"import_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"bytes" "bytea" NOT NULL,
	CONSTRAINT "import_chunks_organisation_id_import_id_position_pk" PRIMARY KEY("organisation_id","import_id","position")
);
--> statement-breakpoint
CREATE TABLE "import_rows" (
	"organisation_id" uuid NOT NULL,
	"import_id" uuid NOT NULL,
	"line" integer NOT NULL,
	"cells" jsonb NOT NULL,
	"value" jsonb,
	"outcome" text NOT NULL,
	"problems" jsonb NOT NULL,
	"changes" jsonb NOT NULL,
	"warnings" jsonb NOT NULL,
	CONSTRAINT "import_rows_organisation_id_import_id_line_pk" PRIMARY KEY("organisation_id","import_id","line"),
	CONSTRAINT "import_rows_outcome" CHECK ("import_rows"."outcome" in ('create', 'update', 'unchanged', 'rejected'))
);
--> statement-breakpoint
CREATE TABLE "imports" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"kind" text NOT NULL,
	"state" text NOT NULL,
	"file_name" text NOT NULL,
	"file_hash" text NOT NULL,
	"file_size" integer NOT NULL,
	"reading" jsonb NOT NULL,
	"mapping" jsonb NOT NULL,
	"answers" jsonb NOT NULL,
	"questions" jsonb NOT NULL,
	"counts" jsonb NOT NULL,
	"progress_done" integer DEFAULT 0 NOT NULL,
	"progress_total" integer DEFAULT 0 NOT NULL,
	"failure" text,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"committed_by" uuid,
	"committed_at" timestamp with time zone,
	"undone_by" uuid,
	"undone_at" timestamp with time zone,
	CONSTRAINT "imports_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "imports_kind" CHECK ("imports"."kind" in ('roster', 'exposure')),
	CONSTRAINT "imports_state" CHECK ("imports"."state" in ('uploading', 'uploaded', 'reading', 'needs_answers', 'previewed', 'committing', 'committed', 'failed', 'cancelled', 'undone'))
);
--> statement-breakpoint
CREATE TABLE "coach_report_outcomes" (
	"organisation_id" uuid NOT NULL,
	"report_id" uuid NOT NULL,
	"injury_id" uuid,
	"reason" "bytea",
	"decided_by" uuid,
	"decided_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "coach_report_outcomes_organisation_id_report_id_pk" PRIMARY KEY("organisation_id","report_id")
);
--> statement-breakpoint
CREATE TABLE "coach_reports" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	"session_id" uuid,
	"onset_day" date NOT NULL,
	"onset_time" time(0),
	"body_area" text NOT NULL,
	"side" text NOT NULL,
	"suspected_concussion" boolean DEFAULT false NOT NULL,
	"could_continue" boolean,
	"signs" text[] NOT NULL,
	"phoned" "bytea",
	"note" "bytea",
	"reported_by" uuid,
	"reported_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "coach_reports_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "coach_reports_area" CHECK ("coach_reports"."body_area" in ('head', 'neck', 'shoulder', 'upper_arm', 'elbow', 'forearm', 'wrist', 'hand', 'chest', 'thoracic_spine', 'lumbosacral', 'abdomen', 'hip_groin', 'thigh', 'knee', 'lower_leg', 'ankle', 'foot', 'unspecified', 'multiple')),
	CONSTRAINT "coach_reports_side" CHECK ("coach_reports"."side" in ('left', 'right', 'both', 'none', 'unknown')),
	CONSTRAINT "coach_reports_signs" CHECK ("coach_reports"."signs" <@ array['pop', 'swelling', 'cannot_bear_weight', 'giving_way', 'locked', 'deformity', 'numb', 'cold_pale_foot', 'open_wound', 'loss_of_consciousness', 'seizure', 'worsening_headache', 'repeated_vomiting', 'drowsiness', 'double_vision', 'limb_weakness', 'agitation', 'neck_pain']::text[])
);
--> statement-breakpoint
CREATE TABLE "encounters" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	"day" date NOT NULL,
	"kind" text NOT NULL,
	"minutes" integer,
	"note" "bytea",
	"recorded_by" uuid,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "encounters_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "encounters_kind" CHECK ("encounters"."kind" in ('assessment', 'taping', 'rehabilitation', 'other'))
);
--> statement-breakpoint
CREATE TABLE "injuries" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "injuries_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "injury_diagnoses" (
	"organisation_id" uuid NOT NULL,
	"injury_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"position" integer NOT NULL,
	"tissue" text NOT NULL,
	"pathology" text NOT NULL,
	"diagnosis" "bytea",
	"certainty" text NOT NULL,
	CONSTRAINT "injury_diagnoses_organisation_id_injury_id_version_position_pk" PRIMARY KEY("organisation_id","injury_id","version","position"),
	CONSTRAINT "injury_diagnoses_tissue" CHECK ("injury_diagnoses"."tissue" in ('muscle_tendon', 'nervous', 'bone', 'cartilage_synovium', 'ligament_capsule', 'skin', 'vessels', 'stump', 'organs', 'non_specific')),
	CONSTRAINT "injury_diagnoses_pathology" CHECK ("injury_diagnoses"."pathology" in ('muscle_injury', 'contusion', 'compartment', 'tendinopathy', 'tendon_rupture', 'concussion', 'brain_cord', 'peripheral_nerve', 'fracture', 'stress', 'bone_contusion', 'avascular_necrosis', 'physis', 'cartilage', 'arthritis', 'synovitis', 'bursitis', 'sprain', 'chronic_instability', 'skin_contusion', 'laceration', 'abrasion', 'vascular', 'stump', 'organ', 'non_specific')),
	CONSTRAINT "injury_diagnoses_certainty" CHECK ("injury_diagnoses"."certainty" in ('suspected', 'clinical', 'imaging'))
);
--> statement-breakpoint
CREATE TABLE "injury_notes" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"injury_id" uuid NOT NULL,
	"text" "bytea" NOT NULL,
	"written_by" uuid,
	"written_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "injury_notes_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "injury_revisions" (
	"organisation_id" uuid NOT NULL,
	"injury_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"recorded_by" uuid,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"change_reason" text,
	"onset_day" date NOT NULL,
	"onset_time" time(0),
	"session_id" uuid,
	"outside_sport" boolean DEFAULT false NOT NULL,
	"body_area" text NOT NULL,
	"side" text NOT NULL,
	"suspected_concussion" boolean DEFAULT false NOT NULL,
	"could_continue" boolean,
	"onset" text,
	"contact" text,
	"movement" text,
	"minute_of_play" integer,
	"surface" text,
	"footwear" text,
	"warmed_up" boolean,
	"signs" text[] NOT NULL,
	"swelling_noticed" text,
	"first_care" text[] NOT NULL,
	"referred_to" text[] NOT NULL,
	"phoned" "bytea",
	"tissue" text,
	"pathology" text,
	"diagnosis" "bytea",
	"certainty" text,
	"surgery" boolean,
	"surgery_day" date,
	"description" "bytea",
	"subsequence" text,
	"subsequent_to" uuid,
	"closed_on" date,
	"withdrawn" boolean DEFAULT false NOT NULL,
	CONSTRAINT "injury_revisions_organisation_id_injury_id_version_pk" PRIMARY KEY("organisation_id","injury_id","version"),
	CONSTRAINT "injury_revisions_area" CHECK ("injury_revisions"."body_area" in ('head', 'neck', 'shoulder', 'upper_arm', 'elbow', 'forearm', 'wrist', 'hand', 'chest', 'thoracic_spine', 'lumbosacral', 'abdomen', 'hip_groin', 'thigh', 'knee', 'lower_leg', 'ankle', 'foot', 'unspecified', 'multiple')),
	CONSTRAINT "injury_revisions_side" CHECK ("injury_revisions"."side" in ('left', 'right', 'both', 'none', 'unknown')),
	CONSTRAINT "injury_revisions_onset" CHECK ("injury_revisions"."onset" in ('sudden', 'sudden_repetitive', 'gradual')),
	CONSTRAINT "injury_revisions_contact" CHECK ("injury_revisions"."contact" in ('non_contact', 'indirect_athlete', 'indirect_object', 'direct_athlete', 'direct_object', 'unknown')),
	CONSTRAINT "injury_revisions_movement" CHECK ("injury_revisions"."movement" in ('cutting', 'pivoting', 'landing', 'take_off', 'decelerating', 'accelerating', 'kicking', 'tackling', 'being_tackled', 'falling', 'collision', 'throwing', 'none', 'other', 'unknown')),
	CONSTRAINT "injury_revisions_surface" CHECK ("injury_revisions"."surface" in ('natural_grass', 'artificial_turf', 'wood', 'synthetic_court', 'sand', 'snow', 'other')),
	CONSTRAINT "injury_revisions_tissue" CHECK ("injury_revisions"."tissue" in ('muscle_tendon', 'nervous', 'bone', 'cartilage_synovium', 'ligament_capsule', 'skin', 'vessels', 'stump', 'organs', 'non_specific')),
	CONSTRAINT "injury_revisions_pathology" CHECK ("injury_revisions"."pathology" in ('muscle_injury', 'contusion', 'compartment', 'tendinopathy', 'tendon_rupture', 'concussion', 'brain_cord', 'peripheral_nerve', 'fracture', 'stress', 'bone_contusion', 'avascular_necrosis', 'physis', 'cartilage', 'arthritis', 'synovitis', 'bursitis', 'sprain', 'chronic_instability', 'skin_contusion', 'laceration', 'abrasion', 'vascular', 'stump', 'organ', 'non_specific')),
	CONSTRAINT "injury_revisions_certainty" CHECK ("injury_revisions"."certainty" in ('suspected', 'clinical', 'imaging')),
	CONSTRAINT "injury_revisions_subsequence" CHECK ("injury_revisions"."subsequence" in ('index', 'recurrent', 'exacerbation', 'local', 'other_site')),
	CONSTRAINT "injury_revisions_signs" CHECK ("injury_revisions"."signs" <@ array['pop', 'swelling', 'cannot_bear_weight', 'giving_way', 'locked', 'deformity', 'numb', 'cold_pale_foot', 'open_wound', 'loss_of_consciousness', 'seizure', 'worsening_headache', 'repeated_vomiting', 'drowsiness', 'double_vision', 'limb_weakness', 'agitation', 'neck_pain']::text[]),
	CONSTRAINT "injury_revisions_first_care" CHECK ("injury_revisions"."first_care" <@ array['stopped_play', 'ice', 'compression', 'immobilised', 'crutches']::text[]),
	CONSTRAINT "injury_revisions_referred_to" CHECK ("injury_revisions"."referred_to" <@ array['emergency_department', 'physician', 'orthopaedics', 'physiotherapy']::text[])
);
--> statement-breakpoint
CREATE TABLE "installation"."key_check" (
	"name" text PRIMARY KEY NOT NULL,
	"value" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "deliveries" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"template" text NOT NULL,
	"notice_id" uuid,
	"invitation_id" uuid,
	"guardian_id" uuid,
	"parameters" jsonb NOT NULL,
	"state" text DEFAULT 'waiting' NOT NULL,
	"attempts" integer DEFAULT 0 NOT NULL,
	"next_attempt_at" timestamp with time zone,
	"last_error" text,
	"provider_id" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"sent_at" timestamp with time zone,
	"delivered_at" timestamp with time zone,
	"failed_at" timestamp with time zone,
	"urgent" boolean DEFAULT false NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "deliveries_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "deliveries_state" CHECK ("deliveries"."state" in ('waiting', 'sending', 'sent', 'delivered', 'bounced', 'complained', 'failed', 'stopped'))
);
--> statement-breakpoint
CREATE TABLE "notice_events" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"notice_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"detail" "bytea",
	"by" uuid,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "notice_events_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "notice_links" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"notice_id" uuid NOT NULL,
	"token_hash" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"tries" integer DEFAULT 0 NOT NULL,
	"open_hash" text,
	"open_until" timestamp with time zone,
	CONSTRAINT "notice_links_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "notice_links_token" UNIQUE("organisation_id","token_hash")
);
--> statement-breakpoint
CREATE TABLE "notices" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"injury_id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	"guardian_id" uuid NOT NULL,
	"urgency" text NOT NULL,
	"language" text NOT NULL,
	"content" "bytea" NOT NULL,
	"answer_hash" text NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "notices_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "notices_urgency" CHECK ("notices"."urgency" in ('routine', 'urgent')),
	CONSTRAINT "notices_language" CHECK ("notices"."language" in ('en', 'es', 'pl', 'cy'))
);
--> statement-breakpoint
CREATE TABLE "audit_events" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"person_id" uuid,
	"acting_as" text NOT NULL,
	"action" text NOT NULL,
	"subject_id" text,
	"athlete_id" uuid,
	"request_id" text,
	"fields" jsonb NOT NULL,
	CONSTRAINT "audit_events_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "audit_seals" (
	"organisation_id" uuid NOT NULL,
	"position" bigint NOT NULL,
	"event_id" uuid NOT NULL,
	"hash" text NOT NULL,
	"sealed_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "audit_seals_organisation_id_position_pk" PRIMARY KEY("organisation_id","position")
);
--> statement-breakpoint
CREATE TABLE "form_drafts" (
	"organisation_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"form" text NOT NULL,
	"body" "bytea" NOT NULL,
	"saved_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "form_drafts_organisation_id_person_id_form_pk" PRIMARY KEY("organisation_id","person_id","form")
);
--> statement-breakpoint
CREATE TABLE "operations" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"body_hash" text NOT NULL,
	"result" jsonb NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "operations_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "action_alerts" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	"text" text NOT NULL,
	"agreed_with" text NOT NULL,
	"set_by" uuid,
	"set_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "action_alerts_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "athletes" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"given_name" text NOT NULL,
	"family_name" text NOT NULL,
	"name_key" text NOT NULL,
	"number" text,
	"date_of_birth" date,
	"sex" text DEFAULT 'not_stated' NOT NULL,
	"dominant_leg" text DEFAULT 'unknown' NOT NULL,
	"visitor" boolean DEFAULT false NOT NULL,
	"research_consent" boolean DEFAULT false NOT NULL,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "athletes_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "athletes_number" UNIQUE("organisation_id","number"),
	CONSTRAINT "athletes_sex" CHECK ("athletes"."sex" in ('female', 'male', 'not_stated')),
	CONSTRAINT "athletes_leg" CHECK ("athletes"."dominant_leg" in ('left', 'right', 'both', 'unknown'))
);
--> statement-breakpoint
CREATE TABLE "earlier_injuries" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	"body_area" text NOT NULL,
	"side" text NOT NULL,
	"pathology" text NOT NULL,
	"year" integer,
	"recorded_by" uuid,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "earlier_injuries_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "earlier_injuries_area" CHECK ("earlier_injuries"."body_area" in ('head', 'neck', 'shoulder', 'upper_arm', 'elbow', 'forearm', 'wrist', 'hand', 'chest', 'thoracic_spine', 'lumbosacral', 'abdomen', 'hip_groin', 'thigh', 'knee', 'lower_leg', 'ankle', 'foot', 'unspecified', 'multiple')),
	CONSTRAINT "earlier_injuries_side" CHECK ("earlier_injuries"."side" in ('left', 'right', 'both', 'none', 'unknown'))
);
--> statement-breakpoint
CREATE TABLE "guardians" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"email" text,
	"phone" text,
	"language" text DEFAULT 'en' NOT NULL,
	"wants_email" boolean DEFAULT true NOT NULL,
	"email_stopped_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "guardians_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "guardians_language" CHECK ("guardians"."language" in ('en', 'es', 'pl', 'cy'))
);
--> statement-breakpoint
CREATE TABLE "guardianships" (
	"organisation_id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	"guardian_id" uuid NOT NULL,
	"relation" text DEFAULT 'parent' NOT NULL,
	"may_be_told" boolean DEFAULT true NOT NULL,
	"may_decide" boolean DEFAULT true NOT NULL,
	"phone_order" integer DEFAULT 1 NOT NULL,
	"legal_limits" "bytea",
	"limits_review_on" date,
	"ended_at" timestamp with time zone,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "guardianships_organisation_id_athlete_id_guardian_id_pk" PRIMARY KEY("organisation_id","athlete_id","guardian_id"),
	CONSTRAINT "guardianships_relation" CHECK ("guardianships"."relation" in ('mother', 'father', 'parent', 'guardian', 'carer', 'other'))
);
--> statement-breakpoint
CREATE TABLE "roster_entries" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	"team_id" uuid NOT NULL,
	"from_day" date NOT NULL,
	"to_day" date,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "roster_entries_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "safeguarding_holds" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	"reason" "bytea",
	"set_by" uuid,
	"set_at" timestamp with time zone DEFAULT now() NOT NULL,
	"lifted_by" uuid,
	"lifted_at" timestamp with time zone,
	CONSTRAINT "safeguarding_holds_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "participations" (
	"organisation_id" uuid NOT NULL,
	"session_id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	"presence" text NOT NULL,
	"minutes" numeric(6, 2) DEFAULT 0 NOT NULL,
	"recorded_by" uuid,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "participations_organisation_id_session_id_athlete_id_pk" PRIMARY KEY("organisation_id","session_id","athlete_id"),
	CONSTRAINT "participations_presence" CHECK ("participations"."presence" in ('took_part', 'present_only', 'absent'))
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"team_id" uuid NOT NULL,
	"day" date NOT NULL,
	"start_time" time(0),
	"kind" text NOT NULL,
	"state" text DEFAULT 'planned' NOT NULL,
	"planned_minutes" integer,
	"actual_minutes" integer,
	"abandoned_after" integer,
	"cancel_reason" text,
	"surface" text,
	"venue_id" uuid,
	"exposure_grade" text DEFAULT 'none' NOT NULL,
	"headcount" integer,
	"headcount_minutes" numeric(6, 2),
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "sessions_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "sessions_kind" CHECK ("sessions"."kind" in ('training', 'match', 'strength', 'other')),
	CONSTRAINT "sessions_state" CHECK ("sessions"."state" in ('planned', 'held', 'abandoned', 'cancelled')),
	CONSTRAINT "sessions_grade" CHECK ("sessions"."exposure_grade" in ('recorded', 'headcount', 'estimated', 'none')),
	CONSTRAINT "sessions_surface" CHECK ("sessions"."surface" in ('natural_grass', 'artificial_turf', 'wood', 'synthetic_court', 'sand', 'snow', 'other'))
);
--> statement-breakpoint
CREATE TABLE "venues" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"address" text DEFAULT '' NOT NULL,
	"access" text DEFAULT '' NOT NULL,
	"defibrillator" text DEFAULT '' NOT NULL,
	"emergency_numbers" text DEFAULT '' NOT NULL,
	"surface" text,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "venues_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "venues_name" UNIQUE("organisation_id","name")
);
--> statement-breakpoint
CREATE TABLE "exercises" (
	"organisation_id" uuid NOT NULL,
	"programme_id" uuid NOT NULL,
	"programme_version" integer NOT NULL,
	"position" integer NOT NULL,
	"block" text NOT NULL,
	"name" text NOT NULL,
	"dose" text NOT NULL,
	"cue" text NOT NULL,
	"progressions" jsonb NOT NULL,
	CONSTRAINT "exercises_organisation_id_programme_id_programme_version_position_pk" PRIMARY KEY("organisation_id","programme_id","programme_version","position"),
	CONSTRAINT "exercises_block" CHECK ("exercises"."block" in ('running', 'strength', 'jumping_landing', 'balance', 'cutting_planting'))
);
--> statement-breakpoint
CREATE TABLE "programme_assignments" (
	"organisation_id" uuid NOT NULL,
	"team_id" uuid NOT NULL,
	"starts_on" date NOT NULL,
	"programme_id" uuid NOT NULL,
	"programme_version" integer NOT NULL,
	"target_session_share" numeric(4, 3) DEFAULT 0.8 NOT NULL,
	"target_per_week" integer DEFAULT 2 NOT NULL,
	"target_minutes" integer DEFAULT 15 NOT NULL,
	"target_block_share" numeric(4, 3) DEFAULT 1 NOT NULL,
	CONSTRAINT "programme_assignments_organisation_id_team_id_starts_on_pk" PRIMARY KEY("organisation_id","team_id","starts_on")
);
--> statement-breakpoint
CREATE TABLE "programmes" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "programmes_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "programmes_name" UNIQUE("organisation_id","name")
);
--> statement-breakpoint
CREATE TABLE "warm_up_athletes" (
	"organisation_id" uuid NOT NULL,
	"session_id" uuid NOT NULL,
	"athlete_id" uuid NOT NULL,
	CONSTRAINT "warm_up_athletes_organisation_id_session_id_athlete_id_pk" PRIMARY KEY("organisation_id","session_id","athlete_id")
);
--> statement-breakpoint
CREATE TABLE "warm_ups" (
	"organisation_id" uuid NOT NULL,
	"session_id" uuid NOT NULL,
	"outcome" text NOT NULL,
	"blocks" text[] NOT NULL,
	"skip_reason" text,
	"skip_note" text,
	"minutes" integer,
	"led_by" text,
	"programme_id" uuid,
	"programme_version" integer,
	"recorded_by" uuid,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "warm_ups_organisation_id_session_id_pk" PRIMARY KEY("organisation_id","session_id"),
	CONSTRAINT "warm_ups_outcome" CHECK ("warm_ups"."outcome" in ('full', 'part', 'skipped')),
	CONSTRAINT "warm_ups_blocks" CHECK ("warm_ups"."blocks" <@ array['running', 'strength', 'jumping_landing', 'balance', 'cutting_planting']::text[]),
	CONSTRAINT "warm_ups_reason" CHECK ("warm_ups"."skip_reason" in ('no_time', 'weather', 'no_space', 'leader_absent', 'forgot', 'other'))
);
--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "membership_roles" ADD CONSTRAINT "membership_roles_organisation_id_person_id_memberships_organisation_id_person_id_fk" FOREIGN KEY ("organisation_id","person_id") REFERENCES "public"."memberships"("organisation_id","person_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "membership_teams" ADD CONSTRAINT "membership_teams_organisation_id_person_id_memberships_organisation_id_person_id_fk" FOREIGN KEY ("organisation_id","person_id") REFERENCES "public"."memberships"("organisation_id","person_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "membership_teams" ADD CONSTRAINT "membership_teams_organisation_id_team_id_teams_organisation_id_id_fk" FOREIGN KEY ("organisation_id","team_id") REFERENCES "public"."teams"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "organisation_keys" ADD CONSTRAINT "organisation_keys_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "seasons" ADD CONSTRAINT "seasons_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sport_rules" ADD CONSTRAINT "sport_rules_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "teams" ADD CONSTRAINT "teams_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "auth"."account" ADD CONSTRAINT "account_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "auth"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "auth"."session" ADD CONSTRAINT "session_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "auth"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "availability_changes" ADD CONSTRAINT "availability_changes_organisation_id_reason_id_availability_reasons_organisation_id_id_fk" FOREIGN KEY ("organisation_id","reason_id") REFERENCES "public"."availability_reasons"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "availability_changes" ADD CONSTRAINT "availability_changes_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "availability_reasons" ADD CONSTRAINT "availability_reasons_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "availability_reasons" ADD CONSTRAINT "availability_reasons_organisation_id_injury_id_injuries_organisation_id_id_fk" FOREIGN KEY ("organisation_id","injury_id") REFERENCES "public"."injuries"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "availability_reasons" ADD CONSTRAINT "availability_reasons_organisation_id_report_id_coach_reports_organisation_id_id_fk" FOREIGN KEY ("organisation_id","report_id") REFERENCES "public"."coach_reports"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "import_aliases" ADD CONSTRAINT "import_aliases_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "import_changes" ADD CONSTRAINT "import_changes_organisation_id_import_id_imports_organisation_id_id_fk" FOREIGN KEY ("organisation_id","import_id") REFERENCES "public"."imports"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "import_chunks" ADD CONSTRAINT "import_chunks_organisation_id_import_id_imports_organisation_id_id_fk" FOREIGN KEY ("organisation_id","import_id") REFERENCES "public"."imports"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "import_rows" ADD CONSTRAINT "import_rows_organisation_id_import_id_imports_organisation_id_id_fk" FOREIGN KEY ("organisation_id","import_id") REFERENCES "public"."imports"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "imports" ADD CONSTRAINT "imports_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "coach_report_outcomes" ADD CONSTRAINT "coach_report_outcomes_organisation_id_report_id_coach_reports_organisation_id_id_fk" FOREIGN KEY ("organisation_id","report_id") REFERENCES "public"."coach_reports"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "coach_report_outcomes" ADD CONSTRAINT "coach_report_outcomes_organisation_id_injury_id_injuries_organisation_id_id_fk" FOREIGN KEY ("organisation_id","injury_id") REFERENCES "public"."injuries"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "coach_reports" ADD CONSTRAINT "coach_reports_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "coach_reports" ADD CONSTRAINT "coach_reports_organisation_id_session_id_sessions_organisation_id_id_fk" FOREIGN KEY ("organisation_id","session_id") REFERENCES "public"."sessions"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "encounters" ADD CONSTRAINT "encounters_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "injuries" ADD CONSTRAINT "injuries_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "injury_diagnoses" ADD CONSTRAINT "injury_diagnoses_organisation_id_injury_id_version_injury_revisions_organisation_id_injury_id_version_fk" FOREIGN KEY ("organisation_id","injury_id","version") REFERENCES "public"."injury_revisions"("organisation_id","injury_id","version") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "injury_notes" ADD CONSTRAINT "injury_notes_organisation_id_injury_id_injuries_organisation_id_id_fk" FOREIGN KEY ("organisation_id","injury_id") REFERENCES "public"."injuries"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "injury_revisions" ADD CONSTRAINT "injury_revisions_organisation_id_injury_id_injuries_organisation_id_id_fk" FOREIGN KEY ("organisation_id","injury_id") REFERENCES "public"."injuries"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "injury_revisions" ADD CONSTRAINT "injury_revisions_organisation_id_session_id_sessions_organisation_id_id_fk" FOREIGN KEY ("organisation_id","session_id") REFERENCES "public"."sessions"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "injury_revisions" ADD CONSTRAINT "injury_revisions_organisation_id_subsequent_to_injuries_organisation_id_id_fk" FOREIGN KEY ("organisation_id","subsequent_to") REFERENCES "public"."injuries"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "deliveries" ADD CONSTRAINT "deliveries_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "deliveries" ADD CONSTRAINT "deliveries_organisation_id_notice_id_notices_organisation_id_id_fk" FOREIGN KEY ("organisation_id","notice_id") REFERENCES "public"."notices"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notice_events" ADD CONSTRAINT "notice_events_organisation_id_notice_id_notices_organisation_id_id_fk" FOREIGN KEY ("organisation_id","notice_id") REFERENCES "public"."notices"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notice_links" ADD CONSTRAINT "notice_links_organisation_id_notice_id_notices_organisation_id_id_fk" FOREIGN KEY ("organisation_id","notice_id") REFERENCES "public"."notices"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notices" ADD CONSTRAINT "notices_organisation_id_injury_id_injuries_organisation_id_id_fk" FOREIGN KEY ("organisation_id","injury_id") REFERENCES "public"."injuries"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notices" ADD CONSTRAINT "notices_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notices" ADD CONSTRAINT "notices_organisation_id_guardian_id_guardians_organisation_id_id_fk" FOREIGN KEY ("organisation_id","guardian_id") REFERENCES "public"."guardians"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit_events" ADD CONSTRAINT "audit_events_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit_seals" ADD CONSTRAINT "audit_seals_organisation_id_event_id_audit_events_organisation_id_id_fk" FOREIGN KEY ("organisation_id","event_id") REFERENCES "public"."audit_events"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "form_drafts" ADD CONSTRAINT "form_drafts_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "operations" ADD CONSTRAINT "operations_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "action_alerts" ADD CONSTRAINT "action_alerts_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "athletes" ADD CONSTRAINT "athletes_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "earlier_injuries" ADD CONSTRAINT "earlier_injuries_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "guardians" ADD CONSTRAINT "guardians_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "guardianships" ADD CONSTRAINT "guardianships_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "guardianships" ADD CONSTRAINT "guardianships_organisation_id_guardian_id_guardians_organisation_id_id_fk" FOREIGN KEY ("organisation_id","guardian_id") REFERENCES "public"."guardians"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "roster_entries" ADD CONSTRAINT "roster_entries_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "roster_entries" ADD CONSTRAINT "roster_entries_organisation_id_team_id_teams_organisation_id_id_fk" FOREIGN KEY ("organisation_id","team_id") REFERENCES "public"."teams"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "safeguarding_holds" ADD CONSTRAINT "safeguarding_holds_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "participations" ADD CONSTRAINT "participations_organisation_id_session_id_sessions_organisation_id_id_fk" FOREIGN KEY ("organisation_id","session_id") REFERENCES "public"."sessions"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "participations" ADD CONSTRAINT "participations_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_organisation_id_team_id_teams_organisation_id_id_fk" FOREIGN KEY ("organisation_id","team_id") REFERENCES "public"."teams"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_organisation_id_venue_id_venues_organisation_id_id_fk" FOREIGN KEY ("organisation_id","venue_id") REFERENCES "public"."venues"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "venues" ADD CONSTRAINT "venues_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "exercises" ADD CONSTRAINT "exercises_organisation_id_programme_id_programmes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","programme_id") REFERENCES "public"."programmes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "programme_assignments" ADD CONSTRAINT "programme_assignments_organisation_id_team_id_teams_organisation_id_id_fk" FOREIGN KEY ("organisation_id","team_id") REFERENCES "public"."teams"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "programme_assignments" ADD CONSTRAINT "programme_assignments_organisation_id_programme_id_programmes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","programme_id") REFERENCES "public"."programmes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "programmes" ADD CONSTRAINT "programmes_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "warm_up_athletes" ADD CONSTRAINT "warm_up_athletes_organisation_id_session_id_warm_ups_organisation_id_session_id_fk" FOREIGN KEY ("organisation_id","session_id") REFERENCES "public"."warm_ups"("organisation_id","session_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "warm_up_athletes" ADD CONSTRAINT "warm_up_athletes_organisation_id_athlete_id_athletes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","athlete_id") REFERENCES "public"."athletes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "warm_ups" ADD CONSTRAINT "warm_ups_organisation_id_session_id_sessions_organisation_id_id_fk" FOREIGN KEY ("organisation_id","session_id") REFERENCES "public"."sessions"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "memberships_person_idx" ON "memberships" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "account_user_idx" ON "auth"."account" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "attempt_expire_idx" ON "auth"."attempt" USING btree ("expire");--> statement-breakpoint
CREATE INDEX "session_user_idx" ON "auth"."session" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "verification_identifier_idx" ON "auth"."verification" USING btree ("identifier");--> statement-breakpoint
CREATE INDEX "availability_changes_athlete_idx" ON "availability_changes" USING btree ("organisation_id","athlete_id","from_day");--> statement-breakpoint
CREATE INDEX "availability_changes_reason_idx" ON "availability_changes" USING btree ("organisation_id","reason_id","seq");--> statement-breakpoint
CREATE INDEX "availability_reasons_injury_idx" ON "availability_reasons" USING btree ("organisation_id","injury_id");--> statement-breakpoint
CREATE INDEX "availability_reasons_athlete_idx" ON "availability_reasons" USING btree ("organisation_id","athlete_id");--> statement-breakpoint
CREATE INDEX "import_rows_outcome_idx" ON "import_rows" USING btree ("organisation_id","import_id","outcome","line");--> statement-breakpoint
CREATE INDEX "imports_hash_idx" ON "imports" USING btree ("organisation_id","kind","file_hash");--> statement-breakpoint
CREATE INDEX "encounters_day_idx" ON "encounters" USING btree ("organisation_id","day");--> statement-breakpoint
CREATE INDEX "injuries_athlete_idx" ON "injuries" USING btree ("organisation_id","athlete_id");--> statement-breakpoint
CREATE INDEX "injury_notes_injury_idx" ON "injury_notes" USING btree ("organisation_id","injury_id");--> statement-breakpoint
CREATE INDEX "injury_revisions_onset_idx" ON "injury_revisions" USING btree ("organisation_id","onset_day");--> statement-breakpoint
CREATE INDEX "deliveries_state_idx" ON "deliveries" USING btree ("organisation_id","state","created_at");--> statement-breakpoint
CREATE INDEX "deliveries_notice_idx" ON "deliveries" USING btree ("organisation_id","notice_id");--> statement-breakpoint
CREATE INDEX "deliveries_provider_idx" ON "deliveries" USING btree ("organisation_id","provider_id");--> statement-breakpoint
CREATE INDEX "notice_events_notice_idx" ON "notice_events" USING btree ("organisation_id","notice_id","at");--> statement-breakpoint
CREATE INDEX "notices_injury_idx" ON "notices" USING btree ("organisation_id","injury_id");--> statement-breakpoint
CREATE INDEX "audit_events_at_idx" ON "audit_events" USING btree ("organisation_id","at");--> statement-breakpoint
CREATE INDEX "audit_events_athlete_idx" ON "audit_events" USING btree ("organisation_id","athlete_id","at");--> statement-breakpoint
CREATE INDEX "audit_seals_event_idx" ON "audit_seals" USING btree ("organisation_id","event_id");--> statement-breakpoint
CREATE INDEX "action_alerts_athlete_idx" ON "action_alerts" USING btree ("organisation_id","athlete_id");--> statement-breakpoint
CREATE INDEX "athletes_name_idx" ON "athletes" USING btree ("organisation_id","name_key");--> statement-breakpoint
CREATE INDEX "earlier_injuries_athlete_idx" ON "earlier_injuries" USING btree ("organisation_id","athlete_id");--> statement-breakpoint
CREATE INDEX "guardians_email_idx" ON "guardians" USING btree ("organisation_id","email");--> statement-breakpoint
CREATE INDEX "guardianships_guardian_idx" ON "guardianships" USING btree ("organisation_id","guardian_id");--> statement-breakpoint
CREATE INDEX "roster_entries_athlete_idx" ON "roster_entries" USING btree ("organisation_id","athlete_id");--> statement-breakpoint
CREATE INDEX "roster_entries_team_idx" ON "roster_entries" USING btree ("organisation_id","team_id","from_day");--> statement-breakpoint
CREATE INDEX "safeguarding_holds_athlete_idx" ON "safeguarding_holds" USING btree ("organisation_id","athlete_id");--> statement-breakpoint
CREATE INDEX "participations_athlete_idx" ON "participations" USING btree ("organisation_id","athlete_id");--> statement-breakpoint
CREATE INDEX "sessions_team_day_idx" ON "sessions" USING btree ("organisation_id","team_id","day");--> statement-breakpoint
CREATE INDEX "sessions_day_idx" ON "sessions" USING btree ("organisation_id","day");--> statement-breakpoint
CREATE INDEX "warm_up_athletes_athlete_idx" ON "warm_up_athletes" USING btree ("organisation_id","athlete_id");