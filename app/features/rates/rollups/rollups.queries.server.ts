import { sql } from "drizzle-orm";
import { addDays } from "~/platform/clock";
import type { Tx } from "~db/client.server";
import { exposureGroups } from "./exposure.queries.server";
import { injuryCounts } from "./rollups-injuries.queries.server";
import { markedSlices, markedWeeks, mondayOf } from "./rollups-marks.queries.server";

/** The SQL that brings roll-ups up to date. Every statement of one run must answer from the same snapshot. */

const org = (tx: Tx) => sql`${tx.scope.organisationId}::uuid`;
const array = (values: readonly string[]) => sql`${`{${values.join(",")}}`}`;

export async function listMarkedOrganisations(tx: Tx): Promise<string[]> {
  const rows = await tx.execute<{ id: string }>(sql`select distinct organisation_id as id from rollup_marks`);
  return rows.map(({ id }) => id);
}

export async function listMarks(tx: Tx, limit: number): Promise<string[]> {
  const rows = await tx.execute<{ id: string }>(
    sql`select id from rollup_marks where organisation_id = ${org(tx)} order by id limit ${limit}`,
  );
  return rows.map(({ id }) => id);
}

export const removeMarks = (tx: Tx, ids: readonly string[]) =>
  tx.execute(
    sql`delete from rollup_marks where organisation_id = ${org(tx)} and id = any(${array(ids)}::uuid[])`,
  );

/** A team's day, and a week by its Monday; ISO dates. */
export type Slices = { days: { teamId: string; day: string }[]; weeks: string[] };

export async function findMarkedSlices(tx: Tx, marks: readonly string[]): Promise<Slices> {
  const [row] = await tx.execute<Slices>(sql`
    with ${markedSlices(tx, sql`m.id = any(${array(marks)}::uuid[])`)}, ${markedWeeks(tx)}
    select
      (select coalesce(json_agg(json_build_object('teamId', team_id, 'day', day)), '[]') from marked_slices) as days,
      (select coalesce(json_agg(week), '[]') from marked_weeks) as weeks`);
  return row ?? { days: [], weeks: [] };
}

const span = (days: readonly string[]) => {
  const sorted = [...days].sort();
  return { from: sorted[0] ?? "", to: sorted.at(-1) ?? "", teamIds: null };
};

/** Counts the exposure of teams' days anew. */
export async function replaceExposure(tx: Tx, slices: Slices["days"]) {
  if (slices.length === 0) return;
  const days = slices.map(({ day }) => day);
  const listed = sql`(select team_id, day from unnest(
    ${array(slices.map(({ teamId }) => teamId))}::uuid[], ${array(days)}::date[]) as u(team_id, day))`;
  await tx.execute(sql`
    delete from exposure_rollup e where e.organisation_id = ${org(tx)} and (e.team_id, e.day) in ${listed}`);
  await tx.execute(sql`
    insert into exposure_rollup (organisation_id, team_id, day, kind, grade, aes, hours, groups)
    select ${org(tx)}, r.* from (${exposureGroups(tx, span(days), sql`(s.team_id, s.day) in ${listed}`)}) r`);
}

/** Counts the injuries of whole weeks anew. @param weeks their Mondays */
export async function replaceInjuries(tx: Tx, weeks: readonly string[]) {
  if (weeks.length === 0) return;
  const listed = sql`any(${array(weeks)}::date[])`;
  await tx.execute(sql`
    delete from injury_rollup i where i.organisation_id = ${org(tx)} and ${mondayOf(sql`i.day`)} = ${listed}`);
  const range = span(weeks);
  const counts = injuryCounts(
    tx,
    { ...range, to: addDays(range.to, 6) },
    (day) => sql`${mondayOf(day)} = ${listed}`,
  );
  await tx.execute(sql`
    insert into injury_rollup (organisation_id, day, team_id, kind, sex, age, gradual, left_out, aes, hours,
      time_loss_from, injuries)
    select ${org(tx)}, c.* from (${counts}) c`);
}
