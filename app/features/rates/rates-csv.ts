import { type CsvValue, writeCsv } from "~/platform/csv";
import type { RatesFilters } from "./filters";
import type { RateRow, Rates } from "./rates";
import { narrowingText } from "./tables";

/** What every row says of itself, so that a figure cut out of the file still carries its definition. */
export type CsvContext = {
  organisation: string;
  season: string;
  from: string;
  to: string;
  team: string;
  coverage: Rates["coverage"];
};

const head = [
  "organisation",
  "season",
  "from",
  "to",
  "team",
  "case_definition",
  "sessions",
  "narrowed_to",
  "grouped_by",
  "group",
  "injuries",
  "athlete_exposures_recorded",
  "athlete_exposures_headcount",
  "hours_recorded",
  "hours_headcount",
  "hours_estimated",
  "unit",
  "exposure_in_rate",
  "rate",
  "lower",
  "upper",
  "level",
  "method",
  "unstable",
  "note",
  "held_sessions_with_recorded_exposure",
  "held_sessions",
] as const;

const definitions: Record<RatesFilters["injuries"], string> = {
  "time-loss": "time loss of 1 day or more",
  "medical-attention": "medical attention",
};

const round = (value: number | undefined, digits: number) =>
  value === undefined ? null : Number(value.toFixed(digits));

function cells(row: RateRow, filters: RatesFilters, context: CsvContext): CsvValue[] {
  const { exposure, rate, denominator } = row;
  const unstable = row.unstable ? "unstable" : rate ? "no" : "";
  return [
    context.organisation,
    context.season,
    context.from,
    context.to,
    context.team,
    definitions[filters.injuries],
    filters.sessions,
    narrowingText(filters),
    filters.by,
    row.label,
    row.injuries,
    round(exposure?.aes.recorded, 4),
    round(exposure?.aes.headcount, 4),
    round(exposure?.hours.recorded, 4),
    round(exposure?.hours.headcount, 4),
    round(exposure?.hours.estimated, 4),
    filters.per === "aes" ? "per 1000 athlete-exposures" : "per 1000 hours",
    denominator === null ? null : round(denominator, 4),
    round(rate?.estimate, 6),
    round(rate?.lower, 6),
    round(rate?.upper, 6),
    rate?.level,
    rate?.method,
    unstable,
    row.reason,
    context.coverage.recorded,
    context.coverage.held,
  ];
}

/** The tables as a file: the page's numbers, unrounded, one row per group. */
export function writeRatesCsv(
  tables: readonly { filters: RatesFilters; rows: readonly RateRow[] }[],
  context: CsvContext,
) {
  const rows = tables.flatMap(({ filters, rows: own }) => own.map((row) => cells(row, filters, context)));
  return writeCsv([[...head], ...rows], { bom: true });
}
