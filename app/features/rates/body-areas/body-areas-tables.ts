import { bodyAreaWords, sentenceCase, sideWords } from "../../vocabulary";
import { formatCount } from "../figures";
import type { RatesFilters } from "../filters";
import type { RateRow } from "../rates";
import { unitWords } from "../sentence";
import { type Cell, figure, type TableColumn, type TableData } from "../tables";
import type { AreaRow, AreaWithSides, BodyAreas } from "./body-areas";

/** The tables of body areas, and the rows of their picture. Pure. */

/** Address of the records behind a row. */
type RecordsHref = (by: "area" | "area-side", group: string | null) => string;

const text = (id: string, header: string): TableColumn => ({ id, header, kind: "text" });
const count = (id: string, header: string): TableColumn => ({ id, header, kind: "count" });
const number = (id: string, header: string): TableColumn => ({ id, header, kind: "number", decimals: 0 });
const rate = (unit: RatesFilters["per"]): TableColumn => ({
  ...{ id: "rate", header: "Rate", kind: "figure", form: "rate", unit: `per ${unitWords[unit]}`, bar: true },
});

const columnsOf = (first: string, unit: RatesFilters["per"]): TableColumn[] => [
  text("area", first),
  count("injuries", "Injuries"),
  count("days", "Days lost"),
  number("days-share", "% of all days"),
  number("longest", "Longest, % of its days"),
  rate(unit),
];

type Row = RateRow & Pick<AreaRow, "injuries" | "daysLost" | "daysShare" | "largestShare">;

const cellsOf = (row: Row): Record<string, Cell> => ({
  area: row.label,
  injuries: row.injuries,
  days: row.daysLost,
  "days-share": row.daysShare === null ? null : row.daysShare * 100,
  longest: row.daysLost === 0 ? null : row.largestShare * 100,
  rate: row.rate ? figure(row.rate, row.unstable) : { reason: row.reason ?? "no rate" },
});

/** The rate of all areas would stretch the axis on which they are told apart; it is the Incidence page's. */
const totalCells = (total: Row): Record<string, Cell> => ({
  ...cellsOf(total),
  rate: { reason: total.reason ?? "see Incidence" },
});

const sidesOf = ({ left, right, middle }: AreaWithSides) =>
  [left, right, ...middle].flatMap((row) => (row && row.injuries > 0 ? [row] : []));

const empty = "No injuries yet.";

function areaTable({ areas, total }: BodyAreas, unit: RatesFilters["per"], href: RecordsHref): TableData {
  return {
    id: "areas",
    caption: "Injuries and days lost by body area, the most days first",
    columns: columnsOf("Body area", unit),
    rows: [
      ...areas.map((row) => ({ key: row.key, cells: cellsOf(row), href: href("area", row.key) })),
      ...(areas.length > 1
        ? [{ key: "total", cells: totalCells(total), total: true, href: href("area", null) }]
        : []),
    ],
    empty,
  };
}

function sideTable({ areas }: BodyAreas, unit: RatesFilters["per"], href: RecordsHref): TableData {
  return {
    id: "areas-by-side",
    caption: "The same by side",
    columns: columnsOf("Body area and side", unit),
    rows: areas
      .flatMap(sidesOf)
      .map((row) => ({ key: row.key, cells: cellsOf(row), href: href("area-side", row.key) })),
    empty,
  };
}

function ratioCell({ ratio, left, right, reason }: AreaWithSides): Cell {
  if (!ratio) return { reason: reason ?? (left && right ? "too few to compare" : "no side") };
  return ratio.estimate === Infinity ? { reason: "none on the right" } : figure(ratio);
}

function comparedTable({ areas }: BodyAreas): TableData {
  return {
    id: "left-right",
    caption: "Left against right over the same exposure",
    columns: [
      text("area", "Body area"),
      count("left", "Left"),
      count("right", "Right"),
      { ...{ id: "ratio", header: "Left over right", kind: "figure", form: "ratio", unit: "rate ratio" } },
    ],
    rows: areas.flatMap((row) =>
      row.left && row.right
        ? {
            key: row.key,
            cells: {
              area: row.label,
              left: row.left.injuries,
              right: row.right.injuries,
              ratio: ratioCell(row),
            },
          }
        : [],
    ),
    empty: "No injury of the left or the right yet.",
  };
}

export type BodyAreasTables = Record<"areas" | "sides" | "compared", TableData>;

/** Every table of the view, in the order of the page. */
export const bodyAreasTables = (
  view: BodyAreas,
  unit: RatesFilters["per"],
  href: RecordsHref,
): BodyAreasTables => ({
  areas: areaTable(view, unit, href),
  sides: sideTable(view, unit, href),
  compared: comparedTable(view),
});

const sideRate = (row: AreaWithSides["left"]) =>
  row?.rate
    ? {
        value: row.rate.estimate,
        lower: row.rate.lower,
        upper: row.rate.upper,
        unstable: row.unstable,
        events: row.injuries,
      }
    : null;

/** The rows of the picture: each area with its days, its sides, and what has none in the middle. */
export const pictureRows = ({ areas }: BodyAreas) =>
  areas.map(({ area, daysLost, left, right, middle }) => ({
    label: `${sentenceCase(bodyAreaWords[area])}, ${formatCount(daysLost)} ${daysLost === 1 ? "day" : "days"}`,
    left: sideRate(left),
    right: sideRate(right),
    ...(middle.length > 0
      ? { middle: { text: middle.map(({ injuries, side }) => `${injuries} ${sideWords[side]}`).join(", ") } }
      : {}),
  }));
