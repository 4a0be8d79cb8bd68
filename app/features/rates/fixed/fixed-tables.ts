import type { AgeBand } from "~/statistics";
import { bandOf, type ExposureCell, type InjuryRow } from "../counting";
import { fixedFilters, fixedGroupings } from "../filters";
import { type Counts, computeRates, type RateRow, type Rates } from "../rates";
import { type CountCell, suppressSmallCells } from "./suppression";

/**
 * What is shown outside the clinical roles: fixed tables without filters, small cells hidden. Two groupings only,
 * since tables of teams, sports or session kinds would let hidden cells be worked out from one another.
 */
export type ExposedAthlete = Pick<ExposureCell, "sex" | "age"> & { athleteId: string };

export type FixedTable = {
  by: (typeof fixedGroupings)[number];
  rows: RateRow[];
  total: RateRow;
  hidden: number;
};

const hide = (row: RateRow): RateRow => ({
  ...row,
  injuries: null,
  exposure: null,
  denominator: null,
  rate: null,
  reason: "hidden: small numbers",
  unstable: false,
});

const distinct = (ids: readonly string[]) => new Set(ids).size;

type People = { exposed: readonly ExposedAthlete[]; counted: readonly InjuryRow[] };

/** A grouping's cells with the people in them, and the table that may be shown. */
function fixTable(
  by: (typeof fixedGroupings)[number],
  { rows, total }: Pick<Rates, "rows" | "total">,
  { exposed, counted }: People,
  { bands, smallest }: { bands: readonly (AgeBand & { label: string })[]; smallest: number },
): FixedTable {
  const keyOf = ({ sex, age }: { sex: string; age: number | null }) =>
    by === "sex" ? sex : (bandOf(age, bands) ?? "unknown");
  const cells = rows.map(
    (row): CountCell => ({
      key: row.key,
      events: row.injuries ?? 0,
      exposedAthletes: distinct(
        exposed.filter((each) => keyOf(each) === row.key).map((each) => each.athleteId),
      ),
      injuredAthletes: distinct(
        counted.filter((each) => keyOf(each) === row.key).map((each) => each.athleteId),
      ),
    }),
  );
  const { hidden, hideTotal } = suppressSmallCells(cells, smallest);
  return {
    by,
    rows: rows.map((row) => (hidden.has(row.key) ? hide(row) : row)),
    total: hideTotal ? hide(total) : total,
    hidden: hidden.size,
  };
}

/** The fixed tables of an organisation's season. */
export function fixTables(
  counts: Counts,
  exposed: readonly ExposedAthlete[],
  smallest: number,
): { tables: FixedTable[]; coverage: Rates["coverage"] } {
  const computed = fixedGroupings.map((by) => ({ by, rates: computeRates(counts, fixedFilters(by)) }));
  const tables = computed.map(({ by, rates }) =>
    fixTable(by, rates, { exposed, counted: rates.counted }, { bands: counts.bands, smallest }),
  );
  // One table that cannot show its total must not find it in the other.
  const hideTotal = tables.some(({ total }) => total.injuries === null);
  const [first] = computed;
  return {
    tables: tables.map((table) => (hideTotal ? { ...table, total: hide(table.total) } : table)),
    coverage: first?.rates.coverage ?? { held: 0, recorded: 0, share: null, state: "none" },
  };
}
