import { stableFrom } from "../coverage";
import type { RateUnit } from "../filters";
import { dayWords } from "../periods";
import type { RateRow } from "../rates";
import { unitWords } from "../sentence";
import { type Cell, figure, type TableColumn, type TableData } from "../tables";
import type { KindTrend, MonthRow, NoTrend, Trend } from "./trends";
import type { SeasonRow, SoFarRow } from "./trends-seasons";

/** The tables of the trends: months, the trend itself, seasons, and the season so far. */

const text = (id: string, header: string): TableColumn => ({ id, header, kind: "text" });
const count = (id: string, header: string): TableColumn => ({ id, header, kind: "count" });
const ratio = (id: string, header: string): TableColumn => ({
  ...{ id, header, unit: "times" },
  kind: "figure",
  form: "ratio",
});

const counted = (unit: RateUnit, bar = true): TableColumn[] => [
  count("injuries", "Injuries"),
  count("exposure", unit === "aes" ? "Exposures" : "Hours"),
  { id: "rate", header: "Rate", kind: "figure", form: "rate", unit: `per ${unitWords[unit]}`, bar },
];

const countedCells = ({ injuries, denominator, rate, reason, unstable }: RateRow): Record<string, Cell> => ({
  injuries,
  exposure: denominator,
  rate: rate ? figure(rate, unstable) : { reason: reason ?? "no rate" },
});

export function monthsTable(months: readonly MonthRow[], unit: RateUnit): TableData {
  return {
    id: "months",
    caption: "Rate by month, all seasons",
    columns: [text("month", "Month"), ...counted(unit)],
    rows: months.map(({ month, label, row, unfinished }) => ({
      key: month,
      cells: {
        month: unfinished ? `${label}, not finished` : label,
        ...(row ? countedCells(row) : { injuries: null, exposure: null, rate: { reason: "no exposure" } }),
      },
    })),
  };
}

export function trendTable(trend: Trend | NoTrend, kinds: KindTrend | null): TableData {
  const rows = [
    ...("reason" in trend
      ? []
      : [
          { key: "month", label: "As it is, per month", value: trend.perMonth },
          { key: "year", label: "As it is, per year", value: trend.perYear },
        ]),
    ...(kinds
      ? [
          {
            key: "month-kinds",
            label: "With the share of matches held equal, per month",
            value: kinds.perMonth,
          },
          {
            key: "year-kinds",
            label: "With the share of matches held equal, per year",
            value: kinds.perYear,
          },
        ]
      : []),
  ];
  return {
    id: "trend",
    caption: "The trend over the finished months, as a rate ratio from one to the next",
    columns: [
      text("trend", "Trend"),
      // A month's ratio lies so near to 1 that two figures would not tell it from no change.
      { id: "ratio", header: "Rate ratio", kind: "figure", form: "ratio", unit: "times", decimals: 3 },
      text("method", "How its limits are made"),
    ],
    rows: rows.map(({ key, label, value }) => ({
      key,
      cells: { trend: label, ratio: figure(value), method: value.method },
    })),
    empty: "No trend can be computed yet.",
  };
}

export function seasonsTable(rows: readonly SeasonRow[], unit: RateUnit): TableData {
  return {
    id: "seasons",
    caption: "Rate by season",
    columns: [
      text("season", "Season"),
      ...counted(unit),
      { id: "matches", header: "Matches' share of exposure", kind: "percent" },
    ],
    rows: rows.map(({ season, row, matchShare }) => ({
      key: season.id,
      cells: { season: season.name, ...countedCells(row), matches: matchShare },
    })),
  };
}

export function soFarTable(rows: readonly SoFarRow[], unit: RateUnit): TableData {
  const [own] = rows;
  return {
    id: "so-far",
    caption: own
      ? `The first ${own.days} days of season ${own.season.name}, over those of each earlier season`
      : "The season so far",
    columns: [
      text("season", "Season"),
      // Both ratios need the room of its picture; the seasons below have theirs.
      ...counted(unit, false),
      ratio("ratio", "Rate ratio"),
      ratio("robust", "With teams as clusters"),
    ],
    rows: rows.map((row, index) => {
      const unstable = [own, row].some((each) => (each?.row.injuries ?? 0) < stableFrom);
      const missing: Cell = index === 0 ? null : { reason: "too few" };
      const cell = (value: SoFarRow["ratio"]): Cell => {
        if (!value) return missing;
        return value.estimate === Infinity ? { reason: "no injury then" } : figure(value, unstable);
      };
      return {
        key: row.season.id,
        cells: {
          season: `${row.season.name}, ${dayWords(row.from)} to ${dayWords(row.to)}`,
          ...countedCells(row.row),
          ratio: cell(row.ratio),
          robust: cell(row.robust),
        },
      };
    }),
  };
}
