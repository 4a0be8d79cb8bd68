/**
 * How tests use the harness.
 *
 * A test under tests/server or tests/browser has a database of its own: before each test file, tests/harness/setup.ts
 * copies the migrated template and sets the environment, so modules of the application can be imported as usual and
 * `read(scope, …)` and `write(scope, …)` work as the application's restricted role. Nothing needs cleaning up.
 *
 *   import { makeClub, makeAthlete, makeSession, memberScope } from "../../harness";
 *
 *   const club = await makeClub();                    // season, two teams, two athletes, a person and a scope per role
 *   await recordAttendance(club.scopes.coach, …);     // use cases take a scope
 *   await makeSession(club.staff, { teamId: club.team.id, minutes: { [club.athlete.id]: 90 } });
 *
 *   makeOrganisation, makePerson(organisation, { roles, teams?, confirmed? }), makeAccount, join, makeInvitation,
 *   memberScope(person, organisation): people and what the middleware would make of them.
 *   makeSeason, makeTeam, makeVenue, makeAthlete, makeRosterEntry, makeGuardian, makeSession, makeWarmUp,
 *   makeProgramme, makeInjury, makeAvailability, makeCoachReport, makeNotice(scope, given): records; what is left out
 *   is filled in with something believable, and every given column wins. Free text is given in clear and sealed.
 *   scopeOf(organisation, actors), staffScope(organisation): scopes by hand.
 *   maintenance(), owner(), authDatabase(), application(): postgres.js as the four roles, to plant and to inspect.
 *   openMailbox(): the mail service of this file; `(await openMailbox()).inbox`.
 *   atEnd(close): closed after the file's last test.
 *
 * Over HTTP (tests/harness/http.ts) and in a browser (tests/harness/browser.ts): see there; import those by path.
 *
 * Run some tests: `npx vitest run --config tests/vitest.config.ts <pattern>` (brings the test cluster up and leaves it
 * running for the next time), or `npm test -- <pattern>`.
 */
export { atEnd } from "./closing";
export { makeClub } from "./club";
export { application, authDatabase, maintenance, owner } from "./database";
export { makeAvailability, makeCoachReport, makeInjury } from "./factories/injuries";
export { makeNotice } from "./factories/notices";
export { makeAthlete, makeGuardian, makeRosterEntry } from "./factories/roster";
export { makeProgramme, makeSession, makeWarmUp } from "./factories/sessions";
export { makeSeason, makeTeam, makeVenue } from "./factories/settings";
export { openMailbox } from "./mailbox";
export {
  join,
  makeAccount,
  makeInvitation,
  makeOrganisation,
  makePerson,
  memberScope,
  type TestOrganisation,
  type TestPerson,
} from "./people";
export { scopeOf, staffScope } from "./scopes";
