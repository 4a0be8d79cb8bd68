import { beforeAll, describe, expect, it } from "vitest";
import { changeTeams } from "~/features/accounts/people.server";
import type { MemberScope } from "~/features/accounts/scope.server";
import { resolveViewing } from "~/features/accounts/viewing.server";
import { joinTeamSchema, leaveTeamSchema } from "~/features/roster/roster.schema";
import { listRoster, readAthlete, searchOptions } from "~/features/roster/roster.server";
import { joinTeam, leaveTeam } from "~/features/roster/team-memberships.server";
import { addDays } from "~/platform/clock";
import { foldText } from "~/platform/fold-text";
import { read } from "~db/client.server";
import {
  makeAthlete,
  makeClub,
  makePerson,
  makeRosterEntry,
  makeSeason,
  makeSession,
  makeTeam,
  memberScope,
} from "../../harness";

type Club = Awaited<ReturnType<typeof makeClub>>;
let club: Club;
const here = new URL("http://local/");

beforeAll(async () => {
  club = await makeClub();
});

const day = (days: number) => addDays(club.staff.today, days);
/** An athlete with one membership of a team. */
async function member(teamId: string, fromDay: string, toDay: string | null = null) {
  const athlete = await makeAthlete(club.staff);
  await makeRosterEntry(club.staff, { athleteId: athlete.id, teamId, fromDay, toDay });
  return athlete;
}

/** Seen in the list, on the page and in the search, or in none of them. */
async function sees(scope: MemberScope, athlete: { id: string; familyName: string }) {
  const page = await readAthlete(scope, here, athlete.id).then(
    () => true,
    () => false,
  );
  const found = (await searchOptions(scope, athlete.familyName)).some(({ id }) => id === athlete.id);
  expect(found).toBe(page);
  return page;
}
const seenBy = async (athlete: { id: string; familyName: string }) => ({
  trainer: await sees(club.scopes.trainer, athlete),
  coach: await sees(club.scopes.coach, athlete),
  lead: await sees(club.scopes.lead, athlete),
});
const listed = (seen: boolean) => ({ trainer: seen, coach: seen, lead: true });

describe("who sees whom, with listed teams", () => {
  it("is the own team today, to the first and the last day", async () => {
    const own = club.team.id;
    expect(await seenBy(await member(own, day(-30)))).toEqual(listed(true));
    expect(await seenBy(await member(own, day(0)))).toEqual(listed(true));
    expect(await seenBy(await member(own, day(-30), day(0)))).toEqual(listed(true));
  });

  it("is neither another team, nor a former one, nor a future one", async () => {
    expect(await seenBy(await member(club.otherTeam.id, day(-30)))).toEqual(listed(false));
    expect(await seenBy(await member(club.team.id, day(-30), day(-1)))).toEqual(listed(false));
    expect(await seenBy(await member(club.team.id, day(1)))).toEqual(listed(false));
  });

  it("is an athlete of two teams for both, until they leave one", async () => {
    const athlete = await member(club.otherTeam.id, day(-30));
    await makeRosterEntry(club.staff, { athleteId: athlete.id, teamId: club.team.id, fromDay: day(-3) });
    expect(await seenBy(athlete)).toEqual(listed(true));
    const { rows } = await listRoster(club.scopes.coach, here, {
      q: athlete.familyName,
      page: 1,
      show: "current",
    });
    expect(rows).toHaveLength(1);
    expect(rows[0]?.teams).toContain(",");
  });

  it("ends with a transfer, although the athlete trained with the former team last week", async () => {
    const athlete = await member(club.team.id, day(-30), day(-3));
    await makeRosterEntry(club.staff, { athleteId: athlete.id, teamId: club.otherTeam.id, fromDay: day(-2) });
    await makeSession(club.staff, { teamId: club.team.id, day: day(-5), minutes: { [athlete.id]: 90 } });
    expect(await seenBy(athlete)).toEqual(listed(false));
  });

  it("is a visitor who took part within 14 days, not one who was absent, nor longer", async () => {
    const teamId = club.team.id;
    const visited = async (days: number, minutes: number, team = teamId) => {
      const visitor = await makeAthlete(club.staff, { visitor: true });
      await makeSession(club.staff, { teamId: team, day: day(days), minutes: { [visitor.id]: minutes } });
      return visitor;
    };
    expect(await seenBy(await visited(0, 60))).toEqual(listed(true));
    expect(await seenBy(await visited(-14, 60))).toEqual(listed(true));
    expect(await seenBy(await visited(-15, 60))).toEqual(listed(false));
    expect(await seenBy(await visited(-2, 0))).toEqual(listed(false));
    expect(await seenBy(await visited(-2, 60, club.otherTeam.id))).toEqual(listed(false));
    expect(await seenBy(await makeAthlete(club.staff, { visitor: true }))).toEqual(listed(false));
  });

  it("is a guest of another team who took part with the own one", async () => {
    const guest = await member(club.otherTeam.id, day(-30));
    await makeSession(club.staff, { teamId: club.team.id, day: day(-1), minutes: { [guest.id]: 45 } });
    expect(await seenBy(guest)).toEqual(listed(true));
  });

  it("is nobody once the last listed team was taken away", async () => {
    const team = await makeTeam(club.staff);
    const person = await makePerson(club.organisation, { roles: ["coach"], teams: [team.id] });
    const athlete = await member(team.id, day(-3));
    expect(await sees(await memberScope(person, club.organisation), athlete)).toBe(true);
    await changeTeams(club.scopes.admin, person.id, { reach: "listed", teams: [] });
    const without = await memberScope(person, club.organisation);
    expect(without.teams).toEqual([]);
    expect(await sees(without, athlete)).toBe(false);
    expect(await listRoster(without, here, { q: "", page: 1, show: "current" })).toMatchObject({
      total: 0,
      teams: [],
    });
    expect(await searchOptions(without, "")).toEqual([]);
  });

  it("is never another organisation's athlete, with all teams neither", async () => {
    const elsewhere = await makeClub();
    expect(await sees(club.scopes.lead, elsewhere.athlete)).toBe(false);
    expect(await sees(club.scopes.admin, elsewhere.athlete)).toBe(false);
  });
});

describe("teams over time", () => {
  const join = (teamId: string, from: string, to = "") =>
    joinTeamSchema.parse({ team: teamId, fromDay: from, toDay: to });

  it("refuses days that overlap with the same team, and says which are there", async () => {
    const { lead } = club.scopes;
    const athlete = await member(club.team.id, "2026-09-01", "2026-09-30");
    const refused = {
      status: 409,
      fields: { fromDay: [expect.stringMatching(/On U16 Girls.*1 Sept? 2026 to 30 Sept? 2026/)] },
    };
    for (const [from, to] of [
      ["2026-09-30", ""],
      ["2026-08-01", "2026-09-01"],
      ["2026-08-01", ""],
      ["2026-09-10", "2026-09-12"],
    ] as const)
      await expect(joinTeam(lead, athlete.id, join(club.team.id, from, to))).rejects.toMatchObject(refused);
    await joinTeam(lead, athlete.id, join(club.otherTeam.id, "2026-09-10"));
    await joinTeam(lead, athlete.id, join(club.team.id, "2026-10-01"));
    const { entries } = await readAthlete(lead, here, athlete.id);
    expect(entries).toHaveLength(3);
    const first = entries.find(({ toDay }) => toDay === "2026-09-30");
    await expect(
      leaveTeam(lead, athlete.id, leaveTeamSchema.parse({ entry: first?.id, toDay: "2026-10-05" })),
    ).rejects.toMatchObject({
      status: 409,
      fields: { toDay: [expect.stringContaining("without a last day")] },
    });
  });

  it("transfers by leaving and joining, and refuses a last day before the first", async () => {
    const { lead, trainer } = club.scopes;
    const athlete = await member(club.team.id, day(-10));
    const entry = (await readAthlete(trainer, here, athlete.id)).entries[0]?.id;
    const leave = (toDay: string) => leaveTeam(trainer, athlete.id, leaveTeamSchema.parse({ entry, toDay }));
    await expect(leave(day(-11))).rejects.toMatchObject({
      status: 400,
      fields: { toDay: [expect.any(String)] },
    });
    expect(() => joinTeam(trainer, athlete.id, join(club.otherTeam.id, day(0)))).toThrow(/not found/);
    await leave(day(-1));
    await joinTeam(lead, athlete.id, join(club.otherTeam.id, day(0)));
    expect(await seenBy(athlete)).toEqual(listed(false));
    expect(() => joinTeam(club.scopes.coach, athlete.id, join(club.team.id, day(0)))).toThrow(/role/);
  });

  it("ends only memberships of own teams", async () => {
    const athlete = await member(club.team.id, day(-10));
    await makeRosterEntry(club.staff, {
      athleteId: athlete.id,
      teamId: club.otherTeam.id,
      fromDay: day(-10),
    });
    const { entries } = await readAthlete(club.scopes.trainer, here, athlete.id);
    const foreign = entries.find(({ teamId }) => teamId === club.otherTeam.id)?.id;
    await expect(
      leaveTeam(club.scopes.trainer, athlete.id, leaveTeamSchema.parse({ entry: foreign, toDay: day(0) })),
    ).rejects.toMatchObject({ status: 404 });
  });
});

describe("the search", () => {
  const found = async (scope: MemberScope, text: string) =>
    (await searchOptions(scope, text)).map(({ label }) => label);

  beforeAll(async () => {
    for (const [givenName, familyName, number] of [
      ["Dagný", "Nguyễn-Łącka", "A-00731"],
      ["Percent", "Hundred", "50%off"],
      ["Under", "Score", "50_off"],
      ["Plain", "Number", "50xoff"],
    ] as const) {
      await makeAthlete(club.staff, {
        givenName,
        familyName,
        number,
        nameKey: foldText(`${givenName} ${familyName}`),
        teamId: club.team.id,
      });
    }
  });

  it("finds by folded, partial and reordered words", async () => {
    for (const text of ["dagny", "NGUYEN", "lacka", "guy dag", "  Łącka   Dagný ", "nguyễn-ł"])
      expect([text, await found(club.scopes.coach, text)]).toEqual([text, ["Dagný Nguyễn-Łącka"]]);
    expect(await found(club.scopes.coach, "dagny hundred")).toEqual([]);
  });

  it("finds by the beginning of a number, for those who see numbers", async () => {
    expect(await found(club.scopes.trainer, "a-007")).toEqual(["Dagný Nguyễn-Łącka"]);
    expect(await found(club.scopes.trainer, "00731")).toEqual([]);
    expect(await found(club.scopes.coach, "a-007")).toEqual([]);
    const [option] = await searchOptions(club.scopes.trainer, "dagny");
    expect(option?.detail).toContain("A-00731");
    const [coachs] = await searchOptions(club.scopes.coach, "dagny");
    expect(coachs?.detail).toBe(club.team.name);
  });

  it("takes % and _ as they are", async () => {
    expect(await found(club.scopes.trainer, "50%")).toEqual(["Percent Hundred"]);
    expect(await found(club.scopes.trainer, "50_")).toEqual(["Under Score"]);
    expect(await found(club.scopes.trainer, "%")).toEqual([]);
    expect(await found(club.scopes.trainer, "_")).toEqual([]);
    expect(await found(club.scopes.trainer, "\\")).toEqual([]);
    expect((await listRoster(club.scopes.coach, here, { q: "%", page: 1, show: "current" })).total).toBe(0);
  });
});

describe("season and team of the address", () => {
  const viewing = (scope: MemberScope, search = "") =>
    read(scope, (tx) => resolveViewing(tx, new URL(`http://local/${search}`)));

  it("is the current season and all own teams, or what the address names", async () => {
    const earlier = await makeSeason(club.staff, { startsOn: day(-600), endsOn: day(-300) });
    await makeSeason(club.staff, { startsOn: day(300), endsOn: day(500) });
    const coach = await viewing(club.scopes.coach);
    expect(coach).toMatchObject({
      season: { id: club.season.id },
      team: null,
      teams: [{ id: club.team.id }],
    });
    expect(await viewing(club.scopes.coach, `?season=${earlier.id}&team=${club.team.id}`)).toMatchObject({
      season: { id: earlier.id },
      team: { id: club.team.id },
    });
  });

  it("is absent for another's team or season", async () => {
    const elsewhere = await makeClub();
    for (const search of [
      `?team=${club.otherTeam.id}`,
      `?team=${elsewhere.team.id}`,
      `?season=${elsewhere.season.id}`,
      "?season=nonsense",
    ])
      await expect(viewing(club.scopes.coach, search)).rejects.toMatchObject({ status: 404 });
  });

  it("leaves archived teams out", async () => {
    const old = await makeTeam(club.staff, { archivedAt: new Date() });
    expect((await viewing(club.scopes.admin)).teams.map(({ id }) => id)).not.toContain(old.id);
  });
});
