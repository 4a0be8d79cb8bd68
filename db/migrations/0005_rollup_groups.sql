-- Sex and age move into one value per team, day, kind and grade. The rows are made anew by the job: until then every day
-- is marked and counted from the records.
truncate exposure_rollup;
--> statement-breakpoint
alter table exposure_rollup
  drop constraint exposure_rollup_pk,
  drop column sex,
  drop column age,
  add column groups json not null,
  add constraint exposure_rollup_pk primary key (organisation_id, day, team_id, kind, grade);
--> statement-breakpoint
alter table sessions no force row level security;
--> statement-breakpoint
alter table rollup_marks no force row level security;
--> statement-breakpoint
insert into rollup_marks (organisation_id, cause, team_id, from_day)
select distinct organisation_id, 'session', team_id, day from sessions
where state in ('held', 'abandoned') and exposure_grade <> 'none';
--> statement-breakpoint
alter table sessions force row level security;
--> statement-breakpoint
alter table rollup_marks force row level security;
