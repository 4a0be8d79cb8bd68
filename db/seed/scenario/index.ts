import { DateTime } from "luxon";
import { asKnownOn, createAvailabilityBook, drawIllnesses } from "./availability.ts";
import { ageOnDay, dayNumber, mondayOf } from "./days.ts";
import { buildFamilies, markSpecialFamilies } from "./families.ts";
import { asInjuryKnownOn, makeInjury, pickPattern, sportGroupOf } from "./injuries.ts";
import { SUDDEN_PATTERNS } from "./injury-patterns.ts";
import {
  drawCoachReports,
  drawConfirmedWeeks,
  drawEncounters,
  drawNotices,
  drawWaitingReports,
} from "./messages.ts";
import { type ContactBook, createContactBook } from "./names.ts";
import { listOrganisations, listStaff, listTeams, listVenues, staffOf } from "./organisations.ts";
import { listSeasonYears, MARRAM_BAY, OTTERWICK, seasonOf, TEAM_PLANS } from "./plan.ts";
import { openStream, type Random } from "./random.ts";
import { buildRosters, compareText, type Member, shareAthletes } from "./rosters.ts";
import { buildFixtures } from "./schedule.ts";
import { drawOutsideInjuries, playFixtures } from "./simulate.ts";
import type { Day, Membership, RosterEntry, Scenario, Team } from "./types.ts";

/**
 * Chosen among thirty for a demo with about 190 injuries and an open cruciate ligament tear on 1 December 2026, so
 * its own counts are no fair test of the true rates: those are held against other seeds.
 */
export const DEMO_SEED = "wick";

/** The demo's default day: today in the organisations' time zone. The only place that reads a clock. */
export function todayInMarramBay(): Day {
  return DateTime.now().setZone("Europe/London").toFormat("yyyy-MM-dd");
}

/**
 * Builds the demo: two organisations, three seasons up to the one `today` falls in, played up to the day before
 * today and planned for two weeks more. The same seed and day give the same data; a later day of the same season
 * only adds to it. Throws RangeError for a day that does not exist.
 */
export function buildScenario({
  seed = DEMO_SEED,
  today = todayInMarramBay(),
}: {
  seed?: string;
  today?: Day;
} = {}): Scenario {
  dayNumber(today);
  const years = listSeasonYears(today);
  const contacts = createContactBook(openStream(seed, "contacts"));
  const { people, memberships } = listStaff(contacts);
  const teams = listTeams(years);
  const venues = listVenues(contacts);
  const club = buildOrganisation({
    seed,
    today,
    organisation: MARRAM_BAY,
    years,
    contacts,
    memberships,
    teams,
  });
  const school = buildOrganisation({
    seed,
    today,
    organisation: OTTERWICK,
    years: [years[2]],
    contacts,
    memberships,
    teams,
    sharesWith: club.members,
  });
  const both = [club, school] as const;
  return {
    seed,
    today,
    organisations: listOrganisations(),
    people,
    memberships,
    seasons: both.flatMap((each) => each.seasons),
    teams,
    venues,
    athletes: both.flatMap((each) => each.athletes),
    guardians: both.flatMap((each) => each.guardians),
    guardianships: both.flatMap((each) => each.guardianships),
    roster: both.flatMap((each) => each.roster),
    sessions: both.flatMap((each) => each.sessions),
    participations: both.flatMap((each) => each.participations),
    warmUps: both.flatMap((each) => each.warmUps),
    injuries: both.flatMap((each) => each.injuries),
    availability: both.flatMap((each) => each.availability),
    coachReports: both.flatMap((each) => each.coachReports),
    encounters: both.flatMap((each) => each.encounters),
    notices: both.flatMap((each) => each.notices),
    confirmedWeeks: both.flatMap((each) => each.confirmedWeeks),
    truth: {
      warmedUpWithoutRecord: both.flatMap((each) => each.warmedUpWithoutRecord),
      silentWeeks: both.flatMap((each) => each.silentWeeks),
    },
  };
}

type OrganisationInput = {
  seed: string;
  today: Day;
  organisation: string;
  /** The years in which its seasons begin, oldest first. */
  years: readonly number[];
  contacts: ContactBook;
  memberships: readonly Membership[];
  teams: readonly Team[];
  /** Members of the other organisation, two of whom are athletes of this one too. */
  sharesWith?: readonly Member[];
};

function buildOrganisation(input: OrganisationInput) {
  const { seed, today, organisation, years, contacts, memberships, teams, sharesWith } = input;
  const current = years.at(-1) ?? Number(today.slice(0, 4));
  const seasons = years.map((year) => seasonOf(organisation, year));
  const staff = (team: string) => staffOf(memberships, organisation, team);
  const wholeRosters = buildRosters(seed, organisation, years);
  const roster = asRosterKnownOn(wholeRosters.roster, today, `${current + 1}-06-30`);
  const rostered = new Set(roster.map((entry) => entry.athlete));
  const members = wholeRosters.members.filter((member) =>
    member.visits === null ? rostered.has(member.athlete.key) : member.joinedOn < today,
  );
  const seasonFrom = `${current}-08-01`;
  const atStart = wholeRosters.roster.filter((entry) => entry.from === seasonFrom);
  if (sharesWith) shareAthletes(wholeRosters.members, atStart, sharesWith, current);
  const athletes = members.map((member) => member.athlete);
  // Drawn for everyone who will ever join, then cut: a newcomer must not change another family's names.
  const families = buildFamilies(seed, organisation, wholeRosters.members, contacts);
  const isKnown = new Set(athletes.map((athlete) => athlete.key));
  const guardianships = families.guardianships.filter((link) => isKnown.has(link.athlete));
  const told = new Set(guardianships.map((link) => link.guardian));
  const guardians = families.guardians.filter((guardian) => told.has(guardian.key));
  const clinician = staff(TEAM_PLANS.find((plan) => plan.organisation === organisation)?.key ?? "").trainer;
  markSpecialFamilies(seed, organisation, {
    athletes,
    guardianships,
    roster: atStart,
    seasonFrom,
    clinician,
  });

  const fixtures = TEAM_PLANS.filter((plan) => plan.organisation === organisation)
    .flatMap((plan) => {
      const programmeFrom =
        teams.find((team) => team.key === plan.key)?.programmeFrom ?? seasons[0]?.from ?? today;
      return years.flatMap((year, index) =>
        buildFixtures(seed, plan, year, 3 - years.length + index, programmeFrom),
      );
    })
    .sort((a, b) => compareText(`${a.day} ${a.start} ${a.key}`, `${b.day} ${b.start} ${b.key}`));
  const availability = createAvailabilityBook();
  for (const year of years) availability.add(drawIllnesses(seed, wholeRosters.roster, year));
  const outside = seasons.flatMap((season) =>
    drawOutsideInjuries(
      seed,
      members,
      wholeRosters.roster,
      season,
      (random, member, day) => drawOutsideInjury(random, member, day, clinician),
      organisation === MARRAM_BAY ? 0.02 : 0.03,
    ),
  );
  for (const each of outside) availability.add(each.contributions);
  const outsideInjuries = outside.map((each) => each.injury);
  const played = playFixtures({
    seed,
    today,
    members,
    roster: wholeRosters.roster,
    fixtures,
    availability,
    injuriesBefore: outsideInjuries,
    staffOf: staff,
  });
  const injuries = [...outsideInjuries, ...played.injuries]
    .filter((injury) => injury.at.slice(0, 10) < today)
    .sort((a, b) => compareText(`${a.at} ${a.key}`, `${b.at} ${b.key}`))
    .map((injury) => asInjuryKnownOn(injury, today));
  const known = new Set(injuries.map((injury) => injury.key));
  const sessionsByKey = new Map(played.sessions.map((session) => [session.key, session]));
  const inOrganisation = { seed, today, staffOf: staff };
  const weeks = listWeeks(fixtures);
  return {
    seasons,
    members: members.filter((member) => member.joinedOn <= seasonFrom),
    athletes,
    guardians,
    guardianships,
    roster,
    sessions: played.sessions,
    participations: played.participations,
    warmUps: played.warmUps,
    injuries,
    availability: asKnownOn(availability.list(), today).filter((each) =>
      each.injury === null ? rostered.has(each.athlete) : known.has(each.injury),
    ),
    coachReports: [
      ...drawCoachReports(inOrganisation, sessionsByKey, injuries, guardianships),
      ...drawWaitingReports(inOrganisation, played.sessions, played.participations),
    ],
    encounters: drawEncounters(inOrganisation, played.sessions, played.participations),
    notices: drawNotices(inOrganisation, athletes, guardians, guardianships, injuries),
    confirmedWeeks: drawConfirmedWeeks(
      inOrganisation,
      weeks,
      listInjuredWeeks(injuries, wholeRosters.roster),
    ),
    warmedUpWithoutRecord: played.warmedUpWithoutRecord,
    silentWeeks: weeks
      .filter((week) => week.isSilent && week.monday < today)
      .map(({ team, monday }) => ({ team, monday })),
  };
}

/** Entries not begun yet are unknown; those of the current season run on until somebody ends them. */
function asRosterKnownOn(roster: readonly RosterEntry[], today: Day, seasonEnd: Day): RosterEntry[] {
  return roster
    .filter((entry) => entry.from <= today)
    .map((entry) => ({
      ...entry,
      to:
        entry.to !== null && (entry.to > today || (entry.to === seasonEnd && today <= seasonEnd))
          ? null
          : entry.to,
    }));
}

function drawOutsideInjury(random: Random, member: Member, day: Day, loggedBy: string) {
  const { athlete } = member;
  const age = ageOnDay(athlete.dateOfBirth, day);
  const pattern = pickPattern(random, SUDDEN_PATTERNS, athlete, sportGroupOf("soccer"), age);
  const contact = random.weighted(pattern.contacts);
  return makeInjury(
    random,
    { pattern, contact },
    {
      athlete,
      day,
      start: "12:00",
      minute: random.int(0, 180),
      session: null,
      before: [],
      loggedBy,
    },
  );
}

function listWeeks(fixtures: ReturnType<typeof buildFixtures>) {
  const weeks = new Map(
    fixtures.map(({ plan, monday, isSilent }) => [
      `${plan.key} ${monday}`,
      { organisation: plan.organisation, team: plan.key, monday, isSilent },
    ]),
  );
  return [...weeks.values()];
}

function listInjuredWeeks(injuries: Scenario["injuries"], roster: readonly RosterEntry[]): Set<string> {
  const weeks = new Set<string>();
  for (const { athlete, at } of injuries) {
    const day = at.slice(0, 10);
    const teams = roster.filter(
      (entry) => entry.athlete === athlete && entry.from <= day && (entry.to ?? day) >= day,
    );
    for (const { team } of teams) weeks.add(`${team} ${mondayOf(day)}`);
  }
  return weeks;
}
