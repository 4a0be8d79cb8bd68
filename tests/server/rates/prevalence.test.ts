import { beforeAll, describe, expect, it } from "vitest";
import { tableFileOf } from "~/features/rates/csv-views.server";
import { peopleGroupings } from "~/features/rates/prevalence/prevalence";
import { countPrevalence, prevalenceViewOf } from "~/features/rates/prevalence/prevalence-view.server";
import { addDays, weekStart } from "~/platform/clock";
import type { Scope } from "~db/client.server";
import {
  maintenance,
  makeOrganisation,
  makePerson,
  makeSeason,
  memberScope,
  staffScope,
} from "../../harness";
import { addReasons, type Club, meanShare, parts, type Question, walkDays } from "./prevalence-walk";
import { figureOf, linesOf, open, plant, sum } from "./views-by-hand";

/** The figures of the page against a walk through every day of every athlete. */

describe("the page of prevalence", () => {
  let club: Club & { lead: Scope; trainer: Scope };

  beforeAll(async () => {
    const { organisation, plan, lead, today } = await plant(13, addReasons);
    // Some of what is no injury is neither an illness, and one athlete has left.
    const causes = new Map(
      plan.changes.map(({ reasonId, injuryId }) => [reasonId, injuryId ? "injury" : "illness"]),
    );
    const others = [...causes].filter(([, cause]) => cause === "illness").map(([id]) => id);
    const owner = maintenance();
    for (const [index, id] of others.entries()) {
      if (index % 3 === 2) continue;
      const cause = index % 3 === 0 ? "other" : "coach_report";
      await owner`update availability_reasons set cause = ${cause} where organisation_id = ${organisation.id} and id = ${id}`;
      causes.set(id, "other");
    }
    const left = { athleteId: plan.athletes[5]?.id ?? "", day: addDays(today, -40) };
    await owner`update athletes set archived_at = ${`${left.day}T12:00:00Z`}
      where organisation_id = ${organisation.id} and id = ${left.athleteId}`;
    const teams = plan.teams.slice(0, 2).map(({ id }) => id);
    const trainer = await memberScope(
      await makePerson(organisation, { roles: ["trainer"], teams }),
      organisation,
    );
    club = { plan, today, left, causes, lead, trainer };
  });

  const found = (scope: Scope, search: string) =>
    open(scope, search, (tx, view) => countPrevalence(tx, view).then(({ parts: p }) => p));

  it("needs a club in which every rule has something to decide", () => {
    const walk = walkDays(club, { by: "team" });
    const heads = sum(
      Object.entries(walk).flatMap(([key, { days }]) => (key === "" ? [] : days.map(({ roster }) => roster))),
    );
    expect(heads).toBeGreaterThan(sum(walk[""]?.days.map(({ roster }) => roster) ?? []));
    for (const part of parts)
      expect(sum(walk[""]?.days.map((day) => day[part]) ?? []), part).toBeGreaterThan(10);
    expect(Object.keys(walkDays(club, { by: "age" })).length).toBeGreaterThan(4);
    const twice = (walk[""]?.days ?? []).some(
      ({ limited, injury, illness, other }) => injury + illness + other > limited,
    );
    expect(twice).toBe(true);
  });

  it.each(peopleGroupings)("equals a walk through every day, by week and by %s", async (by) => {
    const walk = walkDays(club, { by });
    const { whole, weeks, groups } = await found(club.lead, `?by=${by}`);
    expect(groups.map(({ group }) => group.key).sort()).toEqual(Object.keys(walk).filter(Boolean).sort());
    for (const row of [
      { key: "", ...whole },
      ...groups.map(({ group, ...rest }) => ({ key: group.key, ...rest })),
    ]) {
      const own = walk[row.key];
      expect(row.roster, row.key).toBeCloseTo(
        sum(own?.days.map(({ roster }) => roster) ?? []) / (own?.days.length ?? 0),
        9,
      );
      expect(row.affected, row.key).toBe(own?.affected.size);
      for (const part of parts)
        expect(row.shares?.[part].estimate, `${row.key} ${part}`).toBeCloseTo(
          meanShare(own?.days ?? [], part),
          9,
        );
    }
    expect(weeks.map(({ week }) => week)).toEqual(Object.keys(walk[""]?.weeks ?? {}));
    for (const { week, shares } of weeks)
      for (const part of parts)
        expect(shares[part].estimate, `${week} ${part}`).toBeCloseTo(
          meanShare(walk[""]?.weeks[week] ?? [], part),
          9,
        );
    expect(weeks.at(-1)?.week).toBe(weekStart(club.today));
    expect(weeks.at(-1)?.finished).toBe(false);
  });

  it.each([
    ["sex=female", { by: "team", sex: "female" }],
    ["age=15-16", { by: "sex", age: "15-16" }],
    ["age=unknown", { by: "sex", age: "unknown" }],
    ["sport=soccer&sex=male", { by: "age", sport: "soccer", sex: "male" }],
  ] satisfies [string, Question][])(
    "equals the walk where it is narrowed to %s",
    async (search, question) => {
      const walk = walkDays(club, question);
      const { whole, groups } = await found(club.lead, `?by=${question.by}&${search}`);
      expect(whole?.shares.limited.estimate).toBeCloseTo(meanShare(walk[""]?.days ?? [], "limited"), 9);
      expect(groups.map(({ group }) => group.key).sort()).toEqual(Object.keys(walk).filter(Boolean).sort());
      for (const { group, shares } of groups)
        expect(shares.limited.estimate, group.key).toBeCloseTo(
          meanShare(walk[group.key]?.days ?? [], "limited"),
          9,
        );
    },
  );

  it("does not change with what belongs to injuries alone", async () => {
    const plain = await found(club.lead, "?by=sex");
    expect(
      await found(club.lead, "?by=sex&area=ankle&side=left&injuries=medical-attention&sessions=match"),
    ).toEqual(plain);
  });

  it("shows a trainer of listed teams their own, with the state that any reason gives", async () => {
    const teamIds = club.plan.teams.slice(0, 2).map(({ id }) => id);
    const walk = walkDays(club, { by: "team", teamIds });
    const { whole, groups } = await found(club.trainer, "?by=team");
    expect(groups.map(({ group }) => group.key).sort()).toEqual([...teamIds].sort());
    expect(whole?.shares.limited.estimate).toBeCloseTo(meanShare(walk[""]?.days ?? [], "limited"), 9);
  });

  it("shows on the page what was counted, and the same in its file", async () => {
    const walk = walkDays(club, { by: "sex" });
    const { page, file } = await open(club.lead, "?by=sex", async (tx, view, url) => ({
      page: await prevalenceViewOf(tx, view, url),
      file: await tableFileOf(tx, view, url, { view: "prevalence", table: "groups-by-state" }),
    }));
    expect(figureOf(page.tables.groups, "total", "limited")?.estimate).toBeCloseTo(
      meanShare(walk[""]?.days ?? [], "limited"),
      9,
    );
    expect(figureOf(page.tables.split, "illness", "share")?.estimate).toBeCloseTo(
      meanShare(walk[""]?.days ?? [], "illness"),
      9,
    );
    const states = page.tables.groupStates;
    expect(linesOf(file.text).map(({ modified }) => Number(modified))).toEqual(
      states.rows.map(({ key }) => figureOf(states, key, "modified")?.estimate),
    );
    expect(page.tables.groups.rows[0]?.href).toContain("sex=female");
  });

  it("has no day of a season that has not begun", async () => {
    const organisation = await makeOrganisation();
    const staff = staffScope(organisation);
    await makeSeason(staff, { startsOn: addDays(staff.today, 30), endsOn: addDays(staff.today, 300) });
    const lead = await memberScope(await makePerson(organisation, { roles: ["lead"] }), organisation);
    expect((await found(lead, "")).whole).toBeNull();
  });
});
