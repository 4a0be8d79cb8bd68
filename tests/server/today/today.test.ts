import { beforeAll, describe, expect, it } from "vitest";
import { grantRole } from "~/features/accounts/people.server";
import type { MemberScope } from "~/features/accounts/scope.server";
import { readCoachToday, readPeopleTasks, readToday, readWarmUpWeek } from "~/features/today/today.server";
import { addDays } from "~/platform/clock";
import {
  makeAthlete,
  makeAvailability,
  makeClub,
  makeCoachReport,
  makeGuardian,
  makeInjury,
  makeInvitation,
  makeRosterEntry,
  makeSeason,
  makeSession,
  makeVenue,
  makeWarmUp,
} from "../../harness";

type Club = Awaited<ReturnType<typeof makeClub>>;
let club: Club;
let records: Awaited<ReturnType<typeof fill>>;
const here = new URL("http://local/");

/** One thing of every kind that waits, in the own team and in the other. */
async function fill({ staff, scopes, ...made }: Club) {
  const day = (days: number) => addDays(staff.today, days);
  const venue = await makeVenue(staff, {
    name: "Mill Lane",
    emergencyNumbers: "999",
    defibrillator: "Pavilion door",
  });
  const about = async (athleteId: string, teamId: string) => {
    const written = new Date(Date.now() - 20 * 86_400_000);
    const untouched = await makeInjury(staff, { athleteId, onsetDay: day(-21), recordedAt: written });
    await makeAvailability(staff, {
      athleteId,
      cause: "injury",
      injuryId: untouched.id,
      fromDay: day(-21),
      setAt: written,
    });
    return {
      untouched,
      open: await makeSession(staff, { teamId, state: "planned", day: day(-2), actualMinutes: null }),
      today: await makeSession(staff, { teamId, state: "planned", actualMinutes: null, venueId: venue.id }),
      report: await makeCoachReport(staff, {
        athleteId,
        note: "She heard a pop.",
        reportedBy: scopes.coach.personId,
      }),
      injury: await makeInjury(staff, {
        athleteId,
        diagnosis: "Partial tear of the anterior cruciate",
        unavailableFrom: staff.today,
      }),
    };
  };
  await makeGuardian(staff, { athleteIds: [made.athlete.id, made.otherAthlete.id] });
  const trained = await makeSession(staff, {
    teamId: made.team.id,
    day: day(-1),
    minutes: { [made.athlete.id]: 90 },
  });
  await makeWarmUp(staff, { sessionId: trained.id });
  return {
    own: await about(made.athlete.id, made.team.id),
    other: await about(made.otherAthlete.id, made.otherTeam.id),
  };
}

beforeAll(async () => {
  club = await makeClub();
  records = await fill(club);
});

async function tasksOf(scope: MemberScope, url = here) {
  const { tasks } = await readToday(scope, url);
  return new Map(
    [...tasks, ...(await readPeopleTasks(scope))].map((group) => [
      group.key,
      group.tasks.map(({ key }) => key),
    ]),
  );
}

describe("what waits", () => {
  it("is everything of all teams for the lead", async () => {
    const tasks = await tasksOf(club.scopes.lead);
    const { own, other } = records;
    expect(tasks.get("reports")?.toSorted()).toEqual([own.report.id, other.report.id].toSorted());
    expect(tasks.get("untouched")?.toSorted()).toEqual([own.untouched.id, other.untouched.id].toSorted());
    expect(tasks.get("notices")).toEqual(expect.arrayContaining([own.injury.id, other.injury.id]));
    expect(tasks.get("sessions")).toEqual(expect.arrayContaining([own.open.id, other.open.id]));
  });

  it("is the own teams' for the athletic trainer", async () => {
    const tasks = await tasksOf(club.scopes.trainer);
    const { own } = records;
    expect(tasks.get("reports")).toEqual([own.report.id]);
    expect(tasks.get("untouched")).toEqual([own.untouched.id]);
    expect(tasks.get("notices")).toEqual(expect.arrayContaining([own.injury.id]));
    expect(tasks.get("notices")).not.toContain(records.other.injury.id);
    expect(tasks.get("sessions")).toEqual([own.open.id]);
  });

  it("is the own sessions for the coach, and not a word of why", async () => {
    expect([...(await tasksOf(club.scopes.coach))]).toEqual([["sessions", [records.own.open.id]]]);
    const given = {
      day: await readToday(club.scopes.coach, here),
      coach: await readCoachToday(club.scopes.coach),
      week: await readWarmUpWeek(club.scopes.coach),
    };
    expect(given.day.limited).toMatchObject([{ athleteId: club.athlete.id, state: "unavailable" }]);
    expect(JSON.stringify(given)).not.toMatch(
      /injur|knee|cruciate|ligament|sprain|tear|pop\b|swelling|diagnos|cause|guardian|dateOfBirth|example\.org/i,
    );
  });

  it("is people for the administrator, and nothing clinical", async () => {
    await makeInvitation(club.organisation, { email: "waits@example.org", roles: ["coach"] });
    await grantRole(club.scopes.admin, club.people.coach.id, "trainer");
    const { admin, lead, trainer } = club.scopes;
    const tasks = await tasksOf(admin);
    expect(tasks.get("roles")).toEqual([`${club.people.coach.id} trainer`]);
    expect(tasks.get("invitations")).toHaveLength(1);
    for (const key of ["reports", "notices", "untouched", "gaps"]) expect(tasks.has(key)).toBe(false);
    expect(JSON.stringify(await readToday(admin, here))).not.toMatch(
      /injur|knee|cruciate|sprain|swelling|cause/i,
    );
    const stepOf = async (scope: MemberScope) => (await readPeopleTasks(scope))[0]?.tasks[0]?.step;
    expect(await stepOf(admin)).toBe("See");
    expect(await stepOf(lead)).toBe("Confirm");
    expect(await readPeopleTasks(trainer)).toEqual([]);
  });

  it("begins with the season: what earlier seasons left open stands in the lists", async () => {
    const fresh = await makeClub();
    const { staff, scopes } = fresh;
    const before = addDays(fresh.season.startsOn, -10);
    await makeSeason(staff, { startsOn: addDays(before, -200), endsOn: addDays(before, 5) });
    const old = await makeSession(staff, {
      teamId: fresh.team.id,
      state: "planned",
      day: before,
      actualMinutes: null,
    });
    const oldInjury = await makeInjury(staff, {
      athleteId: fresh.athlete.id,
      onsetDay: before,
      contact: null,
    });
    const first = await makeSession(staff, {
      teamId: fresh.team.id,
      state: "planned",
      day: fresh.season.startsOn,
      actualMinutes: null,
    });
    const firstInjury = await makeInjury(staff, {
      athleteId: fresh.athlete.id,
      onsetDay: fresh.season.startsOn,
      contact: null,
    });
    const tasks = await tasksOf(scopes.lead);
    expect(tasks.get("sessions")).toEqual([first.id]);
    expect(tasks.get("sessions")).not.toContain(old.id);
    expect(tasks.get("gaps")).toEqual([firstInjury.id]);
    expect(tasks.get("gaps")).not.toContain(oldInjury.id);
  });

  it("is of the one team that the address names", async () => {
    const named = new URL(`http://local/?team=${club.otherTeam.id}`);
    const { sessions, limited, tasks } = await readToday(club.scopes.lead, named);
    expect(sessions.map(({ id }) => id)).toEqual([records.other.today.id]);
    expect(limited.map(({ athleteId }) => athleteId)).toEqual([club.otherAthlete.id]);
    const sessionTasks = tasks.find(({ key }) => key === "sessions")?.tasks.map(({ key }) => key);
    expect(sessionTasks).toEqual([records.other.open.id]);
    await expect(readToday(club.scopes.coach, named)).rejects.toMatchObject({ status: 404 });
  });
});

describe("the day", () => {
  it("shows the coach the next session with its emergency card", async () => {
    const { session, card } = await readCoachToday(club.scopes.coach);
    expect(session?.id).toBe(records.own.today.id);
    expect(JSON.stringify(card)).toContain("Pavilion door");
  });

  it("counts an athlete of two teams once, and shows limits to those who act on them", async () => {
    const fresh = await makeClub();
    const athlete = await makeAthlete(fresh.staff, { teamId: fresh.team.id });
    await makeAvailability(fresh.scopes.lead, {
      athleteId: athlete.id,
      state: "modified",
      restrictions: ["no_cutting"],
    });

    await makeRosterEntry(fresh.staff, { athleteId: athlete.id, teamId: fresh.otherTeam.id });
    const limitedFor = async (scope: MemberScope) => (await readToday(scope, here)).limited;
    expect(await limitedFor(fresh.scopes.lead)).toMatchObject([
      { athleteId: athlete.id, restrictions: ["no_cutting"] },
    ]);
    expect(await limitedFor(fresh.scopes.admin)).toMatchObject([{ athleteId: athlete.id, restrictions: [] }]);
  });

  it("is empty for a member without teams", async () => {
    const nobody: MemberScope = { ...club.scopes.coach, teams: [] };
    expect(await readToday(nobody, here)).toEqual({ sessions: [], limited: [], tasks: [] });
    expect(await readCoachToday(nobody)).toEqual({ session: null, card: null });
  });
});
