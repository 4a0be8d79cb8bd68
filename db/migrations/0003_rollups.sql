CREATE TABLE "exposure_rollup" (
	"organisation_id" uuid NOT NULL,
	"day" date NOT NULL,
	"team_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"grade" text NOT NULL,
	"sex" text NOT NULL,
	"age" smallint NOT NULL,
	"aes" double precision NOT NULL,
	"hours" double precision NOT NULL,
	CONSTRAINT "exposure_rollup_pk" PRIMARY KEY("organisation_id","day","team_id","kind","grade","sex","age")
);
--> statement-breakpoint
CREATE TABLE "injury_rollup" (
	"organisation_id" uuid NOT NULL,
	"day" date NOT NULL,
	"team_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"sex" text NOT NULL,
	"age" smallint NOT NULL,
	"gradual" boolean NOT NULL,
	"left_out" text NOT NULL,
	"aes" boolean NOT NULL,
	"hours" boolean NOT NULL,
	"time_loss_from" date NOT NULL,
	"injuries" integer NOT NULL,
	CONSTRAINT "injury_rollup_pk" PRIMARY KEY("organisation_id","day","team_id","kind","sex","age","gradual","left_out","aes","hours","time_loss_from")
);
--> statement-breakpoint
CREATE TABLE "rollup_marks" (
	"organisation_id" uuid NOT NULL,
	"id" uuid DEFAULT gen_random_uuid() NOT NULL,
	"cause" text NOT NULL,
	"team_id" uuid,
	"session_id" uuid,
	"athlete_id" uuid,
	"injury_id" uuid,
	"reason_id" uuid,
	"sport" text,
	"from_day" date,
	"to_day" date,
	CONSTRAINT "rollup_marks_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "rollup_marks_cause" CHECK ("rollup_marks"."cause" in ('session', 'attendance', 'athlete', 'roster', 'availability', 'team', 'sport_rule', 'injury', 'organisation'))
);
--> statement-breakpoint
ALTER TABLE "exposure_rollup" ADD CONSTRAINT "exposure_rollup_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "injury_rollup" ADD CONSTRAINT "injury_rollup_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rollup_marks" ADD CONSTRAINT "rollup_marks_organisation_id_organisations_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisations"("organisation_id") ON DELETE no action ON UPDATE no action;
--> statement-breakpoint
-- Marks: what was written since the roll-ups were made. Each statement marks what it changed, in its own transaction and
-- with the writer's own rights; a mark holds ids that the writer had in hand, so nothing is looked up here. What a mark
-- touches is found by whoever reads it (app/features/rates/rollups-marks.queries.server.ts).
create function mark_sessions() returns trigger language plpgsql as $$
begin
  if tg_op = 'UPDATE' then
    insert into public.rollup_marks (organisation_id, cause, session_id, team_id, from_day)
    select distinct o.organisation_id, 'session', o.id, slice.team_id, slice.day
    from old_rows o
    join new_rows n on n.organisation_id = o.organisation_id and n.id = o.id
    cross join lateral (values (o.team_id, o.day), (n.team_id, n.day)) as slice(team_id, day)
    where (o.team_id, o.day, o.kind, o.state, o.abandoned_after, o.exposure_grade, o.headcount, o.headcount_minutes)
      is distinct from
      (n.team_id, n.day, n.kind, n.state, n.abandoned_after, n.exposure_grade, n.headcount, n.headcount_minutes);
  elsif tg_op = 'INSERT' then
    insert into public.rollup_marks (organisation_id, cause, team_id, from_day)
    select distinct organisation_id, 'session', team_id, day from new_rows
    where state in ('held', 'abandoned') and exposure_grade <> 'none';
  else
    insert into public.rollup_marks (organisation_id, cause, team_id, from_day)
    select distinct organisation_id, 'session', team_id, day from old_rows
    where state in ('held', 'abandoned') and exposure_grade <> 'none';
  end if;
  return null;
end $$;
--> statement-breakpoint
create trigger mark_inserted after insert on sessions
  referencing new table as new_rows for each statement execute function mark_sessions();
--> statement-breakpoint
create trigger mark_updated after update on sessions
  referencing old table as old_rows new table as new_rows for each statement execute function mark_sessions();
--> statement-breakpoint
create trigger mark_deleted after delete on sessions
  referencing old table as old_rows for each statement execute function mark_sessions();
--> statement-breakpoint
create function mark_participations() returns trigger language plpgsql as $$
begin
  if tg_op = 'UPDATE' then
    insert into public.rollup_marks (organisation_id, cause, session_id)
    select distinct o.organisation_id, 'attendance', o.session_id
    from old_rows o
    join new_rows n on n.organisation_id = o.organisation_id and n.session_id = o.session_id
      and n.athlete_id = o.athlete_id
    where (o.presence, o.minutes) is distinct from (n.presence, n.minutes) and (o.minutes > 0 or n.minutes > 0);
  elsif tg_op = 'INSERT' then
    insert into public.rollup_marks (organisation_id, cause, session_id)
    select distinct organisation_id, 'attendance', session_id from new_rows where minutes > 0;
  else
    insert into public.rollup_marks (organisation_id, cause, session_id)
    select distinct organisation_id, 'attendance', session_id from old_rows where minutes > 0;
  end if;
  return null;
end $$;
--> statement-breakpoint
create trigger mark_inserted after insert on participations
  referencing new table as new_rows for each statement execute function mark_participations();
--> statement-breakpoint
create trigger mark_updated after update on participations
  referencing old table as old_rows new table as new_rows for each statement execute function mark_participations();
--> statement-breakpoint
create trigger mark_deleted after delete on participations
  referencing old table as old_rows for each statement execute function mark_participations();
--> statement-breakpoint
-- A new athlete has no exposure yet, and one that still has some cannot be deleted.
create function mark_athletes() returns trigger language plpgsql as $$
begin
  insert into public.rollup_marks (organisation_id, cause, athlete_id)
  select o.organisation_id, 'athlete', o.id
  from old_rows o
  join new_rows n on n.organisation_id = o.organisation_id and n.id = o.id
  where (o.sex, o.date_of_birth, o.archived_at) is distinct from (n.sex, n.date_of_birth, n.archived_at);
  return null;
end $$;
--> statement-breakpoint
create trigger mark_updated after update on athletes
  referencing old table as old_rows new table as new_rows for each statement execute function mark_athletes();
--> statement-breakpoint
create function mark_roster_entries() returns trigger language plpgsql as $$
begin
  if tg_op <> 'INSERT' then
    insert into public.rollup_marks (organisation_id, cause, team_id, athlete_id, from_day, to_day)
    select organisation_id, 'roster', team_id, athlete_id, from_day, to_day from old_rows;
  end if;
  if tg_op <> 'DELETE' then
    insert into public.rollup_marks (organisation_id, cause, team_id, athlete_id, from_day, to_day)
    select organisation_id, 'roster', team_id, athlete_id, from_day, to_day from new_rows;
  end if;
  return null;
end $$;
--> statement-breakpoint
create trigger mark_inserted after insert on roster_entries
  referencing new table as new_rows for each statement execute function mark_roster_entries();
--> statement-breakpoint
create trigger mark_updated after update on roster_entries
  referencing old table as old_rows new table as new_rows for each statement execute function mark_roster_entries();
--> statement-breakpoint
create trigger mark_deleted after delete on roster_entries
  referencing old table as old_rows for each statement execute function mark_roster_entries();
--> statement-breakpoint
create function mark_availability_changes() returns trigger language plpgsql as $$
begin
  if tg_op <> 'INSERT' then
    insert into public.rollup_marks (organisation_id, cause, athlete_id, reason_id, from_day)
    select organisation_id, 'availability', athlete_id, reason_id, min(from_day) from old_rows group by 1, 3, 4;
  end if;
  if tg_op <> 'DELETE' then
    insert into public.rollup_marks (organisation_id, cause, athlete_id, reason_id, from_day)
    select organisation_id, 'availability', athlete_id, reason_id, min(from_day) from new_rows group by 1, 3, 4;
  end if;
  return null;
end $$;
--> statement-breakpoint
create trigger mark_inserted after insert on availability_changes
  referencing new table as new_rows for each statement execute function mark_availability_changes();
--> statement-breakpoint
create trigger mark_updated after update on availability_changes
  referencing old table as old_rows new table as new_rows for each statement execute function mark_availability_changes();
--> statement-breakpoint
create trigger mark_deleted after delete on availability_changes
  referencing old table as old_rows for each statement execute function mark_availability_changes();
--> statement-breakpoint
create function mark_teams() returns trigger language plpgsql as $$
begin
  insert into public.rollup_marks (organisation_id, cause, team_id)
  select o.organisation_id, 'team', o.id
  from old_rows o
  join new_rows n on n.organisation_id = o.organisation_id and n.id = o.id
  where (o.sport, o.under_age) is distinct from (n.sport, n.under_age);
  return null;
end $$;
--> statement-breakpoint
create trigger mark_updated after update on teams
  referencing old table as old_rows new table as new_rows for each statement execute function mark_teams();
--> statement-breakpoint
create function mark_sport_rules() returns trigger language plpgsql as $$
begin
  if tg_op <> 'INSERT' then
    insert into public.rollup_marks (organisation_id, cause, sport)
    select distinct organisation_id, 'sport_rule', sport from old_rows;
  end if;
  if tg_op <> 'DELETE' then
    insert into public.rollup_marks (organisation_id, cause, sport)
    select distinct organisation_id, 'sport_rule', sport from new_rows;
  end if;
  return null;
end $$;
--> statement-breakpoint
create trigger mark_inserted after insert on sport_rules
  referencing new table as new_rows for each statement execute function mark_sport_rules();
--> statement-breakpoint
create trigger mark_updated after update on sport_rules
  referencing old table as old_rows new table as new_rows for each statement execute function mark_sport_rules();
--> statement-breakpoint
create trigger mark_deleted after delete on sport_rules
  referencing old table as old_rows for each statement execute function mark_sport_rules();
--> statement-breakpoint
create function mark_injuries() returns trigger language plpgsql as $$
begin
  if tg_op = 'UPDATE' or tg_op = 'INSERT' then
    insert into public.rollup_marks (organisation_id, cause, injury_id)
    select organisation_id, 'injury', id from new_rows;
  end if;
  return null;
end $$;
--> statement-breakpoint
create trigger mark_inserted after insert on injuries
  referencing new table as new_rows for each statement execute function mark_injuries();
--> statement-breakpoint
create trigger mark_updated after update on injuries
  referencing new table as new_rows for each statement execute function mark_injuries();
--> statement-breakpoint
-- Revisions that are still there lead to every day an injury was ever counted on; one that is erased says its own.
create function mark_injury_revisions() returns trigger language plpgsql as $$
begin
  if tg_op <> 'INSERT' then
    insert into public.rollup_marks (organisation_id, cause, injury_id, session_id, from_day)
    select organisation_id, 'injury', injury_id, session_id, onset_day from old_rows;
  end if;
  if tg_op <> 'DELETE' then
    insert into public.rollup_marks (organisation_id, cause, injury_id)
    select distinct organisation_id, 'injury', injury_id from new_rows;
  end if;
  return null;
end $$;
--> statement-breakpoint
create trigger mark_inserted after insert on injury_revisions
  referencing new table as new_rows for each statement execute function mark_injury_revisions();
--> statement-breakpoint
create trigger mark_updated after update on injury_revisions
  referencing old table as old_rows new table as new_rows for each statement execute function mark_injury_revisions();
--> statement-breakpoint
create trigger mark_deleted after delete on injury_revisions
  referencing old table as old_rows for each statement execute function mark_injury_revisions();
--> statement-breakpoint
create function mark_availability_reasons() returns trigger language plpgsql as $$
begin
  if tg_op <> 'INSERT' then
    insert into public.rollup_marks (organisation_id, cause, injury_id)
    select distinct organisation_id, 'injury', injury_id from old_rows where injury_id is not null;
  end if;
  if tg_op <> 'DELETE' then
    insert into public.rollup_marks (organisation_id, cause, injury_id)
    select distinct organisation_id, 'injury', injury_id from new_rows where injury_id is not null;
  end if;
  return null;
end $$;
--> statement-breakpoint
create trigger mark_inserted after insert on availability_reasons
  referencing new table as new_rows for each statement execute function mark_availability_reasons();
--> statement-breakpoint
create trigger mark_updated after update on availability_reasons
  referencing old table as old_rows new table as new_rows for each statement execute function mark_availability_reasons();
--> statement-breakpoint
create trigger mark_deleted after delete on availability_reasons
  referencing old table as old_rows for each statement execute function mark_availability_reasons();
--> statement-breakpoint
-- The day on which an athlete left, up to which time loss counts, is read in the organisation's time zone.
create function mark_organisations() returns trigger language plpgsql as $$
begin
  insert into public.rollup_marks (organisation_id, cause)
  select o.organisation_id, 'organisation'
  from old_rows o
  join new_rows n on n.organisation_id = o.organisation_id
  where o.time_zone is distinct from n.time_zone;
  return null;
end $$;
--> statement-breakpoint
create trigger mark_updated after update on organisations
  referencing old table as old_rows new table as new_rows for each statement execute function mark_organisations();
--> statement-breakpoint
-- What is there already is marked, so that the first run of the job counts it. The owner is bound by row-level security
-- too and has no organisation here; the policies are made after the migrations.
alter table sessions no force row level security;
--> statement-breakpoint
alter table injuries no force row level security;
--> statement-breakpoint
insert into rollup_marks (organisation_id, cause, team_id, from_day)
select distinct organisation_id, 'session', team_id, day from sessions
where state in ('held', 'abandoned') and exposure_grade <> 'none';
--> statement-breakpoint
insert into rollup_marks (organisation_id, cause, injury_id)
select organisation_id, 'injury', id from injuries;
--> statement-breakpoint
alter table sessions force row level security;
--> statement-breakpoint
alter table injuries force row level security;
