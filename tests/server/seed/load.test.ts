import { getTableName } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { identity } from "~/features/accounts/identity.server";
import { resolveMemberScope } from "~/features/accounts/scope.server";
import { timeLossOf } from "~/features/availability/availability";
import { contributionsOfInjuries } from "~/features/availability/availability.server";
import { ruleFor } from "~/features/sessions/exposure";
import { read } from "~db/client.server";
import { tenancy } from "~db/schema/tenancy";
import { loadDemo } from "~db/seed/load";
import { listDemoPeople } from "~db/seed/load/demo-people";
import { demoId } from "~db/seed/load/ids";
import { buildScenario } from "~db/seed/scenario";
import { addDays, daysBetween } from "~db/seed/scenario/days";
import { MARRAM_BAY, OTTERWICK } from "~db/seed/scenario/plan";
import { maintenance } from "../../harness";

const today = "2026-12-01";
const scenario = buildScenario({ today });
const maintenanceUrl = () => process.env.DATABASE_MAINTENANCE_URL ?? "";
const both = [MARRAM_BAY, OTTERWICK];
let seconds = 0;

beforeAll(async () => {
  const before = performance.now();
  expect(await loadDemo({ maintenanceUrl: maintenanceUrl(), today })).toEqual(both);
  seconds = (performance.now() - before) / 1000;
});

const own = <Row extends { organisation: string }>(rows: readonly Row[], slug: string) =>
  rows.filter(({ organisation }) => organisation === slug);

async function countRows(table: string) {
  const sql = maintenance();
  const rows = await sql<{ slug: string; rows: number }[]>`
    select o.slug, count(t.organisation_id)::int as rows
    from organisations o left join ${sql(table)} t on t.organisation_id = o.organisation_id group by o.slug`;
  return Object.fromEntries(rows.map(({ slug, rows: count }) => [slug, count]));
}

/** Every row of every table of an organisation as one hash per table. */
async function fingerprint() {
  const sql = maintenance();
  const hashes: Record<string, string | null> = {};
  for (const { table } of tenancy) {
    const name = getTableName(table);
    const [row] = await sql<{ hash: string | null }[]>`
      select md5(string_agg(t::text, '|' order by t::text)) as hash from ${sql(name)} t`;
    hashes[name] = row?.hash ?? null;
  }
  return hashes;
}

async function leadScope(slug: string) {
  const membership = own(scenario.memberships, slug).find(({ role }) => role === "lead");
  const scope = await resolveMemberScope(demoId("", "person", membership?.person ?? ""), slug);
  if (!scope) throw new Error(`No lead of ${slug}.`);
  return scope;
}

describe("what is loaded", () => {
  it("has as many records as the scenario, in each organisation", async () => {
    const expected = {
      seasons: scenario.seasons,
      teams: scenario.teams,
      venues: scenario.venues,
      memberships: scenario.memberships,
      athletes: scenario.athletes,
      guardians: scenario.guardians,
      guardianships: scenario.guardianships,
      roster_entries: scenario.roster,
      sessions: scenario.sessions,
      participations: scenario.participations,
      warm_ups: scenario.warmUps,
      injuries: scenario.injuries,
      coach_reports: scenario.coachReports,
      coach_report_outcomes: scenario.coachReports.filter(({ injury }) => injury !== null),
      encounters: scenario.encounters,
      notices: scenario.notices,
      deliveries: scenario.notices,
      no_injury_weeks: scenario.confirmedWeeks,
      injury_notes: scenario.injuries.flatMap(({ organisation, followUps }) =>
        followUps.map(() => ({ organisation })),
      ),
      earlier_injuries: scenario.athletes.flatMap(({ organisation, earlierInjuries }) =>
        earlierInjuries.map(() => ({ organisation })),
      ),
      action_alerts: scenario.athletes.flatMap(({ organisation, actionAlerts }) =>
        actionAlerts.map(() => ({ organisation })),
      ),
      safeguarding_holds: scenario.athletes.filter(({ safeguardingHold }) => safeguardingHold !== null),
    };
    for (const [table, rows] of Object.entries(expected))
      expect([table, await countRows(table)]).toEqual([
        table,
        Object.fromEntries(both.map((slug) => [slug, own(rows, slug).length])),
      ]);
  });

  it("has one plan for judging the programme in each organisation, written before the season under way", async () => {
    const rows = await maintenance()<{ slug: string; early: boolean }[]>`
      select o.slug, p.recorded_at < max(s.starts_on) as early
      from evaluation_plans p
      join organisations o on o.organisation_id = p.organisation_id
      join seasons s on s.organisation_id = p.organisation_id
      where s.starts_on <= ${today}::date
      group by o.slug, p.id, p.recorded_at order by o.slug`;
    expect([...rows]).toEqual([...both].sort().map((slug) => ({ slug, early: true })));
  });

  it("takes less than 30 seconds", () => {
    expect(seconds).toBeLessThan(30);
  });

  it("has the scenario's athlete-exposures and minutes per team and kind of session", async () => {
    const rows = await maintenance()<{ team: string; kind: string; aes: number; minutes: number }[]>`
      select s.team_id as team, s.kind, count(*)::int as aes, sum(p.minutes)::float as minutes
      from participations p
      join sessions s on s.organisation_id = p.organisation_id and s.id = p.session_id
      where p.presence = 'took_part' and p.minutes > 0 group by 1, 2`;
    const found = new Map(rows.map(({ team, kind, aes, minutes }) => [`${team} ${kind}`, [aes, minutes]]));
    const sessions = new Map(scenario.sessions.map((session) => [session.key, session]));
    const expected = new Map<string, number[]>();
    for (const { session: key, presence, minutes } of scenario.participations) {
      const session = sessions.get(key);
      if (!session || presence !== "took_part" || minutes <= 0) continue;
      const place = `${demoId(session.organisation, "team", session.team)} ${session.kind}`;
      const [aes = 0, sum = 0] = expected.get(place) ?? [];
      expected.set(place, [aes + 1, sum + minutes]);
    }
    expect(expected.size).toBeGreaterThan(30);
    expect(found).toEqual(expected);
  });

  it.each(both)("costs each injury of %s the days that the scenario made it cost", async (slug) => {
    const scope = await leadScope(slug);
    const injuries = own(scenario.injuries, slug);
    const idOf = (key: string) => demoId(slug, "injury", key);
    const parts = await read(scope, (tx) =>
      contributionsOfInjuries(
        tx,
        injuries.map(({ key }) => idOf(key)),
      ),
    );
    const lost = new Set(scenario.availability.map(({ injury }) => injury));
    for (const injury of injuries) {
      const onset = injury.at.slice(0, 10);
      const days = injury.fullOn ? daysBetween(onset, injury.fullOn) - 1 : daysBetween(onset, today);
      expect([injury.key, timeLossOf(onset, parts.get(idOf(injury.key)) ?? [], today)]).toEqual([
        injury.key,
        { days: lost.has(injury.key) ? days : 0, ongoing: injury.fullOn === null },
      ]);
    }
  });

  it("keeps everybody as available on every day as the scenario says", async () => {
    const rows = await maintenance()<{ athlete: string; from: string; to: string | null; state: string }[]>`
      select athlete_id as athlete, from_day::text as from, to_day::text as to, state
      from availability_contributions where state <> 'full'`;
    const line = (athlete: string, state: string, from: string, to: string | null) =>
      [athlete, state, from, to ?? "open"].join(" ");
    expect(rows.map((row) => line(row.athlete, row.state, row.from, row.to)).sort()).toEqual(
      scenario.availability
        .map(({ organisation, athlete, state, from, to }) =>
          line(demoId(organisation, "athlete", athlete), state, from, to),
        )
        .sort(),
    );
  });

  it("gives every team the rule of play of its sport and age", async () => {
    for (const { key, name, sports } of scenario.organisations) {
      const rules = await maintenance()<
        { sport: string; fromAge: number; playersOnField: number; regulationMinutes: number }[]
      >`select r.sport, r.from_age as "fromAge", r.players_on_field as "playersOnField",
          r.regulation_minutes as "regulationMinutes"
        from sport_rules r join organisations o on o.organisation_id = r.organisation_id where o.slug = ${key}`;
      for (const team of own(scenario.teams, key)) {
        const [stored] = await maintenance()<{ underAge: number | null }[]>`
          select under_age as "underAge" from teams where id = ${demoId(key, "team", team.key)}`;
        const wanted = sports.find(
          ({ sport, ageGroup }) => sport === team.sport && ageGroup === team.ageGroup.label,
        );
        const ofSport = rules.filter(({ sport }) => sport === team.sport);
        expect([name, team.name, ruleFor(ofSport, stored?.underAge ?? null)]).toMatchObject([
          name,
          team.name,
          { playersOnField: wanted?.playersOnField, regulationMinutes: wanted?.regulationMinutes },
        ]);
      }
    }
  });

  it("names who was warmed up: whoever took part, less who missed it", async () => {
    const rows = await maintenance()<{ session: string; athletes: number }[]>`
      select session_id as session, count(*)::int as athletes from warm_up_athletes group by 1`;
    const found = new Map(rows.map(({ session, athletes }) => [session, athletes]));
    const tookPart = new Map<string, number>();
    for (const { session, presence } of scenario.participations)
      if (presence === "took_part") tookPart.set(session, (tookPart.get(session) ?? 0) + 1);
    const expected = new Map(
      scenario.warmUps.flatMap(({ organisation, session, outcome, notWarmedUp }) => {
        const count = (tookPart.get(session) ?? 0) - notWarmedUp.length;
        return outcome === "skipped" || count <= 0
          ? []
          : [[demoId(organisation, "session", session), count] as const];
      }),
    );
    expect(found).toEqual(expected);
  });

  it("records nothing as done later than now, and confirms weeks by their Monday", async () => {
    for (const [table, column] of [
      ["participations", "recorded_at"],
      ["injury_revisions", "recorded_at"],
      ["injury_notes", "written_at"],
      ["availability_changes", "set_at"],
      ["notice_events", "at"],
      ["coach_reports", "reported_at"],
      ["no_injury_weeks", "confirmed_at"],
    ] as const) {
      const sql = maintenance();
      const [row] = await sql<{ late: number }[]>`
        select count(*)::int as late from ${sql(table)} where ${sql(column)} > now()`;
      expect([table, row?.late]).toEqual([table, 0]);
    }
    const [row] = await maintenance()<{ others: number }[]>`
      select count(*)::int as others from no_injury_weeks where extract(isodow from week_start) <> 1`;
    expect(row?.others).toBe(0);
  });

  it("names an actor who is a member for every record", async () => {
    for (const [table, column] of [
      ["participations", "recorded_by"],
      ["sessions", "created_by"],
      ["injury_revisions", "recorded_by"],
      ["injury_notes", "written_by"],
      ["availability_changes", "set_by"],
      ["coach_reports", "reported_by"],
      ["encounters", "recorded_by"],
      ["no_injury_weeks", "confirmed_by"],
      ["evaluation_plans", "recorded_by"],
    ] as const) {
      const sql = maintenance();
      const [row] = await sql<{ strangers: number }[]>`
        select count(*)::int as strangers from ${sql(table)} t left join memberships m
          on m.organisation_id = t.organisation_id and m.person_id = t.${sql(column)}
        where m.person_id is null`;
      expect([table, row?.strangers]).toEqual([table, 0]);
    }
  });

  it("leaves nothing to be sent", async () => {
    const [waiting] = await maintenance()<{ rows: number }[]>`
      select count(*)::int as rows from deliveries where state in ('waiting', 'sending', 'sent')`;
    const [jobs] = await maintenance()<{ rows: number }[]>`
      select count(*)::int as rows from deliveries d where d.next_attempt_at is not null`;
    expect([waiting?.rows, jobs?.rows]).toEqual([0, 0]);
  });
});

describe("who signs in", () => {
  it("is one per role of the club, one of the school and one of both, each with the demo's password", async () => {
    const people = listDemoPeople(scenario);
    expect(people.map(({ role, organisation }) => `${role}, ${organisation}`)).toEqual([
      "admin, Marram Bay Athletic",
      "lead, Marram Bay Athletic",
      "trainer, Marram Bay Athletic",
      "coach, Marram Bay Athletic",
      "trainer, Otterwick Secondary School",
      "coach, Marram Bay Athletic and Otterwick Secondary School",
    ]);
    for (const { email, password } of people) {
      const { user } = await identity().auth.api.signInEmail({ body: { email, password } });
      expect(user.email).toBe(email);
    }
  });

  it.each(both)("has the confirmed roles and the teams of %s that the scenario gives them", async (slug) => {
    for (const { person, role, teams } of own(scenario.memberships, slug)) {
      const scope = await resolveMemberScope(demoId("", "person", person), slug);
      const listed = scope?.teams;
      expect([person, scope?.roles, scope?.unconfirmed]).toEqual([person, [role], []]);
      expect(typeof listed === "object" ? [...listed].sort() : listed).toEqual(
        teams === "all" ? "all" : teams.map((team) => demoId(slug, "team", team)).sort(),
      );
    }
  });
});

describe("loading again", () => {
  it("changes nothing, on the same day or a later one", async () => {
    const before = await fingerprint();
    expect(before.participations).toBeTruthy();
    expect(await loadDemo({ maintenanceUrl: maintenanceUrl(), today })).toEqual([]);
    expect(await loadDemo({ maintenanceUrl: maintenanceUrl(), today: addDays(today, 30) })).toEqual([]);
    expect(await fingerprint()).toEqual(before);
  });

  it("would give the same ids", () => {
    expect(demoId(MARRAM_BAY, "athlete", "MB-0001")).toBe(demoId(MARRAM_BAY, "athlete", "MB-0001"));
    expect(demoId(MARRAM_BAY, "athlete", "MB-0001")).toBe("32522e35-5348-8604-9e32-266e34bfbc1c");
    expect(demoId(OTTERWICK, "athlete", "MB-0001")).not.toBe(demoId(MARRAM_BAY, "athlete", "MB-0001"));
  });
});
