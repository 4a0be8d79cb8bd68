import { type Counted, type Estimate, rateRatio } from "~/statistics";
import { stableFrom } from "../coverage";
import type { RateUnit } from "../filters";
import type { RateRow } from "../rates";
import { unitWords } from "../sentence";
import { type Cell, figure, type TableColumn, type TableData, type TableRow } from "../tables";
import type { Pair, Robust } from "./comparisons";
import type { ComparedStratum, Held } from "./comparisons-strata";
import { groupWords } from "./comparisons-words";

/** The tables of a comparison: its rates, its ratios, its strata, and girls and boys by sport. */

export const exposureHead: Record<RateUnit, string> = { aes: "Exposures", hours: "Hours" };
const perWords = (unit: RateUnit) => `per ${unitWords[unit]}`;

export const text = (id: string, header: string): TableColumn => ({ id, header, kind: "text" });
export const count = (id: string, header: string): TableColumn => ({ id, header, kind: "count" });
export const rateColumn = (id: string, header: string, unit: RateUnit): TableColumn => ({
  ...{ id, header, unit: perWords(unit) },
  kind: "figure",
  form: "rate",
  bar: true,
});
export const ratioColumn = (id: string, header: string): TableColumn => ({
  ...{ id, header, unit: "times" },
  kind: "figure",
  form: "ratio",
});

export const rateCell = ({ rate, reason, unstable }: RateRow): Cell =>
  rate ? figure(rate, unstable) : { reason: reason ?? "no rate" };

export function ratesTable({ first, second, adjusted, strata, held }: Pair, unit: RateUnit): TableData {
  const row = (side: RateRow, series: 1 | 2): TableRow => ({
    key: side.key,
    series,
    cells: {
      group: side.label,
      injuries: side.injuries,
      exposure: side.denominator,
      rate: rateCell(side),
      method: side.rate?.method ?? null,
    },
  });
  const standardised = (side: RateRow, name: "a" | "b", series: 1 | 2): TableRow[] => {
    if (!adjusted) return [];
    const shared = strata.filter(({ state }) => state === "both").map((stratum) => stratum[name]);
    const events = shared.reduce((sum, each) => sum + each.events, 0);
    const rate = adjusted.standardised[name];
    const cells = {
      group: `${side.label}, ${sameWords(held)}`,
      injuries: events,
      exposure: shared.reduce((sum, { exposure }) => sum + exposure, 0),
      rate: figure(rate, events < stableFrom),
      method: `directly standardised, ${rate.method}`,
    };
    return [{ key: `${side.key} standardised`, series, cells }];
  };
  return {
    id: "rates",
    caption: "Both rates",
    columns: [
      text("group", "Group"),
      count("injuries", "Injuries"),
      count("exposure", exposureHead[unit]),
      rateColumn("rate", "Rate", unit),
      text("method", "How the limits are made"),
    ],
    rows: [row(first, 1), row(second, 2), ...standardised(first, "a", 1), ...standardised(second, "b", 2)],
  };
}

const heldNames: Record<Held, string> = { age: "ages", kind: "session kinds" };
/** "at the same ages and session kinds" */
const sameWords = (held: readonly Held[]) =>
  held.length === 0 ? "adjusted" : `at the same ${held.map((name) => heldNames[name]).join(" and ")}`;

type Line = {
  key: string;
  label: string;
  ratio: Estimate | null;
  reason?: string | null;
  difference?: Estimate | null;
};

/** Infinity is not a number to show: the table says why there is none, and its lower limit. */
export function ratioCell(
  ratio: Estimate | null,
  reason: string | null | undefined,
  unstable: boolean,
): Cell {
  if (!ratio) return { reason: reason ?? "no injury on either side" };
  if (ratio.estimate === Infinity)
    return { reason: `no upper limit, at least ${ratio.lower.toPrecision(2)}: the second has no injury` };
  return figure(ratio, unstable);
}

const robustLines = (key: string, label: string, { ratio, short }: Robust): Line[] => [
  { key: `${key}-teams`, label: `${label}, teams as clusters`, ratio, reason: short },
  ...(ratio
    ? [
        {
          key: `${key}-few-teams`,
          label: `${label}, teams as clusters, corrected for few of them`,
          ratio: ratio.smallSample,
          reason: "too few teams for it",
        },
      ]
    : []),
];

/** Every way in which the two rates are held against each other, the crude one first. */
export function ratioLines({
  ratio,
  difference,
  robust,
  adjusted,
  notAdjusted,
  setAside,
  held,
}: Pair): Line[] {
  const words = sameWords(held);
  const same = words.charAt(0).toUpperCase() + words.slice(1);
  const isWhole = Object.values(setAside).every(({ events, exposure }) => events === 0 && exposure === 0);
  return [
    { key: "crude", label: "As they are", ratio, difference },
    ...robustLines("crude", "As they are", robust),
    ...(adjusted && !isWhole
      ? [{ key: "shared", label: "As they are, of what both sides have", ratio: adjusted.sameCrude }]
      : []),
    {
      key: "adjusted",
      label: same,
      ratio: adjusted?.ratio ?? null,
      reason: notAdjusted,
      difference: adjusted?.difference ?? null,
    },
    ...(adjusted ? robustLines("adjusted", same, adjusted.robust) : []),
  ];
}

export function ratiosTable(pair: Pair, unit: RateUnit): TableData {
  const unstable = pair.first.unstable || pair.second.unstable;
  return {
    id: "ratios",
    caption: `${pair.first.label} against ${groupWords(pair.second, pair.dimension)}`,
    columns: [
      text("measure", "How they are compared"),
      ratioColumn("ratio", "Rate ratio"),
      {
        ...{ id: "difference", header: "Rate difference", unit: perWords(unit) },
        ...{ kind: "figure", form: "difference" },
      },
      text("method", "How the ratio's limits are made"),
    ],
    rows: ratioLines(pair).map(({ key, label, ratio, reason, difference }) => ({
      key,
      cells: {
        measure: label,
        ratio: ratioCell(ratio, reason, unstable),
        difference: difference ? figure(difference, unstable) : null,
        method: ratio?.method ?? null,
      },
    })),
  };
}

const stateWords = ({ first, second, dimension }: Pair): Record<ComparedStratum["state"], string> => ({
  both: "no injury on either side",
  "only-a": `exposure of ${groupWords(first, dimension)} only`,
  "only-b": `exposure of ${groupWords(second, dimension)} only`,
  "no-kind": "of no one session kind",
  "no-age": "ages not known",
  "no-exposure": "no exposure on either side",
});

const few = (a: Counted, b: Counted) => a.events < stableFrom || b.events < stableFrom;

export function strataTable(pair: Pair, unit: RateUnit): TableData {
  const { first, second, strata } = pair;
  const words = stateWords(pair);
  return {
    id: "strata",
    caption: "What is held against what: each age band and session kind",
    columns: [
      text("stratum", "Age band and sessions"),
      count("injuries-a", `Injuries: ${first.label}`),
      count("exposure-a", `${exposureHead[unit]}: ${first.label}`),
      count("injuries-b", `Injuries: ${second.label}`),
      count("exposure-b", `${exposureHead[unit]}: ${second.label}`),
      ratioColumn("ratio", "Rate ratio"),
    ],
    rows: strata.map(({ key, label, a, b, state }) => ({
      key,
      cells: {
        stratum: label.charAt(0).toUpperCase() + label.slice(1),
        "injuries-a": a.events,
        "exposure-a": a.exposure,
        "injuries-b": b.events,
        "exposure-b": b.exposure,
        ratio: ratioCell(
          state === "both" && a.events + b.events > 0 ? rateRatio(a, b) : null,
          words[state],
          few(a, b),
        ),
      },
    })),
  };
}
