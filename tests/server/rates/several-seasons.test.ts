import { describe, expect, it } from "vitest";
import { resolveViewing } from "~/features/accounts/viewing.server";
import { countSeasons } from "~/features/rates/view.server";
import { addDays, weekStart } from "~/platform/clock";
import { read } from "~db/client.server";
import {
  makeAthlete,
  makeInjury,
  makeOrganisation,
  makePerson,
  makeSeason,
  makeSession,
  makeTeam,
  memberScope,
  staffScope,
} from "../../harness";
import { planClub, plantClub } from "./generated-club";

const address = new URL("http://localhost/club/rates");

describe("several seasons asked for in one go", () => {
  it("hold what each of them holds when it is asked for alone", async () => {
    const organisation = await makeOrganisation();
    const staff = staffScope(organisation);
    const plan = planClub(11, staff.today);
    // The season of the plan in three parts with a gap of some days, none of them ending with a week.
    const { from } = plan.season;
    for (const [name, start, end] of [
      ["first", 0, 52],
      ["second", 60, 100],
      ["third", 101, 200],
    ] as const)
      await makeSeason(staff, { name, startsOn: addDays(from, start), endsOn: addDays(from, end) });
    await plantClub(staff, plan);
    const scope = await memberScope(await makePerson(organisation, { roles: ["lead"] }), organisation);
    const { all, single } = await read(scope, async (tx) => {
      const { seasons } = await resolveViewing(tx, address);
      const apart = [];
      for (const season of seasons) apart.push(await countSeasons(tx, [season], null));
      return { all: await countSeasons(tx, seasons, null), single: apart };
    });
    const text = (rows: readonly object[]) => rows.map((row) => JSON.stringify(row)).sort();
    expect(single).toHaveLength(3);
    for (const name of ["cells", "silent", "sessions"] as const)
      expect(text(all[name]), name).toEqual(text(single.flatMap((each): object[] => [...each[name]])));
    // Which of two teams an injury without a session belongs to may hang on a week that two seasons share.
    const shared = new Set(all.seasons.flatMap(({ startsOn, endsOn }) => [startsOn, endsOn].map(weekStart)));
    const placed = (rows: typeof all.injuries) =>
      rows
        .filter(({ sessionId, onsetDay }) => sessionId !== null || !shared.has(weekStart(onsetDay)))
        .map(({ id, onset, day, weekAes, weekHours, sessionAes, daysLost }) =>
          onset === "gradual" ? { id, day, weekAes, weekHours } : { id, day, sessionAes, daysLost },
        );
    expect(placed(all.injuries).length).toBeGreaterThan(50);
    expect(text(placed(all.injuries))).toEqual(text(placed(single.flatMap(({ injuries }) => injuries))));
  });

  it("let no gradual injury in by a friendly after a season's last day", async () => {
    const organisation = await makeOrganisation();
    const staff = staffScope(organisation);
    const team = await makeTeam(staff);
    const athlete = await makeAthlete(staff, { teamId: team.id });
    const wednesday = "2026-06-10";
    await makeSeason(staff, { name: "before", startsOn: "2025-08-01", endsOn: wednesday });
    await makeSeason(staff, { name: "now", startsOn: "2026-08-01", endsOn: "2027-06-30" });
    await makeSession(staff, {
      teamId: team.id,
      day: addDays(wednesday, 2),
      minutes: { [athlete.id]: 60 },
    });
    await makeInjury(staff, {
      athleteId: athlete.id,
      onsetDay: addDays(wednesday, -1),
      onset: "gradual",
      unavailableFrom: wednesday,
    });
    const scope = await memberScope(await makePerson(organisation, { roles: ["lead"] }), organisation);
    const { injuries, cells } = await read(scope, async (tx) => {
      const { seasons } = await resolveViewing(tx, address);
      return countSeasons(tx, seasons, null);
    });
    expect(cells).toEqual([]);
    expect(injuries).toMatchObject([{ weekAes: false, weekHours: false }]);
  });
});
