import type { Estimate, RateRatio } from "~/statistics";
import type { CountedKind } from "../counting";
import { noExposure } from "../counting";
import { type Coverage, stableFrom } from "../coverage";
import { rateRow } from "../rates";
import { type Cell, figure, isFigure, type TableColumn, type TableData, type TableRow } from "../tables";
import { byGroup, type Contrast, type Tally } from "./programme";

/** The tables of injuries of the programme, as data for the page and for their files. */

const kindWords: Record<CountedKind, string> = { training: "Training", match: "Matches" };

const text = (id: string, header: string): TableColumn => ({ id, header, kind: "text" });
const count = (id: string, header: string): TableColumn => ({ id, header, kind: "count" });

/** What every table of injuries says of itself in its file; the page says it once, above. */
export const outcomeColumn = "outcome";

/** A table as the page shows it: without what its file alone says in every row. */
export const onPage = (table: TableData): TableData => ({
  ...table,
  columns: table.columns.filter(({ id }) => id !== outcomeColumn),
});

/** How the intervals of a table were made, each way once, with the row it stands in. */
export function methodsOf({ rows }: TableData): string {
  const named = rows.flatMap(({ cells }) =>
    isFigure(cells.ratio) ? [`${String(cells.how)}: ${cells.ratio.method}`] : [],
  );
  return named.length === 0 ? "" : `95 % intervals. ${named.join(". ")}.`;
}

type RateTable<G extends string> = {
  id: string;
  caption: string;
  head: string;
  groups: readonly G[];
  words: Record<G, string>;
  tallies: readonly Tally<G>[];
  coverage: Coverage;
  outcome: string;
};

/** Injuries per 1000 athlete-exposures by group, for each session kind and together. */
export function rateTable<G extends string>(given: RateTable<G>): TableData {
  const { id, caption, head, groups, words, tallies, coverage, outcome } = given;
  const row = (key: string, cells: Record<string, Cell>, events: number, aes: number): TableRow => {
    const exposure = noExposure();
    exposure.aes.recorded = aes;
    const named = { key, label: key, sex: null, band: null, teamId: null };
    const { rate, reason, unstable } = rateRow({ group: named, events, exposure, unit: "aes", coverage });
    return {
      key,
      cells: {
        ...cells,
        injuries: events,
        aes,
        rate: rate ? figure(rate, unstable) : { reason: reason ?? "no rate" },
        [outcomeColumn]: outcome,
      },
    };
  };
  return {
    id,
    caption,
    columns: [
      text("group", head),
      text("sessions", "Sessions"),
      count("injuries", "Injuries"),
      count("aes", "Exposures"),
      {
        id: "rate",
        header: "Rate",
        kind: "figure",
        form: "rate",
        unit: "per 1000 athlete-exposures",
        bar: true,
      },
      text(outcomeColumn, "Injuries counted"),
    ],
    rows: byGroup(tallies, groups).flatMap(({ group, kinds, events, exposure }) => [
      ...kinds.map((each) =>
        row(
          `${group} ${each.kind}`,
          { group: words[group], sessions: kindWords[each.kind] },
          each.events,
          each.exposure,
        ),
      ),
      ...(kinds.length > 1
        ? [row(`${group} all`, { group: words[group], sessions: "Together" }, events, exposure)]
        : []),
    ]),
    empty: "No recorded athlete-exposure since the teams began the programme.",
  };
}

/** A ratio in a cell; one without any injury in the reference has a lower limit alone. */
function ratioCell(ratio: Estimate | RateRatio | null, reason: string, unstable: boolean): Cell {
  if (!ratio) return { reason };
  if (!Number.isFinite(ratio.estimate)) return { reason: "no injury to compare with" };
  return figure(ratio, unstable);
}

type RatioTable = {
  id: string;
  caption: string;
  contrast: Contrast;
  /** The same with every injury placed by its session's record alone, where that differs. */
  byRecord?: Contrast | null;
  withheld: string | null;
  outcome: string;
};

/** The ratio of a comparison by each way of making it, so that a reader sees how much hangs on the way. */
export function ratioTable({ id, caption, contrast, byRecord, withheld, outcome }: RatioTable): TableData {
  const { robust, pooled, byKind, reason } = contrast;
  const row = (key: string, how: string, ratio: Estimate | null, few: number): TableRow => ({
    key,
    cells: {
      how,
      ratio: withheld
        ? { reason: withheld }
        : ratioCell(ratio, reason ?? "cannot be made from so few", few < stableFrom),
      [outcomeColumn]: outcome,
    },
  });
  const least = ({ a, b }: Pick<Contrast, "a" | "b">) => Math.min(a.events, b.events);
  const few = least(contrast);
  return {
    id,
    caption,
    columns: [
      text("how", "How"),
      { id: "ratio", header: "Rate ratio", kind: "figure", form: "ratio", unit: "times", bar: false },
      text(outcomeColumn, "Injuries counted"),
    ],
    rows: [
      row("robust", "Within session kind, teams accounted for", robust, few),
      row("few", "The same, corrected for few teams", robust?.smallSample ?? null, few),
      row("pooled", "Within session kind, as if athletes were independent", pooled, few),
      ...byKind.map((each) => row(each.kind, `${kindWords[each.kind]} alone`, each.ratio, least(each))),
      ...(byRecord
        ? [row("record", "As the first, by the session's record alone", byRecord.robust, least(byRecord))]
        : []),
    ],
  };
}
