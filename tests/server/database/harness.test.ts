import { sql } from "drizzle-orm";
import { expect, it } from "vitest";
import { read } from "~db/client.server";
import {
  makeAvailability,
  makeClub,
  makeCoachReport,
  makeGuardian,
  makeInjury,
  makeNotice,
  makeOrganisation,
  makePerson,
  makeProgramme,
  makeSession,
  makeVenue,
  makeWarmUp,
  memberScope,
} from "../../harness";

it("makes organisations and people by the real writes", async () => {
  const club = await makeOrganisation();
  const trainer = await makePerson(club, { roles: ["trainer"] });
  expect(await memberScope(trainer, club)).toMatchObject({
    organisationId: club.id,
    roles: ["trainer"],
    teams: "all",
    unconfirmed: [],
  });
  const waiting = await makePerson(club, { roles: ["lead"], confirmed: false, teams: [] });
  expect(await memberScope(waiting, club)).toMatchObject({ roles: [], teams: [], unconfirmed: ["lead"] });
});

it("makes every kind of record as the application's role", async () => {
  const { staff, team, athlete, scopes } = await makeClub();
  await makeVenue(staff);
  await makeProgramme(staff, { teamIds: [team.id] });
  const session = await makeSession(staff, { teamId: team.id, minutes: { [athlete.id]: 90 } });
  await makeWarmUp(staff, { sessionId: session.id, athleteIds: [athlete.id] });
  const injury = await makeInjury(staff, {
    athleteId: athlete.id,
    sessionId: session.id,
    description: "It gave way while turning.",
    notes: ["Seen at the ground."],
    unavailableFrom: staff.today,
  });
  await makeCoachReport(staff, { athleteId: athlete.id, note: "Swelled at once." });
  await makeAvailability(staff, { athleteId: athlete.id, cause: "illness", state: "modified" });
  const guardian = await makeGuardian(staff, { athleteIds: [athlete.id] });
  await makeNotice(staff, { injuryId: injury.id, athleteId: athlete.id, guardianId: guardian.id });
  const [counts] = await read(scopes.trainer, (tx) =>
    tx.execute<{ injuries: string; changes: string; notices: string }>(sql`select
      (select count(*) from current_injuries) as injuries,
      (select count(*) from availability_contributions) as changes,
      (select count(*) from notices) as notices`),
  );
  expect(counts).toEqual({ injuries: "1", changes: "2", notices: "1" });
});
