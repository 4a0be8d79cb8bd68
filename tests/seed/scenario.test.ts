import { describe, expect, it } from "vitest";
import { addDays, ageOnDay, dayNumber, momentAfter, weekdayOf } from "~db/seed/scenario/days.ts";
import { buildScenario, DEMO_SEED } from "~db/seed/scenario/index.ts";
import { MARRAM_BAY, OTTERWICK } from "~db/seed/scenario/plan.ts";
import { PROGRAMME } from "~db/seed/scenario/programme.ts";
import { openStream } from "~db/seed/scenario/random.ts";
import { WARM_UP_BLOCKS } from "~db/seed/scenario/warm-ups.ts";
import { find, groupBy, indexByKey, scenarioOf, TODAY } from "./shared.ts";

const scenario = scenarioOf(DEMO_SEED);
const athletes = indexByKey(scenario.athletes);
const sessions = indexByKey(scenario.sessions);
const teams = indexByKey(scenario.teams);
const injuries = indexByKey(scenario.injuries);
const count = (rows: readonly { organisation: string }[], organisation: string) =>
  rows.filter((row) => row.organisation === organisation).length;
const expectNear = (value: number, asked: number, tolerance: number) => {
  expect(value).toBeGreaterThanOrEqual(asked * (1 - tolerance));
  expect(value).toBeLessThanOrEqual(asked * (1 + tolerance));
};

describe("repeatability", () => {
  it("makes the same data from the same seed and day, byte for byte", () => {
    const again = buildScenario({ seed: DEMO_SEED, today: TODAY });
    expect(JSON.stringify(again)).toBe(JSON.stringify(scenario));
  });

  it("makes other data from another seed", () => {
    expect(scenarioOf("another").participations).not.toEqual(scenario.participations);
  });

  it("only adds on a later day: what was played stays as it was", () => {
    const later = buildScenario({ seed: DEMO_SEED, today: addDays(TODAY, 40) });
    const past = (rows: readonly { session: string }[], of: typeof sessions) =>
      rows.filter((row) => find(of, row.session).day < TODAY);
    const laterSessions = indexByKey(later.sessions);
    expect(past(later.participations, laterSessions)).toEqual(past(scenario.participations, sessions));
    expect(past(later.warmUps, laterSessions)).toEqual(past(scenario.warmUps, sessions));
    const drawn = later.injuries
      .filter((injury) => injury.at.slice(0, 10) < TODAY)
      .map((injury) => injury.key);
    expect(drawn).toEqual(scenario.injuries.map((injury) => injury.key));
    expect(later.athletes.length).toBeGreaterThan(scenario.athletes.length);
    expect(later.athletes).toEqual(expect.arrayContaining(scenario.athletes));
    expect(later.guardians).toEqual(expect.arrayContaining(scenario.guardians));
    expect(later.guardianships).toEqual(expect.arrayContaining(scenario.guardianships));
    expect(later.participations.length).toBeGreaterThan(scenario.participations.length);
  });

  it("can be made for any day of the year", () => {
    for (const today of ["2026-08-01", "2026-09-21", "2027-01-06", "2027-07-31", "2028-02-29"]) {
      const { sessions: made, injuries: hurt } = buildScenario({ today });
      expect(made.length).toBeGreaterThan(1000);
      expect(hurt.every((injury) => injury.at.slice(0, 10) < today)).toBe(true);
    }
  }, 20_000);

  it("names the seasons by the day and refuses a day that does not exist", () => {
    expect(buildScenario({ today: "2027-07-10" }).seasons.map((season) => season.name)).toContain("2026/27");
    expect(buildScenario({ today: "2027-08-01" }).seasons.map((season) => season.name)).toContain("2027/28");
    expect(() => buildScenario({ today: "2026-02-30" })).toThrow(RangeError);
    expect(() => buildScenario({ today: "1/12/2026" })).toThrow(RangeError);
  });

  it("draws evenly", () => {
    const random = openStream("check", "evenness");
    const tenths = Array.from({ length: 10 }, () => 0);
    for (let draw = 0; draw < 50_000; draw += 1) {
      const tenth = Math.floor(random.next() * 10);
      tenths[tenth] = (tenths[tenth] ?? 0) + 1;
    }
    const chiSquare = tenths.reduce((sum, seen) => sum + (seen - 5000) ** 2 / 5000, 0);
    expect(chiSquare).toBeLessThan(27.88); // 0.999 quantile of chi-square with 9 degrees of freedom
  });
});

describe("days", () => {
  it("counts across leap days, midnight and the year's end", () => {
    expect(addDays("2024-02-28", 1)).toBe("2024-02-29");
    expect(addDays("2026-12-31", 1)).toBe("2027-01-01");
    expect(weekdayOf("2026-12-01")).toBe(1);
    expect(momentAfter("2026-12-31", "23:50", 20)).toBe("2027-01-01T00:10");
    expect(momentAfter("2026-03-01", "00:05", -10)).toBe("2026-02-28T23:55");
  });

  it("lets someone born on 29 February turn on 1 March in common years", () => {
    expect(ageOnDay("2012-02-29", "2026-02-28")).toBe(13);
    expect(ageOnDay("2012-02-29", "2026-03-01")).toBe(14);
  });
});

describe("sizes", () => {
  it("come near the ask for the club", () => {
    expect(count(scenario.teams, MARRAM_BAY)).toBe(16);
    // 260 at a time; with those who left over three seasons the list is longer.
    const current = scenario.roster.filter((entry) => entry.organisation === MARRAM_BAY && entry.to === null);
    expectNear(new Set(current.map((entry) => entry.athlete)).size, 260, 0.1);
    expectNear(count(scenario.athletes, MARRAM_BAY), 300, 0.1);
    expectNear(count(scenario.sessions, MARRAM_BAY), 1900, 0.1);
    expectNear(count(scenario.participations, MARRAM_BAY), 28_000, 0.1);
    expectNear(count(scenario.injuries, MARRAM_BAY), 190, 0.15);
    expect(scenario.seasons.filter((season) => season.organisation === MARRAM_BAY)).toHaveLength(3);
  });

  it("keep the school small", () => {
    expect(count(scenario.teams, OTTERWICK)).toBe(3);
    expectNear(count(scenario.athletes, OTTERWICK), 40, 0.15);
    expect(scenario.seasons.filter((season) => season.organisation === OTTERWICK)).toHaveLength(1);
  });

  it("record about nine sessions in ten that took place", () => {
    const held = scenario.sessions.filter((session) => session.day < TODAY && session.status !== "cancelled");
    const recorded = held.filter((session) => session.grade === "recorded");
    expectNear(recorded.length / held.length, 0.9, 0.06);
    const headcountTeams = new Set(
      held.filter((each) => each.grade === "headcount").map((each) => each.team),
    );
    expect([...headcountTeams]).toEqual(["soccer-boys-u12"]);
  });

  it("are made quickly", () => {
    const before = performance.now();
    buildScenario({ seed: "speed", today: TODAY });
    expect(performance.now() - before).toBeLessThan(3000);
  });
});

describe("people", () => {
  it("have addresses at example.org and phones in the range kept for fiction alone", () => {
    const text = JSON.stringify(scenario);
    const addresses = text.match(/[^"\s]+@[^"\s]+/g) ?? [];
    expect(addresses.length).toBeGreaterThan(300);
    for (const address of addresses) expect(address).toMatch(/^[a-z.-]+\d*@example\.org$/);
    const phones = text.match(/\+\d[\d ]+/g) ?? [];
    expect(phones.length).toBeGreaterThan(300);
    for (const phone of phones) expect(phone).toMatch(/^\+44 1632 960\d{3}$/);
    expect(new Set(scenario.people.map((person) => person.email)).size).toBe(scenario.people.length);
  });

  it("fill every role in both organisations, and some work for both", () => {
    for (const organisation of [MARRAM_BAY, OTTERWICK]) {
      const roles = scenario.memberships
        .filter((each) => each.organisation === organisation)
        .map((each) => each.role);
      for (const role of ["admin", "lead"] as const) expect(roles).toContain(role);
      expect(roles.filter((role) => role === "trainer")).toHaveLength(2);
      expect(roles.filter((role) => role === "coach").length).toBeGreaterThanOrEqual(3);
    }
    for (const membership of scenario.memberships) {
      expect(scenario.people.map((person) => person.key)).toContain(membership.person);
      if (membership.teams === "all") continue;
      for (const team of membership.teams)
        expect(find(teams, team).organisation).toBe(membership.organisation);
    }
    const organisationsOf = (person: string) =>
      new Set(scenario.memberships.filter((each) => each.person === person).map((each) => each.organisation))
        .size;
    expect(scenario.people.some((person) => organisationsOf(person.key) === 2)).toBe(true);
  });

  it("hold the special families and athletes", () => {
    expect(scenario.athletes.filter((athlete) => athlete.actionAlerts.length > 0).length).toBeGreaterThan(0);
    expect(scenario.athletes.filter((athlete) => athlete.safeguardingHold).length).toBeGreaterThan(0);
    const limited = scenario.guardianships.filter((each) => each.legalLimit);
    expect(limited.length).toBeGreaterThan(0);
    for (const each of limited) expect(each.mayBeTold || each.mayDecide).toBe(false);
    expect(scenario.athletes.filter((athlete) => athlete.visitor).length).toBeGreaterThan(2);
    expect(new Set(scenario.guardians.map((guardian) => guardian.language))).toEqual(
      new Set(["en", "es", "pl", "cy"]),
    );
    const earlierAcl = scenario.athletes.filter((athlete) =>
      athlete.earlierInjuries.some((injury) => injury.words.startsWith("Anterior cruciate")),
    );
    expect(earlierAcl.length).toBeGreaterThan(4);
    const notStated = scenario.athletes.filter((athlete) => athlete.sex === "not_stated").length;
    expect(notStated / scenario.athletes.length).toBeGreaterThan(0.01);
    expect(notStated / scenario.athletes.length).toBeLessThan(0.06);
  });

  it("share a name and date of birth across the organisations twice, by intent, and never within one", () => {
    const nameOf = (each: (typeof scenario.athletes)[number]) => `${each.givenName} ${each.familyName}`;
    const club = scenario.athletes.filter((each) => each.organisation === MARRAM_BAY);
    const school = scenario.athletes.filter((each) => each.organisation === OTTERWICK);
    const same = school.filter((pupil) =>
      club.some((each) => nameOf(each) === nameOf(pupil) && each.dateOfBirth === pupil.dateOfBirth),
    );
    expect(same).toHaveLength(2);
    expect(new Set(club.map(nameOf)).size).toBe(club.length);
  });

  it("give every minor a guardian of the same organisation", () => {
    const guardians = indexByKey(scenario.guardians);
    for (const link of scenario.guardianships) {
      expect(find(guardians, link.guardian).organisation).toBe(link.organisation);
      expect(find(athletes, link.athlete).organisation).toBe(link.organisation);
    }
    const linked = new Set(scenario.guardianships.map((link) => link.athlete));
    for (const athlete of scenario.athletes) {
      if (ageOnDay(athlete.dateOfBirth, TODAY) < 18) expect(linked).toContain(athlete.key);
    }
  });
});

describe("rosters and participations", () => {
  it("never overlap for one athlete and team, and end after they begin", () => {
    const entries = [...scenario.roster].sort((a, b) => (a.from < b.from ? -1 : 1));
    const lastEnd = new Map<string, string>();
    for (const { athlete, team, from, to } of entries) {
      const key = `${athlete} ${team}`;
      expect(from > (lastEnd.get(key) ?? "")).toBe(true);
      expect((to ?? "9999") > from).toBe(true);
      lastEnd.set(key, to ?? "9999");
    }
  });

  it("put athletes of a plausible age and sex category into teams", () => {
    for (const { athlete, team, from } of scenario.roster) {
      const { ageGroup, sexCategory } = find(teams, team);
      const { dateOfBirth, sex } = find(athletes, athlete);
      const seasonYear = Number(from.slice(0, 4)) - (from.slice(5) < "08-01" ? 1 : 0);
      const age = ageOnDay(dateOfBirth, `${seasonYear}-09-01`);
      expect(age).toBeGreaterThanOrEqual(ageGroup.minAge);
      expect(age).toBeLessThanOrEqual(ageGroup.maxAge);
      if (sexCategory === "girls" || sexCategory === "women") expect(sex).not.toBe("male");
      if (sexCategory === "boys" || sexCategory === "men") expect(sex).not.toBe("female");
    }
  });

  it("have athletes in two teams at once and transfers in mid-season", () => {
    const open = scenario.roster.filter((entry) => entry.to === null).map((entry) => entry.athlete);
    expect(open.length - new Set(open).size).toBeGreaterThan(3);
    const transfers = scenario.roster.filter((entry) =>
      scenario.roster.some(
        (other) =>
          other.athlete === entry.athlete &&
          other.team !== entry.team &&
          entry.to === addDays(other.from, -1),
      ),
    );
    expect(transfers.length).toBeGreaterThan(3);
  });

  it("are only of athletes on the roster that day, or visitors, once per session", () => {
    const entries = groupBy(scenario.roster, (entry) => entry.athlete);
    const onRoster = (athlete: string, team: string, day: string) =>
      (entries.get(athlete) ?? []).some(
        (entry) => entry.team === team && entry.from <= day && (entry.to ?? "9999") >= day,
      );
    const wrong: string[] = [];
    const seen = new Set<string>();
    for (const { session: key, athlete, minutes, presence } of scenario.participations) {
      const session = find(sessions, key);
      const isRight =
        session.grade === "recorded" &&
        (find(athletes, athlete).visitor || onRoster(athlete, session.team, session.day)) &&
        minutes > 0 === (presence === "took_part") &&
        minutes <= (session.actualMinutes ?? 0);
      if (!isRight) wrong.push(`${key} ${athlete}`);
      seen.add(`${key} ${athlete}`);
    }
    expect(wrong).toEqual([]);
    expect(seen.size).toBe(scenario.participations.length);
  });

  it("give a soccer match no more than its players on the field times its minutes", () => {
    const minutes = new Map<string, number>();
    for (const each of scenario.participations) {
      minutes.set(each.session, (minutes.get(each.session) ?? 0) + each.minutes);
    }
    const matches = scenario.sessions.filter((each) => each.team === "soccer-women" && each.kind === "match");
    for (const match of matches) {
      expect(minutes.get(match.key) ?? 0).toBeLessThanOrEqual(11 * (match.actualMinutes ?? 90));
    }
  });
});

describe("availability", () => {
  it("keeps the unavailable out, modified athletes out of matches and within their minutes", () => {
    const byAthlete = groupBy(scenario.availability, (each) => each.athlete);
    let modifiedTurns = 0;
    for (const { session: key, athlete, presence, minutes } of scenario.participations) {
      if (presence !== "took_part") continue;
      const { day, kind } = find(sessions, key);
      const now = (byAthlete.get(athlete) ?? []).filter(
        (each) =>
          each.from <= day &&
          (each.to ?? "9999") >= day &&
          // Whoever was hurt in this very session had taken part until then.
          !(each.injury !== null && find(injuries, each.injury).session === key),
      );
      if (now.length === 0) continue;
      expect(now.map((each) => each.state)).not.toContain("unavailable");
      modifiedTurns += 1;
      expect(kind).not.toBe("match");
      for (const each of now)
        if (each.minutesLimit !== null) expect(minutes).toBeLessThanOrEqual(each.minutesLimit);
    }
    expect(modifiedTurns).toBeGreaterThan(50);
  });

  it("has contributions of one injury follow each other without gap or overlap up to full availability", () => {
    for (const injury of scenario.injuries) {
      const own = scenario.availability.filter((each) => each.injury === injury.key);
      for (const [index, each] of own.entries()) {
        const next = own[index + 1];
        if (next) expect(next.from).toBe(addDays(each.to ?? "", 1));
      }
      const last = own.at(-1);
      if (last && injury.fullOn) expect(addDays(last.to ?? "", 1)).toBe(injury.fullOn);
      if (!injury.fullOn) expect(last?.to).toBeNull();
      if (!injury.couldContinue) expect(own[0]?.from ?? TODAY).toBe(injury.at.slice(0, 10));
    }
  });

  it("makes whoever could not continue, and every suspected concussion, unavailable at once", () => {
    for (const injury of scenario.injuries.filter(
      (each) => each.suspectedConcussion || !each.couldContinue,
    )) {
      expect(injury.couldContinue).toBe(false);
      const first = scenario.availability.find((each) => each.injury === injury.key);
      expect(first?.state).toBe("unavailable");
      expect(first?.from).toBe(injury.at.slice(0, 10));
    }
  });

  it("knows nothing of tomorrow", () => {
    for (const each of scenario.availability) {
      expect(each.from <= TODAY).toBe(true);
      expect(each.to === null || each.to < TODAY).toBe(true);
    }
    for (const injury of scenario.injuries) {
      expect(injury.at.slice(0, 10) < TODAY).toBe(true);
      for (const day of [injury.fullOn, injury.closedOn, injury.surgeryOn])
        expect(day === null || day <= TODAY).toBe(true);
    }
    const planned = scenario.sessions.filter((session) => session.day >= TODAY);
    expect(planned.length).toBeGreaterThan(20);
    for (const session of planned) {
      expect(session.status).toBe("planned");
      expect(dayNumber(session.day) - dayNumber(TODAY)).toBeLessThanOrEqual(14);
    }
    expect(scenario.injuries.some((injury) => injury.fullOn === null)).toBe(true);
  });
});

describe("warm-ups", () => {
  it("fall over a season and differ between teams", () => {
    const share = (keep: (session: (typeof scenario.sessions)[number]) => boolean) => {
      const records = scenario.warmUps.filter((each) => keep(find(sessions, each.session)));
      return records.filter((each) => each.outcome === "full").length / records.length;
    };
    const month = (day: string) => day.slice(5, 7);
    const early = share((session) => ["08", "09", "10"].includes(month(session.day)));
    const late = share((session) => ["03", "04", "05"].includes(month(session.day)));
    expect(early - late).toBeGreaterThan(0.1);
    const careful = share((session) => session.team === "soccer-girls-u16");
    expect(careful - share((session) => session.team === "soccer-men")).toBeGreaterThan(0.2);
  });

  it("say what their outcome says, and begin with the team's programme", () => {
    for (const each of scenario.warmUps) {
      const { day, team } = find(sessions, each.session);
      expect(day >= find(teams, team).programmeFrom).toBe(true);
      expect(each.skipReason === null).toBe(each.outcome !== "skipped");
      if (each.outcome === "full") expect(each.blocks).toEqual(WARM_UP_BLOCKS);
      if (each.outcome === "part") expect([2, 3, 4]).toContain(each.blocks.length);
      if (each.outcome === "skipped") expect(each.blocks).toEqual([]);
    }
  });

  it("leave one team silent for weeks", () => {
    expect(scenario.truth.silentWeeks.length).toBeGreaterThanOrEqual(4);
    for (const { team, monday } of scenario.truth.silentWeeks) {
      const own = scenario.sessions.filter(
        (each) => each.team === team && each.day >= monday && each.day <= addDays(monday, 6),
      );
      for (const session of own) expect([session.status, session.grade]).toEqual(["planned", "none"]);
      expect(scenario.confirmedWeeks.some((each) => each.team === team && each.monday === monday)).toBe(
        false,
      );
    }
  });

  it("follow a programme of five blocks and about fourteen exercises", () => {
    expect(PROGRAMME.blocks.map((each) => each.block)).toEqual(WARM_UP_BLOCKS);
    expect(PROGRAMME.blocks.reduce((sum, each) => sum + each.minutes, 0)).toBe(PROGRAMME.targetMinutes);
    const exercises = PROGRAMME.blocks.flatMap((each) => each.exercises);
    expect(indexByKey(exercises).size).toBe(14);
    for (const exercise of exercises) {
      expect(exercise.progressions.length).toBeGreaterThanOrEqual(2);
      expect(exercise.progressions.length).toBeLessThanOrEqual(3);
    }
  });
});

describe("messages", () => {
  it("reach only guardians who may be told, of minors without a hold, after the injury", () => {
    expect(scenario.notices.length).toBeGreaterThan(5);
    for (const notice of scenario.notices) {
      const injury = find(injuries, notice.injury);
      const athlete = find(athletes, notice.athlete);
      const link = scenario.guardianships.find(
        (each) => each.athlete === notice.athlete && each.guardian === notice.guardian,
      );
      expect(link?.mayBeTold).toBe(true);
      expect(athlete.safeguardingHold).toBeNull();
      expect(ageOnDay(athlete.dateOfBirth, injury.at.slice(0, 10))).toBeLessThan(18);
      const times = [injury.at, notice.sentAt, notice.deliveredAt, notice.openedAt, notice.acknowledgedAt];
      const known = times.filter((time) => time !== null);
      expect([...known].sort()).toEqual(known);
    }
    expect(scenario.notices.some((notice) => notice.acknowledgedAt)).toBe(true);
  });

  it("leave coaches' reports in the queue", () => {
    expect(scenario.coachReports.some((report) => report.injury === null)).toBe(true);
    expect(scenario.coachReports.some((report) => report.injury !== null)).toBe(true);
  });
});
