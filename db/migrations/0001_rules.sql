-- What the schema builder cannot say: the exclusion of overlapping roster entries and the two reading views.
create extension if not exists btree_gist;
--> statement-breakpoint
alter table roster_entries
  add constraint roster_entries_order check (to_day is null or to_day >= from_day),
  add constraint roster_entries_no_overlap exclude using gist (
    organisation_id with =,
    athlete_id with =,
    team_id with =,
    daterange(from_day, to_day, '[]') with &&
  );
--> statement-breakpoint
alter table availability_changes
  add constraint availability_changes_seq unique (organisation_id, reason_id, seq);
--> statement-breakpoint
alter table participations
  add constraint participations_minutes check (
    minutes >= 0 and minutes <= 1440 and (presence = 'took_part' or minutes = 0)
  );
--> statement-breakpoint
-- The current revision of each injury. security_invoker: the reader's own row-level security applies.
create view current_injuries with (security_invoker = true) as
select i.athlete_id, i.created_by, i.created_at, r.*
from injuries i
join injury_revisions r
  on r.organisation_id = i.organisation_id and r.injury_id = i.id and r.version = i.version;
--> statement-breakpoint
-- A change holds from its day on and sets aside whatever was entered before it for that day or later;
-- so the days of one reason's contributions never overlap. to_day is inclusive, null while it still holds.
create view availability_contributions with (security_invoker = true) as
select
  c.organisation_id, c.id, c.reason_id, c.athlete_id, c.state, c.restrictions, c.minutes_limit,
  c.expected_on, c.set_by, c.set_at, c.seq, c.from_day,
  (lead(c.from_day) over (partition by c.organisation_id, c.reason_id order by c.from_day)) - 1 as to_day
from availability_changes c
where not exists (
  select 1 from availability_changes later
  where later.organisation_id = c.organisation_id and later.reason_id = c.reason_id
    and later.seq > c.seq and later.from_day <= c.from_day
);
