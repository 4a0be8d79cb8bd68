import { addDays, mondayOf } from "./days.ts";
import type { AgeGroup, Day, Season, SexCategory, Sport, SportRule, Surface } from "./types.ts";

/** The standing arrangements of the two organisations: teams, weekly habits, rules of play. Invented. */
export const MARRAM_BAY = "marram-bay";
export const OTTERWICK = "otterwick";

export type TeamPlan = {
  organisation: string;
  key: string;
  name: string;
  sport: Sport;
  sexCategory: SexCategory;
  ageGroup: AgeGroup;
  size: number;
  trainingWeekday: number;
  trainingStart: string;
  trainingMinutes: number;
  /** A second, shorter session of strength work every so many weeks; null for none. */
  strengthEveryWeeks: number | null;
  matchWeekday: number;
  matchEveryWeeks: number;
  venue: string;
  surface: Surface;
  /** How likely a full warm-up is in the first week of a season, and that what was done is written down. */
  warmUpHabit: number;
  warmUpRecording: number;
  /** Which of the scenario's seasons (0 to 2) and which day of it the programme began. */
  programmeStart: { season: number; monthDay: string };
  /** "headcount": this team only ever counts heads. */
  exposureHabit: "recorded" | "headcount";
};

const group = (label: string, minAge: number, maxAge: number): AgeGroup => ({ label, minAge, maxAge });
const UNDER_12 = group("under 12", 9, 11);
const UNDER_14 = group("under 14", 12, 13);
const UNDER_16 = group("under 16", 14, 15);
const SENIOR = group("senior", 16, 34);
const FROM_START = { season: 0, monthDay: "08-01" };
const SECOND_SEASON = { season: 1, monthDay: "08-01" };
const SECOND_WINTER = { season: 1, monthDay: "01-05" };

type Habits = Pick<TeamPlan, "trainingWeekday" | "trainingStart" | "trainingMinutes" | "venue" | "surface"> &
  Partial<TeamPlan>;

function plan(
  organisation: string,
  sport: Sport,
  sexCategory: SexCategory,
  ageGroup: AgeGroup,
  size: number,
  habits: Habits,
): TeamPlan {
  const place = organisation === MARRAM_BAY ? "" : "otterwick-";
  const adult = sexCategory === "women" || sexCategory === "men";
  const title = sport[0]?.toUpperCase() + sport.slice(1);
  const age = ageGroup.label.replace("under ", "U");
  return {
    organisation,
    key: `${place}${sport}-${sexCategory}${adult ? "" : `-${age.toLowerCase()}`}`,
    name: adult ? `${title} ${sexCategory}` : `${title} ${age} ${sexCategory}`,
    sport,
    sexCategory,
    ageGroup,
    size,
    strengthEveryWeeks: null,
    matchWeekday: 5,
    matchEveryWeeks: 2,
    warmUpHabit: 0.75,
    warmUpRecording: 0.93,
    programmeStart: FROM_START,
    exposureHabit: "recorded",
    ...habits,
  };
}

const grass = (weekday: number, start: string, minutes: number): Habits => ({
  trainingWeekday: weekday,
  trainingStart: start,
  trainingMinutes: minutes,
  venue: "harbour-field",
  surface: "natural_grass",
});
const turf = (weekday: number, start: string, minutes: number): Habits => ({
  ...grass(weekday, start, minutes),
  venue: "dune-park",
  surface: "artificial_turf",
});
const hall = (weekday: number, start: string, minutes: number): Habits => ({
  ...grass(weekday, start, minutes),
  venue: "lighthouse-hall",
  surface: "wood",
  matchWeekday: 6,
});
const court = (weekday: number, start: string, minutes: number): Habits => ({
  ...hall(weekday, start, minutes),
  venue: "breakwater-hall",
  surface: "synthetic_court",
});

export const TEAM_PLANS: readonly TeamPlan[] = [
  plan(MARRAM_BAY, "soccer", "girls", UNDER_12, 14, {
    ...grass(1, "17:15", 60),
    matchEveryWeeks: 3,
    warmUpHabit: 0.86,
  }),
  plan(MARRAM_BAY, "soccer", "girls", UNDER_14, 16, { ...turf(2, "17:30", 75), warmUpHabit: 0.9 }),
  plan(MARRAM_BAY, "soccer", "girls", UNDER_16, 17, {
    ...turf(3, "18:00", 90),
    warmUpHabit: 0.93,
    strengthEveryWeeks: 3,
  }),
  plan(MARRAM_BAY, "soccer", "women", SENIOR, 19, {
    ...grass(1, "19:30", 90),
    warmUpHabit: 0.9,
    strengthEveryWeeks: 3,
    matchWeekday: 6,
  }),
  plan(MARRAM_BAY, "soccer", "boys", UNDER_12, 14, {
    ...grass(0, "17:15", 60),
    matchEveryWeeks: 3,
    warmUpHabit: 0.55,
    programmeStart: SECOND_WINTER,
    exposureHabit: "headcount",
  }),
  plan(MARRAM_BAY, "soccer", "boys", UNDER_14, 16, {
    ...turf(1, "17:30", 75),
    warmUpHabit: 0.62,
    programmeStart: SECOND_SEASON,
  }),
  plan(MARRAM_BAY, "soccer", "boys", UNDER_16, 17, {
    ...turf(4, "17:45", 90),
    warmUpHabit: 0.7,
    programmeStart: SECOND_SEASON,
    strengthEveryWeeks: 3,
  }),
  plan(MARRAM_BAY, "soccer", "men", SENIOR, 19, {
    ...grass(3, "19:30", 90),
    warmUpHabit: 0.5,
    warmUpRecording: 0.8,
    programmeStart: SECOND_WINTER,
    strengthEveryWeeks: 3,
  }),
  plan(MARRAM_BAY, "basketball", "girls", group("under 16", 13, 15), 13, {
    ...hall(0, "17:30", 90),
    warmUpHabit: 0.88,
  }),
  plan(MARRAM_BAY, "basketball", "boys", group("under 16", 13, 15), 13, {
    ...hall(2, "17:30", 90),
    warmUpHabit: 0.66,
    programmeStart: SECOND_SEASON,
  }),
  plan(MARRAM_BAY, "basketball", "boys", group("under 18", 16, 17), 13, {
    ...hall(2, "19:00", 90),
    warmUpHabit: 0.6,
    programmeStart: SECOND_SEASON,
    strengthEveryWeeks: 4,
  }),
  plan(MARRAM_BAY, "handball", "girls", group("under 16", 13, 15), 14, {
    ...court(1, "17:30", 90),
    warmUpHabit: 0.92,
  }),
  plan(MARRAM_BAY, "handball", "women", SENIOR, 15, {
    ...court(3, "19:30", 90),
    warmUpHabit: 0.82,
    strengthEveryWeeks: 3,
  }),
  plan(MARRAM_BAY, "handball", "boys", group("under 18", 15, 17), 14, {
    ...court(4, "18:30", 90),
    warmUpHabit: 0.58,
    programmeStart: SECOND_WINTER,
  }),
  plan(MARRAM_BAY, "volleyball", "mixed", group("under 14", 11, 13), 13, {
    ...hall(4, "17:00", 75),
    warmUpHabit: 0.74,
  }),
  plan(MARRAM_BAY, "volleyball", "girls", group("under 18", 14, 17), 13, {
    ...hall(1, "18:30", 90),
    warmUpHabit: 0.84,
    strengthEveryWeeks: 3,
  }),
  plan(OTTERWICK, "soccer", "girls", group("under 16", 13, 15), 16, {
    ...grass(0, "15:45", 75),
    venue: "otterwick-playing-field",
    matchWeekday: 2,
    matchEveryWeeks: 3,
    programmeStart: { season: 2, monthDay: "08-01" },
  }),
  plan(OTTERWICK, "basketball", "boys", group("under 16", 13, 15), 12, {
    ...hall(1, "15:45", 75),
    venue: "otterwick-gym",
    matchWeekday: 3,
    matchEveryWeeks: 3,
    programmeStart: { season: 2, monthDay: "08-01" },
  }),
  plan(OTTERWICK, "volleyball", "mixed", group("under 14", 11, 13), 12, {
    ...hall(2, "15:45", 75),
    venue: "otterwick-gym",
    matchWeekday: 4,
    matchEveryWeeks: 4,
    programmeStart: { season: 2, monthDay: "08-01" },
  }),
];

/** Players on the field and regulation minutes, in common use or simplified; an administrator edits them. */
const RULES: Record<Sport, Record<string, readonly [number, number]>> = {
  soccer: { "under 12": [9, 60], "under 14": [11, 70], "under 16": [11, 80], senior: [11, 90] },
  basketball: { "under 16": [5, 40], "under 18": [5, 40] },
  handball: { "under 16": [7, 50], "under 18": [7, 60], senior: [7, 60] },
  volleyball: { "under 14": [6, 50], "under 18": [6, 60] },
};

/** Throws RangeError when a team's age group has no rule of play. */
export function sportRuleOf(sport: Sport, ageGroup: string): SportRule {
  const rule = RULES[sport][ageGroup];
  if (!rule) throw new RangeError(`sportRuleOf: ${sport} has no rule for ${ageGroup}`);
  return { sport, ageGroup, playersOnField: rule[0], regulationMinutes: rule[1] };
}

export function listSportRules(organisation: string): SportRule[] {
  const seen = new Map<string, SportRule>();
  for (const team of TEAM_PLANS.filter((each) => each.organisation === organisation)) {
    const label = team.ageGroup.label;
    seen.set(`${team.sport} ${label}`, sportRuleOf(team.sport, label));
  }
  return [...seen.values()];
}

/** The three seasons that end with the one `today` falls in; July still belongs to the season that closed. */
export function listSeasonYears(today: Day): [number, number, number] {
  const year = Number(today.slice(0, 4)) - (today.slice(5) < "08-01" ? 1 : 0);
  return [year - 2, year - 1, year];
}

export function seasonOf(organisation: string, year: number): Season {
  const name = `${year}/${String((year + 1) % 100).padStart(2, "0")}`;
  return {
    organisation,
    key: `${organisation}-${year}`,
    name,
    from: `${year}-08-01`,
    to: `${year + 1}-06-30`,
  };
}

/** Date of a month and day within the season that begins in August of `year`. */
export function dayInSeason(year: number, monthDay: string): Day {
  return `${monthDay < "08-01" ? year + 1 : year}-${monthDay}`;
}

/** First and last Monday of a sport's own season within the club's. */
export function playingWeeks(plan: TeamPlan, year: number): { first: Day; last: Day } {
  const outdoor = plan.sport === "soccer";
  const school = plan.organisation === OTTERWICK;
  const first = dayInSeason(year, school ? "09-07" : outdoor ? "08-14" : "09-04");
  return { first: addDays(mondayOf(first), 7), last: dayInSeason(year, outdoor ? "05-15" : "05-10") };
}

/** Christmas for everyone; autumn half-term and Easter for the young. */
export function isBreak(plan: TeamPlan, day: Day): boolean {
  const monthDay = day.slice(5);
  if (monthDay >= "12-21" || monthDay <= "01-04") return true;
  if (plan.ageGroup.label === "senior") return false;
  return (monthDay >= "10-25" && monthDay <= "10-31") || (monthDay >= "04-03" && monthDay <= "04-16");
}
