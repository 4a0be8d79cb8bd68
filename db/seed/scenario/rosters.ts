import { addDays, dayNumber, dayOf } from "./days.ts";
import { drawGivenName, drawHousehold, type Household } from "./names.ts";
import { dayInSeason, MARRAM_BAY, seasonOf, TEAM_PLANS, type TeamPlan } from "./plan.ts";
import { openStream, type Random } from "./random.ts";
import type { Athlete, Day, EarlierInjury, RosterEntry } from "./types.ts";

/** An athlete with what only the generator needs: the teams they may play in and the home they come from. */
export type Member = {
  athlete: Athlete;
  plays: "female" | "male";
  household: Household;
  householdKey: string;
  joinedOn: Day;
  /** The team a visitor trains with for a fortnight; null for athletes with a roster. */
  visits: string | null;
};

type Place = { member: Member; plan: TeamPlan };

/** Whether the team takes this member, by sex category and by age on 1 September of the season. */
export function isEligible(plan: TeamPlan, member: Pick<Member, "plays" | "athlete">, year: number): boolean {
  const age = ageOnFirstSeptember(member.athlete.dateOfBirth, year);
  const wanted = plan.sexCategory;
  const fits =
    wanted === "mixed" || (wanted === "girls" || wanted === "women") === (member.plays === "female");
  return fits && age >= plan.ageGroup.minAge && age <= plan.ageGroup.maxAge;
}

function ageOnFirstSeptember(dateOfBirth: Day, year: number): number {
  return year - Number(dateOfBirth.slice(0, 4)) - (dateOfBirth.slice(5) > "09-01" ? 1 : 0);
}

/**
 * Athletes and rosters of one organisation over the given seasons: people grow out of a team and into the next,
 * leave, join, change team in mid-season, or play in two. Independent of today, so that the past never moves.
 */
export function buildRosters(seed: string, organisation: string, years: readonly number[]) {
  const random = openStream(seed, `rosters ${organisation}`);
  const plans = TEAM_PLANS.filter((plan) => plan.organisation === organisation);
  const members: Member[] = [];
  const roster: RosterEntry[] = [];
  let places: Place[] = [];

  for (const year of years) {
    places = keepPlaces(random, plans, places, year);
    for (const plan of plans) {
      // A team goes on with one fewer rather than look for somebody.
      const wanted = years[0] === year ? plan.size : plan.size - 1;
      const missing = wanted - places.filter((place) => place.plan === plan).length;
      for (let added = 0; added < missing; added += 1) {
        const member = drawMember(random, organisation, plan, year, years[0] === year, members);
        members.push(member);
        places.push({ member, plan });
      }
    }
    roster.push(...listEntries(random, plans, places, year));
  }
  members.push(...drawVisitors(random, organisation, plans, years, members));
  return { members, roster };
}

/** Who stays on into a season, and where. */
function keepPlaces(
  random: Random,
  plans: readonly TeamPlan[],
  before: readonly Place[],
  year: number,
): Place[] {
  const kept: Place[] = [];
  const hasRoom = (plan: TeamPlan, spare: number) =>
    kept.filter((place) => place.plan === plan).length < plan.size + spare;
  for (const { member, plan } of before) {
    if (random.chance(plan.ageGroup.label === "senior" ? 0.06 : 0.01)) continue;
    const stays = isEligible(plan, member, year) && hasRoom(plan, 3) && plan;
    const sameSport = plans.find(
      (next) => next.sport === plan.sport && isEligible(next, member, year) && hasRoom(next, 1),
    );
    const otherSport = plans.find((next) => isEligible(next, member, year) && hasRoom(next, -1));
    const next = stays || sameSport || otherSport;
    if (next) kept.push({ member, plan: next });
  }
  return kept;
}

function listEntries(random: Random, plans: readonly TeamPlan[], places: readonly Place[], year: number) {
  const organisation = plans[0]?.organisation ?? MARRAM_BAY;
  const season = seasonOf(organisation, year);
  const newYear = dayInSeason(year, "01-06");
  const entry = (member: Member, plan: TeamPlan, from: Day, to: Day): RosterEntry => ({
    organisation,
    athlete: member.athlete.key,
    team: plan.key,
    from,
    to,
  });
  const entries: RosterEntry[] = [];
  const sizes = new Map(plans.map((plan) => [plan, places.filter((place) => place.plan === plan).length]));
  let secondTeams = Math.round(places.length * 0.05);
  let transfers = Math.round(places.length * 0.015) + 1;
  for (const { member, plan } of random.shuffle(places)) {
    const from = [member.joinedOn, season.from].sort(compareText)[1] ?? season.from;
    const others = plans.filter(
      (each) =>
        each.sport !== plan.sport && isEligible(each, member, year) && (sizes.get(each) ?? 0) <= each.size,
    );
    const other = others.length > 0 && from === season.from ? random.pick(others) : null;
    if (other && transfers + secondTeams > 0) sizes.set(other, (sizes.get(other) ?? 0) + 1);
    if (other && transfers > 0) {
      transfers -= 1;
      entries.push(entry(member, plan, from, addDays(newYear, -1)), entry(member, other, newYear, season.to));
      continue;
    }
    entries.push(
      entry(member, plan, from, random.chance(0.012) ? addDays(newYear, random.int(0, 60)) : season.to),
    );
    if (other && secondTeams > 0) {
      secondTeams -= 1;
      entries.push(entry(member, other, addDays(season.from, 35), season.to));
    }
  }
  return entries.sort((a, b) => compareText(`${a.team} ${a.athlete}`, `${b.team} ${b.athlete}`));
}

/** Code-unit order: the same on every machine, whatever its language. */
export function compareText(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0;
}

function drawMember(
  random: Random,
  organisation: string,
  plan: TeamPlan,
  year: number,
  isFirstSeason: boolean,
  before: readonly Member[],
): Member {
  const { minAge, maxAge, label } = plan.ageGroup;
  // After the first season most newcomers are young: a team fills from below.
  const span =
    label === "senior" ? (isFirstSeason ? maxAge - minAge : 9) : isFirstSeason ? maxAge - minAge : 1;
  const age =
    minAge +
    Math.min(
      maxAge - minAge,
      Math.floor((label === "senior" ? random.next() ** 1.7 : random.next()) * (span + 1)),
    );
  const birthday = dayOf(dayNumber(`${year - age - 1}-09-02`) + random.int(0, 364));
  const late = !isFirstSeason && random.chance(0.1);
  const plays = plan.sexCategory === "mixed" ? random.pick(["female", "male"] as const) : sideOf(plan);
  const sibling = label !== "senior" && random.chance(0.08) ? findSibling(random, before, birthday) : null;
  return makeMember(random, {
    organisation,
    number: before.length + 1,
    plays,
    dateOfBirth: birthday,
    sibling,
    joinedOn: late ? dayInSeason(year, "01-06") : dayInSeason(year, "08-01"),
    visits: null,
    taken: before,
  });
}

function sideOf(plan: TeamPlan): "female" | "male" {
  return plan.sexCategory === "girls" || plan.sexCategory === "women" ? "female" : "male";
}

function findSibling(random: Random, before: readonly Member[], birthday: Day): Member | null {
  const year = Number(birthday.slice(0, 4));
  const near = before.filter((each) => {
    const gap = Math.abs(Number(each.athlete.dateOfBirth.slice(0, 4)) - year);
    return gap >= 2 && gap <= 5;
  });
  return near.length > 0 ? random.pick(near) : null;
}

type MemberFacts = {
  organisation: string;
  number: number | null;
  plays: "female" | "male";
  dateOfBirth: Day;
  sibling: Member | null;
  joinedOn: Day;
  visits: string | null;
  taken: readonly Member[];
};

function makeMember(random: Random, facts: MemberFacts): Member {
  const prefix = facts.organisation === MARRAM_BAY ? "MB" : "OT";
  const label = facts.number === null ? `V${facts.taken.length + 1}` : String(facts.number).padStart(4, "0");
  const key = `${prefix}-${label}`;
  const names = new Set(facts.taken.map((each) => `${each.athlete.givenName} ${each.athlete.familyName}`));
  let household = facts.sibling?.household ?? drawHousehold(random);
  let givenName = drawGivenName(random, household, facts.plays);
  // Two athletes of the demo never share a name by accident, save the pair made on purpose.
  while (names.has(`${givenName} ${household.familyName}`)) {
    if (!facts.sibling) household = drawHousehold(random);
    givenName = drawGivenName(random, household, random.pick(["female", "male"] as const));
  }
  const athlete: Athlete = {
    organisation: facts.organisation,
    key,
    number: facts.number === null ? null : key,
    givenName,
    familyName: household.familyName,
    dateOfBirth: facts.dateOfBirth,
    sex: random.chance(0.03) ? "not_stated" : facts.plays,
    dominantLeg: random.weighted([
      ["right", 74],
      ["left", 18],
      ["both", 3],
      ["unknown", 5],
    ]),
    visitor: facts.number === null,
    earlierInjuries: drawEarlierInjuries(random, facts),
    actionAlerts: [],
    researchConsent: random.weighted([
      ["given", 6],
      ["refused", 1],
      ["not_asked", 3],
    ]),
    safeguardingHold: null,
  };
  return {
    athlete,
    plays: facts.plays,
    household,
    householdKey: facts.sibling?.householdKey ?? key,
    joinedOn: facts.joinedOn,
    visits: facts.visits,
  };
}

/** Injuries from before the club: a few torn cruciate ligaments (a second one on the other knee half the time), ankles. */
function drawEarlierInjuries(random: Random, facts: MemberFacts): EarlierInjury[] {
  const joined = Number(facts.joinedOn.slice(0, 4));
  const age = joined - Number(facts.dateOfBirth.slice(0, 4));
  const injuries: EarlierInjury[] = [];
  const side = random.pick(["left", "right"] as const);
  if (age >= 15 && random.chance(facts.plays === "female" ? 0.09 : 0.03)) {
    const year = joined - random.int(1, Math.min(4, age - 13));
    injuries.push({
      area: "knee",
      side,
      pathology: "sprain",
      words: "Anterior cruciate ligament tear, reconstructed",
      year,
    });
    if (random.chance(0.1) && year < joined) {
      const again = random.chance(0.5) ? side : side === "left" ? "right" : "left";
      injuries.push({
        area: "knee",
        side: again,
        pathology: "sprain",
        words: "Anterior cruciate ligament tear",
        year: joined,
      });
    }
  }
  if (age >= 12 && random.chance(0.1)) {
    injuries.push({ area: "ankle", side, pathology: "sprain", words: "Ankle sprain", year: joined - 1 });
  }
  return injuries;
}

/** Visitors and try-outs: recorded in a session or two, never on a roster. */
function drawVisitors(
  random: Random,
  organisation: string,
  plans: readonly TeamPlan[],
  years: readonly number[],
  members: readonly Member[],
): Member[] {
  const visitors: Member[] = [];
  const count = organisation === MARRAM_BAY ? 6 : 1;
  for (let index = 0; index < count; index += 1) {
    const year = years[index % years.length] ?? years[0] ?? 0;
    const plan = random.pick(plans.filter((each) => each.exposureHabit === "recorded"));
    const age = plan.ageGroup.minAge + random.int(0, 1);
    visitors.push(
      makeMember(random, {
        organisation,
        number: null,
        plays: plan.sexCategory === "mixed" ? "female" : sideOf(plan),
        dateOfBirth: dayOf(dayNumber(`${year - age - 1}-09-02`) + random.int(0, 364)),
        sibling: null,
        joinedOn: dayInSeason(year, "09-20"),
        visits: plan.key,
        taken: [...members, ...visitors],
      }),
    );
  }
  return visitors;
}

/**
 * Makes two of the school's athletes the same young people as two of the club's: same name and date of birth in
 * both organisations, with records that know nothing of each other.
 */
export function shareAthletes(
  school: readonly Member[],
  roster: readonly RosterEntry[],
  club: readonly Member[],
  year: number,
): void {
  const taken = new Set<string>();
  for (const key of ["otterwick-soccer-girls-u16", "otterwick-basketball-boys-u16"]) {
    const plan = TEAM_PLANS.find((each) => each.key === key);
    const entry = roster.find((each) => each.team === key);
    const pupil = school.find((each) => each.athlete.key === entry?.athlete);
    const member = club.find(
      (each) => plan && each.visits === null && !taken.has(each.athlete.key) && isEligible(plan, each, year),
    );
    if (!pupil || !member) continue;
    taken.add(member.athlete.key);
    const { givenName, familyName, dateOfBirth, sex } = member.athlete;
    Object.assign(pupil.athlete, { givenName, familyName, dateOfBirth, sex });
    pupil.household = member.household;
  }
}
