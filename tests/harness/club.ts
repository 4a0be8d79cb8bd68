import { makeAthlete } from "./factories/roster";
import { makeSeason, makeTeam } from "./factories/settings";
import { makeOrganisation, makePerson, memberScope } from "./people";
import { staffScope } from "./scopes";

/**
 * A club to begin a test with: a season around today, two teams, an athlete in each, and a person per role. The trainer
 * and the coach cover the first team only; the administrator and the lead cover all.
 */
export async function makeClub(given: Parameters<typeof makeOrganisation>[0] = {}) {
  const organisation = await makeOrganisation(given);
  const staff = staffScope(organisation);
  const season = await makeSeason(staff);
  const team = await makeTeam(staff);
  const otherTeam = await makeTeam(staff, { name: "U18 Boys", sex: "boys", underAge: 18 });
  const athlete = await makeAthlete(staff, { teamId: team.id });
  const otherAthlete = await makeAthlete(staff, { teamId: otherTeam.id, sex: "male", givenName: "Tomos" });
  const own = { teams: [team.id] };
  const people = {
    admin: await makePerson(organisation, { roles: ["admin"] }),
    lead: await makePerson(organisation, { roles: ["lead"] }),
    trainer: await makePerson(organisation, { roles: ["trainer"], ...own }),
    coach: await makePerson(organisation, { roles: ["coach"], ...own }),
  };
  return {
    organisation,
    season,
    team,
    otherTeam,
    athlete,
    otherAthlete,
    people,
    /** Writes as anybody of the staff, without a person: for factories. */
    staff,
    scopes: {
      admin: await memberScope(people.admin, organisation),
      lead: await memberScope(people.lead, organisation),
      trainer: await memberScope(people.trainer, organisation),
      coach: await memberScope(people.coach, organisation),
    },
  };
}
