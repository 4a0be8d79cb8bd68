import { type RateRatio, rateRatio } from "~/statistics";
import { sentenceCase } from "../../vocabulary";
import type { RateUnit } from "../filters";
import { type RateRow, tabulate } from "../rates";
import type { Selection } from "../selection";
import type { Part } from "../sentence";
import type { TableData, TableRow } from "../tables";
import { listWords, plain } from "../wording";
import { type Material, type Robust, robustOf, sideOf } from "./comparisons";
import { clusterRows } from "./comparisons-strata";
import {
  count,
  exposureHead,
  rateCell,
  rateColumn,
  ratioCell,
  ratioColumn,
  text,
} from "./comparisons-tables";

/** Girls and women against boys and men within each sport: counts, tables and words. Pure. */

export type SportPair = {
  key: string;
  label: string;
  female: RateRow;
  male: RateRow;
  ratio: RateRatio | null;
  robust: Robust;
};

/** Girls and women against boys and men within each sport that both play. */
export function compareBySport(material: Material): { pairs: SportPair[]; oneSided: string[] } {
  const { counts, selection, filters } = material;
  const unit = filters.per;
  const pairs: SportPair[] = [];
  const oneSided: string[] = [];
  for (const { key, label } of tabulate("sport", counts, selection, unit)) {
    const own = new Set(counts.teams.filter(({ sport }) => sport === key).map(({ id }) => id));
    const isOwn = ({ teamId }: { teamId: string | null }) => teamId !== null && own.has(teamId);
    const part: Selection = {
      ...selection,
      cells: selection.cells.filter(isOwn),
      counted: selection.counted.filter(isOwn),
      sessions: selection.sessions.filter(isOwn),
    };
    const rows = tabulate("sex", counts, part, unit);
    const [female, male] = ["female", "male"].map((sex) =>
      rows.find((row) => row.key === sex && (row.denominator ?? 0) > 0),
    );
    if (!female || !male) {
      oneSided.push(label);
      continue;
    }
    const [a, b] = [sideOf(female), sideOf(male)];
    const isRated = female.rate !== null && male.rate !== null;
    pairs.push({
      key,
      label,
      female,
      male,
      ratio: isRated && a.events + b.events > 0 ? rateRatio(a, b) : null,
      robust: isRated
        ? robustOf(
            clusterRows(counts, part, unit, { dimension: "sex", a: "female", b: "male", held: [] }),
            "sex",
          )
        : { ratio: null, reason: "the rates are withheld", short: "withheld", dropped: 0 },
    });
  }
  return { pairs, oneSided };
}

/** Rates of each sport's girls and women, and of its boys and men. */
export function sportsTable(
  pairs: readonly SportPair[],
  unit: RateUnit,
  [girls, boys]: readonly [string, string],
): TableData {
  const side = (row: RateRow, { key, label }: SportPair, series: 1 | 2): TableRow => ({
    key: `${key} ${row.key}`,
    series,
    cells: {
      group: `${label}, ${row.label.toLowerCase()}`,
      injuries: row.injuries,
      exposure: row.denominator,
      rate: rateCell(row),
    },
  });
  return {
    id: "sports",
    caption: `Rates of ${girls.toLowerCase()} and of ${boys.toLowerCase()}, by sport`,
    columns: [
      text("group", "Sport and sex"),
      count("injuries", "Injuries"),
      count("exposure", exposureHead[unit]),
      rateColumn("rate", "Rate", unit),
    ],
    rows: pairs.flatMap((pair) => [side(pair.female, pair, 1), side(pair.male, pair, 2)]),
    empty: "No sport here is played by girls or women as well as by boys or men.",
  };
}

export function sportRatiosTable(
  pairs: readonly SportPair[],
  [girls, boys]: readonly [string, string],
): TableData {
  return {
    id: "sport-ratios",
    caption: `${girls} over ${boys.toLowerCase()}, by sport`,
    columns: [
      text("sport", "Sport"),
      text("injuries", "Injuries of both"),
      ratioColumn("ratio", "Rate ratio, mid-P"),
      ratioColumn("robust", "With teams as clusters"),
    ],
    rows: pairs.map(({ key, label, female, male, ratio, robust }) => {
      const unstable = female.unstable || male.unstable;
      const reason = female.rate && male.rate ? null : "withheld";
      return {
        key,
        cells: {
          sport: label,
          injuries: `${female.injuries} and ${male.injuries}`,
          ratio: ratioCell(ratio, reason, unstable),
          robust: ratioCell(robust.ratio, robust.short, unstable),
        },
      };
    }),
    empty: "Nothing to compare.",
  };
}

/** Girls and boys by sport, in words. */
export function sportsSentence(
  pairs: readonly SportPair[],
  oneSided: readonly string[],
  girls: string,
): Part[] {
  const rated = pairs.filter(({ ratio }) => ratio !== null);
  const clear = rated.filter(({ ratio, robust }) => {
    const shown = robust.ratio ?? ratio;
    return shown && (shown.lower > 1 || shown.upper < 1);
  });
  const only =
    oneSided.length > 0
      ? ` ${sentenceCase(listWords(oneSided.map((sport) => sport.toLowerCase())))}: one sex only.`
      : "";
  if (rated.length === 0) return [plain(`No sport has injuries and exposure of both.${only}`)];
  const words = clear.map(({ label, ratio }) =>
    ratio && ratio.estimate > 1 ? `${label.toLowerCase()} (higher)` : `${label.toLowerCase()} (lower)`,
  );
  const count = rated.length === 1 ? "one sport" : `${rated.length} sports`;
  const none =
    rated.length === 1
      ? `In ${rated[0]?.label.toLowerCase()} the interval of the ratio includes no difference.`
      : `In none of ${count} does the interval of the ratio lie wholly above or below no difference.`;
  const answer =
    clear.length === 0
      ? none
      : `The rate of ${girls.toLowerCase()} differs beyond its interval in ${listWords(words)}, of ${count}.`;
  const many =
    rated.length > 1
      ? ` With ${rated.length} looks at once, about ${(rated.length * 0.05).toFixed(1)} would by luck alone.`
      : "";
  return [plain(answer + many + only)];
}
