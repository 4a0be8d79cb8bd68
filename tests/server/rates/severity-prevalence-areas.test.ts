import { randomUUID } from "node:crypto";
import Papa from "papaparse";
import { beforeAll, describe, expect, it } from "vitest";
import { defaultAgeBands, defaultSportRules } from "~/features/accounts/founding.server";
import { bodyAreasViewOf } from "~/features/rates/body-areas-view.server";
import { tableFileOf } from "~/features/rates/csv-views.server";
import { defaultFilters, type RatesFilters } from "~/features/rates/filters";
import { peopleGroupings } from "~/features/rates/prevalence";
import { countPrevalence, prevalenceViewOf } from "~/features/rates/prevalence-view.server";
import { parseRatesQuery } from "~/features/rates/rates.schema";
import { severityViewOf } from "~/features/rates/severity-view.server";
import { isFigure, type TableData } from "~/features/rates/tables";
import { openView, type RatesView } from "~/features/rates/view.server";
import { addDays, weekStart } from "~/platform/clock";
import { read, type Scope, type Tx } from "~db/client.server";
import {
  maintenance,
  makeOrganisation,
  makePerson,
  makeSeason,
  memberScope,
  staffScope,
} from "../../harness";
import { countByHand, daysLost, type World } from "./brute-force";
import { type Plan, planClub, plantClub, randomOf } from "./generated-club";

/** The figures of three pages against walks through the raw rows, with none of the application's counting. */

const addressOf = (search: string) => new URL(`http://localhost/club/rates/view${search}`);

function open<T>(scope: Scope, search: string, run: (tx: Tx, view: RatesView, url: URL) => Promise<T>) {
  const url = addressOf(search);
  return read(scope, async (tx) => {
    const view = await openView(tx, url, parseRatesQuery(url.searchParams));
    if (!view) throw new Error("no season");
    return run(tx, view, url);
  });
}

const cellsOf = ({ rows }: TableData, key: string) => rows.find((row) => row.key === key)?.cells ?? {};
const figureOf = (table: TableData, key: string, column: string) => {
  const cell = cellsOf(table, key)[column];
  return isFigure(cell) ? cell : null;
};

const linesOf = (text: string) =>
  Papa.parse<Record<string, string>>(text.replace("\ufeff", ""), { header: true, skipEmptyLines: true }).data;

/** The state of one reason on a day: of the changes from that day or earlier, the one entered last. */
function stateOn(plan: Plan, reasonId: string, day: string) {
  const known = plan.changes.filter((change) => change.reasonId === reasonId && change.fromDay <= day);
  return known.sort((a, b) => b.seq - a.seq)[0]?.state ?? "full";
}

async function plant(seed: number, alter: (plan: Plan, today: string) => void = () => {}) {
  const organisation = await makeOrganisation();
  const staff = staffScope(organisation);
  const plan = planClub(seed, staff.today);
  alter(plan, staff.today);
  const season = await makeSeason(staff, { startsOn: plan.season.from, endsOn: plan.season.to });
  await plantClub(staff, plan);
  const lead = await memberScope(await makePerson(organisation, { roles: ["lead"] }), organisation);
  const rules = defaultSportRules.map(([sport, fromAge, players, minutes]) => ({
    sport,
    fromAge,
    players,
    minutes,
  }));
  const world: World = { plan, rules, bands: defaultAgeBands, today: staff.today, seasonId: season.id };
  return { organisation, plan, lead, world, today: staff.today };
}

type Counted = { key: string; days: number; ongoing: boolean };

/** Each injury that counts, found by counting a club in which it is the only one. */
function countedByHand(world: World, filters: RatesFilters): Counted[] {
  return world.plan.injuries.flatMap((injury): Counted[] => {
    const alone = countByHand({ ...world, plan: { ...world.plan, injuries: [injury] } }, filters);
    const key = Object.entries(alone).find(([, row]) => row.injuries === 1)?.[0];
    if (!key) return [];
    const reasons = new Set(
      world.plan.changes
        .filter(({ injuryId }) => injuryId === injury.injuryId)
        .map(({ reasonId }) => reasonId),
    );
    const days = daysLost(world, injury.injuryId, injury.onsetDay);
    const isLimited = [...reasons].some((reason) => stateOn(world.plan, reason, world.today) !== "full");
    return [{ key, days, ongoing: isLimited }];
  });
}

const sum = (list: readonly number[]) => list.reduce((all, value) => all + value, 0);
const hoursOf = (row: { recorded: number; headcount: number; estimated: number } | undefined) =>
  row ? row.recorded + row.headcount + row.estimated : 0;

/** The smallest number of days by which half are back, as a product over the days on which somebody came back. */
function medianByHand(list: readonly Counted[]) {
  let left = 1;
  for (const day of [...new Set(list.map(({ days }) => days))].sort((a, b) => a - b)) {
    const atRisk = list.filter(({ days }) => days >= day).length;
    const back = list.filter(({ days, ongoing }) => days === day && !ongoing).length;
    left *= (atRisk - back) / atRisk;
    if (left <= 0.5 + 1e-12) return day;
  }
  return null;
}

describe("the page of severity", () => {
  const filters: RatesFilters = { ...defaultFilters, injuries: "medical-attention", by: "sex", per: "hours" };
  let club: Awaited<ReturnType<typeof plant>>;
  let counted: Counted[];

  beforeAll(async () => {
    club = await plant(11);
    counted = countedByHand(club.world, filters);
  });

  it("equals days, burden, bands and times to return counted by hand", async () => {
    // The address asks for athlete-exposures, which burden must not use.
    const { tables } = await open(club.lead, "?injuries=medical-attention&by=sex&per=aes", severityViewOf);
    const exposure = countByHand(club.world, filters);
    expect(counted.length).toBeGreaterThan(40);
    expect(counted.some(({ ongoing }) => ongoing)).toBe(true);
    expect(counted.some(({ days }) => days === 0)).toBe(true);
    const groups = [...new Set(counted.map(({ key }) => key))];
    expect(groups.length).toBeGreaterThan(2);
    for (const key of [...groups, "total"]) {
      const own = key === "total" ? counted : counted.filter((each) => each.key === key);
      const hours = key === "total" ? sum(Object.values(exposure).map(hoursOf)) : hoursOf(exposure[key]);
      const days = own.map((each) => each.days);
      const total = sum(days);
      expect(cellsOf(tables.burden, key), key).toMatchObject({ injuries: own.length, days: total });
      expect(cellsOf(tables.burden, key).hours).toBeCloseTo(hours, 6);
      const burden = figureOf(tables.burden, key, "burden");
      const factor = Math.exp((1.959963984540054 * Math.sqrt(sum(days.map((each) => each ** 2)))) / total);
      expect(burden?.estimate).toBeCloseTo((total / hours) * 1000, 6);
      expect(burden?.lower).toBeCloseTo(((total / hours) * 1000) / factor, 6);
      expect(burden?.upper).toBeCloseTo((total / hours) * 1000 * factor, 6);
      const within = (from: number, to: number) => days.filter((each) => each >= from && each <= to).length;
      expect(cellsOf(tables.groups, key), key).toMatchObject({
        "band 0": within(0, 0),
        "band 1-7": within(1, 7),
        "band 8-28": within(8, 28),
        "band >28": within(29, 9999),
        ongoing: own.filter(({ ongoing }) => ongoing).length,
      });
      expect(cellsOf(tables.returns, key).closed, key).toBe(own.filter(({ ongoing }) => !ongoing).length);
      expect(cellsOf(tables.returns, key).half, key).toEqual(medianByHand(own) ?? { reason: "not reached" });
    }
  });

  it("has no band of no day with time loss, and links bands and ongoing injuries to their records", async () => {
    const { tables, links } = await open(club.lead, "?by=sex", severityViewOf);
    expect(tables.bands.rows.map(({ key }) => key)).toEqual(["1-7", "8-28", ">28"]);
    const lost = countedByHand(club.world, { ...filters, injuries: "time-loss" });
    expect(sum(tables.bands.rows.map(({ cells }) => Number(cells.injuries)))).toBe(lost.length);
    const search = new URL(tables.bands.rows[2]?.href ?? "", "http://x").searchParams;
    expect(Object.fromEntries(search)).toEqual({ by: "sex", per: "hours", severity: ">28" });
    expect(new URL(links.ongoing, "http://x").searchParams.get("lost")).toBe("ongoing");
  });

  it("gives the file the tables of the page", async () => {
    const { page, file } = await open(club.lead, "?by=sport", async (tx, view, url) => ({
      page: (await severityViewOf(tx, view, url)).tables.burden,
      file: await tableFileOf(tx, view, url, { view: "severity", table: "burden" }),
    }));
    const lines = linesOf(file.text);
    expect(lines.map(({ group }) => group)).toEqual(page.rows.map(({ cells }) => cells.group));
    for (const [index, { key, cells }] of page.rows.entries()) {
      expect(Number(lines[index]?.days), key).toBe(cells.days);
      expect(Number(lines[index]?.burden_upper), key).toBe(figureOf(page, key, "burden")?.upper);
      expect(lines[index]?.burden_unit).toBe("days per 1000 hours");
    }
  });
});

describe("the page of body areas", () => {
  it("equals injuries and days of every area and side counted by hand", async () => {
    const club = await plant(12);
    const filters: RatesFilters = { ...defaultFilters, injuries: "time-loss", by: "area-side", per: "aes" };
    const counted = countedByHand(club.world, filters);
    const byHand = countByHand(club.world, filters);
    const { tables } = await open(club.lead, "", bodyAreasViewOf);
    const all = sum(counted.map(({ days }) => days));
    const keys = [...new Set(counted.map(({ key }) => key))];
    expect(keys.length).toBeGreaterThan(6);
    expect(tables.sides.rows.map(({ key }) => key).sort()).toEqual([...keys].sort());
    for (const key of keys) {
      const own = counted.filter((each) => each.key === key);
      const days = sum(own.map((each) => each.days));
      const { recorded = 0, headcount = 0 } = byHand[key] ?? {};
      expect(cellsOf(tables.sides, key), key).toMatchObject({ injuries: own.length, days });
      expect(cellsOf(tables.sides, key)["days-share"]).toBeCloseTo((days / all) * 100, 9);
      expect(figureOf(tables.sides, key, "rate")?.estimate).toBeCloseTo(
        (own.length / (recorded + headcount)) * 1000,
        9,
      );
    }
    for (const { key, cells } of tables.areas.rows.filter(({ total }) => !total)) {
      const own = counted.filter((each) => each.key.split(" ")[0] === key);
      expect(cells, key).toMatchObject({ injuries: own.length, days: sum(own.map(({ days }) => days)) });
    }
    expect(cellsOf(tables.areas, "total")).toMatchObject({ injuries: counted.length, days: all });
  });
});

/** Illnesses and other reasons beside the injuries, some at the same time; one athlete who left, one never on a roster. */
function addReasons(plan: Plan, today: string) {
  const random = randomOf(77);
  for (let n = 0; n < 60; n++) {
    const reasonId = randomUUID();
    const athleteId = random.pick(plan.athletes).id;
    const from = addDays(today, -random.int(0, 170));
    const change = (seq: number, fromDay: string, state: string) =>
      plan.changes.push({ reasonId, injuryId: null, athleteId, seq, fromDay, state });
    change(1, from, random.pick(["unavailable", "modified", "modified"]));
    if (random.chance(0.8)) change(2, addDays(from, random.int(1, 12)), "full");
  }
  // A plan for days to come, which must not count yet.
  plan.changes.push({
    ...{ reasonId: randomUUID(), injuryId: null, athleteId: plan.athletes[3]?.id ?? "" },
    ...{ seq: 1, fromDay: addDays(today, 3), state: "unavailable" },
  });
}

type Day = {
  roster: number;
  limited: number;
  unavailable: number;
  modified: number;
  injury: number;
  illness: number;
  other: number;
};
type Walk = Record<string, { days: Day[]; weeks: Record<string, Day[]>; affected: Set<string> }>;

const birthdays = (born: string, day: string) => {
  let years = -1;
  for (let year = Number(born.slice(0, 4)); year <= Number(day.slice(0, 4)); year++) {
    const leap = new Date(Date.UTC(year, 1, 29)).getUTCMonth() === 1;
    if (`${year}-${born.slice(5) === "02-29" && !leap ? "03-01" : born.slice(5)}` <= day) years += 1;
  }
  return years;
};

type Club = {
  plan: Plan;
  today: string;
  left: { athleteId: string; day: string };
  causes: Map<string, string>;
};
type Question = {
  by: (typeof peopleGroupings)[number];
  teamIds?: readonly string[];
  sex?: string;
  age?: string;
  sport?: string;
};

const bandOf = (born: string | null, day: string) => {
  const years = born && born <= day ? birthdays(born, day) : null;
  if (years === null) return "unknown";
  return defaultAgeBands.find(({ from, to }) => years >= from && years <= (to ?? 999))?.label ?? "unknown";
};

/** Walks from day to day and from athlete to athlete; "" is the key of the whole. */
function walkDays({ plan, today, left, causes }: Club, { by, teamIds, sex, age, sport }: Question): Walk {
  const walk: Walk = {};
  const teamOf = new Map(plan.teams.map((team) => [team.id, team]));
  for (let day = plan.season.from; day <= today; day = addDays(day, 1)) {
    const here: Record<string, Day> = {};
    for (const athlete of plan.athletes) {
      if (athlete.id === left.athleteId && day > left.day) continue;
      const teams = plan.roster
        .filter((r) => r.athleteId === athlete.id && r.from <= day && (r.to ?? "9999") >= day)
        .map((r) => teamOf.get(r.teamId))
        .filter(
          (team) => team && (!teamIds || teamIds.includes(team.id)) && (!sport || team.sport === sport),
        );
      if (teams.length === 0 || (sex && athlete.sex !== sex)) continue;
      const band = bandOf(athlete.born, day);
      if (age && band !== age) continue;
      const reasons = new Set(plan.changes.filter((c) => c.athleteId === athlete.id).map((c) => c.reasonId));
      const limiting = [...reasons]
        .map((id) => ({ id, state: stateOn(plan, id, day) }))
        .filter(({ state }) => state !== "full");
      const has = (cause: string) => Number(limiting.some(({ id }) => causes.get(id) === cause));
      const out = Number(limiting.some(({ state }) => state === "unavailable"));
      const keys: Record<Question["by"], (string | undefined)[]> = {
        sex: [athlete.sex],
        age: [band],
        "sex-age": [`${athlete.sex} ${band}`],
        month: [day.slice(0, 7)],
        sport: teams.map((team) => team?.sport),
        team: teams.map((team) => team?.id),
      };
      for (const key of new Set(["", ...keys[by]])) {
        if (key === undefined) continue;
        here[key] ??= { roster: 0, limited: 0, unavailable: 0, modified: 0, injury: 0, illness: 0, other: 0 };
        const limited = Number(limiting.length > 0);
        const add = {
          roster: 1,
          limited,
          unavailable: out,
          modified: limited - out,
          injury: has("injury"),
          illness: has("illness"),
          other: has("other"),
        };
        for (const [name, value] of Object.entries(add)) here[key][name as keyof Day] += value;
        walk[key] ??= { days: [], weeks: {}, affected: new Set() };
        if (limited) walk[key].affected.add(athlete.id);
      }
    }
    for (const [key, counts] of Object.entries(here)) {
      walk[key]?.days.push(counts);
      const week = weekStart(day);
      const weeks = walk[key]?.weeks ?? {};
      weeks[week] = [...(weeks[week] ?? []), counts];
    }
  }
  return walk;
}

const parts = ["limited", "unavailable", "modified", "injury", "illness", "other"] as const;
const meanShare = (days: readonly Day[], part: (typeof parts)[number]) =>
  (sum(days.map((day) => day[part] / day.roster)) / days.length) * 100;

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
