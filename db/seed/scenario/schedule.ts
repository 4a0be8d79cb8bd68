import { addDays } from "./days.ts";
import { isBreak, playingWeeks, sportRuleOf, type TeamPlan } from "./plan.ts";
import { openStream } from "./random.ts";
import type { Day, SessionKind, Surface } from "./types.ts";

/** One entry of a team's calendar, before anyone has played it. */
export type Fixture = {
  key: string;
  plan: TeamPlan;
  day: Day;
  monday: Day;
  /** Weeks since the team's first of the season. */
  week: number;
  start: string;
  kind: SessionKind;
  plannedMinutes: number;
  surface: Surface;
  venue: string | null;
  isSilent: boolean;
  /** Day on which the team began the warm-up programme. */
  programmeFrom: Day;
};

/** The team that reported nothing for six weeks in the second season: its coach was away and nobody stood in. */
const SILENT_TEAM = "handball-boys-u18";
const SILENT_WEEKS = { season: 1, first: 9, last: 14 };

/** A team's calendar for one season, in order of day; `season` is its place (0 to 2) among the scenario's three. */
export function buildFixtures(
  seed: string,
  plan: TeamPlan,
  year: number,
  season: number,
  programmeFrom: Day,
): Fixture[] {
  const random = openStream(seed, `fixtures ${plan.key} ${year}`);
  const { first, last } = playingWeeks(plan, year);
  const rule = sportRuleOf(plan.sport, plan.ageGroup.label);
  const matchPhase = random.int(0, plan.matchEveryWeeks - 1);
  const fixtures: Fixture[] = [];
  for (let monday = first, week = 0; addDays(monday, 6) <= last; monday = addDays(monday, 7), week += 1) {
    const isSilent =
      plan.key === SILENT_TEAM &&
      season === SILENT_WEEKS.season &&
      week >= SILENT_WEEKS.first &&
      week <= SILENT_WEEKS.last;
    const add = (
      weekday: number,
      kind: SessionKind,
      start: string,
      plannedMinutes: number,
      more?: Partial<Fixture>,
    ) => {
      const day = addDays(monday, weekday);
      if (isBreak(plan, day)) return;
      const { surface, venue } = plan;
      const key = `${plan.key}/${day}/${kind}`;
      const fixture = { key, plan, day, monday, week, start, kind, plannedMinutes, surface, venue };
      fixtures.push({ ...fixture, isSilent, programmeFrom, ...more });
    };
    add(plan.trainingWeekday, "training", plan.trainingStart, plan.trainingMinutes);
    if (plan.strengthEveryWeeks !== null && week % plan.strengthEveryWeeks === 0) {
      const place = { venue: "sluice-gym", surface: "other" } as const;
      add((plan.trainingWeekday + 2) % 5, "strength", plan.trainingStart, 45, place);
    }
    if (week >= 2 && week % plan.matchEveryWeeks === matchPhase) {
      const away = (week / plan.matchEveryWeeks) % 2 >= 1;
      const start =
        plan.matchWeekday < 5 ? "15:45" : random.pick(["10:00", "10:30", "11:00", "13:30", "14:00"]);
      add(plan.matchWeekday, "match", start, rule.regulationMinutes, away ? { venue: null } : {});
    }
    if (week === 0 && plan.ageGroup.label === "senior") {
      add((plan.trainingWeekday + 3) % 5, "other", plan.trainingStart, 60, { surface: "sand", venue: null });
    }
  }
  return fixtures.sort((a, b) => (`${a.day} ${a.start}` < `${b.day} ${b.start}` ? -1 : 1));
}
