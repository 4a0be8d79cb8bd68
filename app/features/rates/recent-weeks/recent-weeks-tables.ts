import { stableFrom } from "../coverage";
import type { RateUnit } from "../filters";
import { dayWords } from "../periods";
import { unitWords } from "../sentence";
import { type Cell, figure, type TableColumn, type TableData } from "../tables";
import type { TeamSurprise } from "./recent-weeks";
import type { WeekCharts } from "./recent-weeks-charts";

const text = (id: string, header: string): TableColumn => ({ id, header, kind: "text" });
const count = (id: string, header: string): TableColumn => ({ id, header, kind: "count" });
const number = (id: string, header: string, decimals: number): TableColumn => ({
  ...{ id, header, decimals },
  kind: "number",
});

/** A chance that three decimals would write as 0 is not none. */
const chance = (p: number | null): Cell => (p !== null && p < 0.0005 ? "below 0.0005" : p);

/** The last four weeks of each team against its own past. */
export function teamSurprisesTable(rows: readonly TeamSurprise[], unit: RateUnit, days: string): TableData {
  return {
    id: "teams",
    caption: `Each team against its own past, ${days}`,
    columns: [
      text("team", "Team"),
      count("observed", "Injuries"),
      { id: "expected", header: "Expected", kind: "figure", form: "rate", unit: "injuries" },
      number("probability", "Chance of so many or more", 3),
      number("probability-at-upper", "At the upper limit", 3),
      count("exposure", unit === "aes" ? "Exposures" : "Hours"),
      count("baseline", "Injuries before"),
      text("reported", "Weeks reported on"),
    ],
    rows: rows.map(({ teamId, name, observed, expected, reason, exposure, reported, baseline, ...row }) => ({
      key: teamId,
      cells: {
        team: name,
        observed: observed ?? (reported.all > 0 ? { reason: "not reported" } : null),
        expected: expected
          ? figure(expected, baseline.injuries < stableFrom)
          : { reason: reason?.split(":")[0] ?? "not known" },
        probability: chance(row.probability),
        "probability-at-upper": chance(row.probabilityAtUpper),
        exposure,
        baseline: baseline.injuries,
        reported: `${reported.reported} of ${reported.all}`,
      },
    })),
    empty: "No team has exposure here.",
  };
}

/** The weeks of both charts. */
export function weeksTable({ weeks }: WeekCharts, unit: RateUnit): TableData {
  const per = `per ${unitWords[unit]}`;
  return {
    id: "weeks",
    caption: "Weeks with exposure",
    columns: [
      text("week", "Week from"),
      count("injuries", "Injuries"),
      number("expected", "Expected", 2),
      count("exposure", unit === "aes" ? "Exposures" : "Hours"),
      { id: "rate", header: "Rate", kind: "figure", form: "rate", unit: per, bar: true },
      number("lower", "Lower limit", 1),
      number("upper", "Upper limit", 1),
      number("cusum", "Running sum", 1),
    ],
    rows: weeks
      .filter(({ gap }) => gap !== "no exposure")
      .map(({ week, unfinished, events, exposure, rate, expected, limits, gap, cusum, crossed }) => {
        const notes = [
          unfinished ? "not finished" : "",
          limits?.signal ? "outside its limits" : "",
          crossed ? "sum crossed its threshold" : "",
        ].filter(Boolean);
        const cells: Record<string, Cell> = {
          week: [dayWords(week, true), ...notes].join(", "),
          injuries: events,
          expected,
          exposure: exposure > 0 ? exposure : null,
          rate: rate ? figure(rate, (events ?? 0) < stableFrom) : { reason: gap ?? "no rate" },
          lower: limits?.lower ?? null,
          upper: limits?.upper ?? null,
          cusum,
        };
        return { key: week, cells };
      }),
    empty: "No week with exposure yet.",
  };
}
