import { sentenceCase } from "../../vocabulary";
import type { RatesFilters } from "../filters";
import { type Cell, figure, type TableColumn, type TableData, type TableRow } from "../tables";
import { bandsOf, hoursOf, type ReturnCurve, type Severity, type SeverityRow } from "./severity";
import { bandWords } from "./severity-words";

/** The tables of severity and burden. Pure. */

/** Address of the records behind a row. */
export type RecordsHref = (changes: Record<string, string>) => string;

const text = (id: string, header: string): TableColumn => ({ id, header, kind: "text" });
const count = (id: string, header: string): TableColumn => ({ id, header, kind: "count" });
const number = (id: string, header: string, decimals = 0): TableColumn => ({
  id,
  header,
  kind: "number",
  decimals,
});
const rate = (id: string, header: string, unit: string): TableColumn => ({
  ...{ id, header, kind: "figure", form: "rate", unit, bar: true },
});

type Cells = (row: SeverityRow) => Record<string, Cell>;

/** Groups with an injury: of the others nothing can be said on how long injuries last. */
const injured = ({ rows, total }: Severity): Pick<Severity, "rows" | "total"> => ({
  rows: rows.filter(({ injuries }) => injuries !== 0),
  total,
});

/** One line per group and one for the whole. A group that has not reported has nothing but that. */
function lines(
  { rows, total }: Pick<Severity, "rows" | "total">,
  cellsOf: Cells,
  href: RecordsHref,
): TableRow[] {
  const cells = (row: SeverityRow) => ({
    group: row.label,
    ...(row.injuries === null ? { injuries: { reason: row.reason ?? "not reported" } } : cellsOf(row)),
  });
  return [
    ...rows.map((row) => ({
      key: row.key,
      cells: cells(row),
      ...(row.injuries ? { href: href({ group: row.key }) } : {}),
    })),
    ...(rows.length === 0 ? [] : [{ key: "total", cells: cells(total), total: true, href: href({}) }]),
  ];
}

const ofDays = (part: number, all: number) => (all === 0 ? null : (part / all) * 100);
const empty = "No exposure and no injuries yet.";

function frequencyTable(severity: Severity, href: RecordsHref): TableData {
  return {
    id: "frequency",
    caption: "How often and how long, by group",
    columns: [
      text("group", "Group"),
      count("injuries", "Injuries"),
      count("hours", "Hours"),
      rate("incidence", "Rate", "per 1000 hours"),
      number("mean", "Days lost per injury", 1),
    ],
    rows: lines(
      severity,
      (row) => ({
        injuries: row.injuries,
        hours: hoursOf(row),
        incidence: row.rate ? figure(row.rate, row.unstable) : { reason: row.reason ?? "no rate" },
        mean: row.injuries ? row.daysLost / row.injuries : null,
      }),
      href,
    ),
    empty,
  };
}

function burdenTable(severity: Severity, href: RecordsHref): TableData {
  return {
    id: "burden",
    caption: "Days lost, and per 1000 hours (burden), by group",
    columns: [
      text("group", "Group"),
      count("injuries", "Injuries"),
      count("hours", "Hours"),
      count("days", "Days lost"),
      rate("burden", "Burden", "days per 1000 hours"),
    ],
    rows: lines(
      severity,
      (row) => ({
        injuries: row.injuries,
        hours: hoursOf(row),
        days: row.daysLost,
        burden: row.burden ? figure(row.burden, row.unstable) : { reason: row.reason ?? "no burden" },
      }),
      href,
    ),
    empty,
  };
}

function bandTable({ bands, total }: Severity, href: RecordsHref): TableData {
  return {
    id: "bands",
    caption: "Injuries by the days they cost",
    columns: [
      text("band", "Severity"),
      count("injuries", "Injuries"),
      count("ongoing", "Ongoing"),
      {
        ...{ id: "share", header: "Share", kind: "figure", form: "share" },
        ...{ unit: "per cent of injuries", bar: true },
      },
      count("days", "Days lost"),
      number("days-share", "% of days"),
    ],
    rows: bands.map(({ band, injuries, ongoing, share, daysLost }) => ({
      key: band,
      cells: {
        band: sentenceCase(bandWords[band]),
        injuries,
        ongoing,
        share: figure(share),
        days: daysLost,
        "days-share": ofDays(daysLost, total.daysLost),
      },
      ...(injuries > 0 ? { href: href({ severity: band }) } : {}),
    })),
    empty: "No injuries yet.",
  };
}

function bandGroupTable(severity: Severity, filters: RatesFilters, href: RecordsHref): TableData {
  const bands = bandsOf(filters.injuries);
  return {
    id: "bands-by-group",
    caption:
      "The same by group, of groups with an injury; an ongoing injury stands in the band it has reached",
    columns: [
      text("group", "Group"),
      count("injuries", "Injuries"),
      ...bands.map((band) => count(`band ${band}`, sentenceCase(bandWords[band]))),
      count("ongoing", "Ongoing"),
      number("longest", "Longest, % of days"),
    ],
    rows: lines(
      injured(severity),
      (row) => ({
        injuries: row.injuries,
        ...Object.fromEntries(bands.map((band) => [`band ${band}`, row.bands[band]])),
        ongoing: row.ongoing,
        longest: row.daysLost > 0 ? row.largestShare * 100 : null,
      }),
      href,
    ),
    empty,
  };
}

/** The median of a curve and its limits; a limit that was not reached has words instead. */
function medianCells(curve: ReturnCurve | null): Record<string, Cell> {
  if (!curve) return { half: null, "half-from": null, "half-to": null };
  const { estimate, lower, upper } = curve.median;
  return {
    half: estimate ?? { reason: "not reached" },
    "half-from": lower ?? { reason: "not reached" },
    "half-to": upper ?? { reason: "no upper limit" },
  };
}

function returnTable(severity: Severity, href: RecordsHref): TableData {
  return {
    id: "return",
    caption:
      "Days lost until full availability: quartiles of closed injuries, and the median with the ongoing ones (Kaplan-Meier)",
    columns: [
      text("group", "Group"),
      count("injuries", "Injuries"),
      count("closed", "Closed"),
      number("quarter", "25 %", 1),
      number("median", "Median", 1),
      number("three-quarters", "75 %", 1),
      count("ongoing", "Ongoing"),
      number("half", "Half back"),
      number("half-from", "95 % from"),
      number("half-to", "95 % to"),
    ],
    rows: lines(
      injured(severity),
      (row) => ({
        injuries: row.injuries,
        closed: (row.injuries ?? 0) - row.ongoing,
        quarter: row.quartiles?.lower ?? null,
        median: row.quartiles?.median ?? null,
        "three-quarters": row.quartiles?.upper ?? null,
        ongoing: row.ongoing,
        ...medianCells(row.curve),
      }),
      href,
    ),
    empty,
  };
}

function curveRows(label: string, { steps }: ReturnCurve): TableRow[] {
  return steps.map(({ time, atRisk, events, survival, lower, upper }) => ({
    key: `${label} ${time}`,
    cells: {
      group: label,
      days: time,
      out: atRisk,
      back: events,
      share: figure({
        estimate: survival,
        lower,
        upper,
        level: 0.95,
        method: "Kaplan-Meier (Greenwood, log-log)",
      }),
    },
  }));
}

function curveTable({ total, comparison }: Severity): TableData {
  return {
    id: "curve",
    caption: "The curve in figures: who was still out after so many days, and who came back then",
    columns: [
      text("group", "Group"),
      count("days", "Days lost"),
      count("out", "Still out before"),
      count("back", "Back then"),
      { id: "share", header: "Not yet back", kind: "figure", form: "share", unit: "per cent of injuries" },
    ],
    rows: [
      ...(total.curve ? curveRows(total.label, total.curve) : []),
      ...(comparison?.groups ?? []).flatMap(({ group, curve }) => curveRows(group.label, curve)),
    ],
    empty: "Nobody is back from an injury yet.",
  };
}

/** Every table of the view, in the order of the page. */
export function severityTables(severity: Severity, filters: RatesFilters, href: RecordsHref): SeverityTables {
  return {
    frequency: frequencyTable(severity, href),
    burden: burdenTable(severity, href),
    bands: bandTable(severity, href),
    groups: bandGroupTable(severity, filters, href),
    returns: returnTable(severity, href),
    curve: curveTable(severity),
  };
}

export type SeverityTables = Record<
  "frequency" | "burden" | "bands" | "groups" | "returns" | "curve",
  TableData
>;
