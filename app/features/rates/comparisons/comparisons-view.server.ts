import type { Tx } from "~db/client.server";
import { sexNames } from "../groups";
import { tabulate } from "../rates";
import { select } from "../selection";
import type { TableData } from "../tables";
import { countView, type RatesView } from "../view.server";
import { plain } from "../wording";
import { choosePair, comparePair } from "./comparisons";
import { parseComparison } from "./comparisons.schema";
import { compareBySport, sportRatiosTable, sportsSentence, sportsTable } from "./comparisons-sports";
import { ratesTable, ratioLines, ratiosTable, strataTable } from "./comparisons-tables";
import { pairNote, pairSentence } from "./comparisons-words";

const capital = (words: string) => words.charAt(0).toUpperCase() + words.slice(1);
const shown = <T extends { estimate: number; lower: number; upper: number }>(ratio: T | null) =>
  ratio && { estimate: ratio.estimate, lower: ratio.lower, upper: ratio.upper };

/** Two groups of an address compared, and girls and boys by sport. */
export async function comparisonsViewOf(tx: Tx, view: RatesView, url: URL) {
  const asked = parseComparison(url);
  const { filters } = view;
  const unit = filters.per;
  const dimension = asked.compare;
  const all = dimension === "season" || asked.over === "all";
  const counts = await countView(tx, view, { all });
  const selection = select(counts, filters);
  const material = { counts, selection, filters };
  const choice = choosePair(tabulate(dimension, counts, selection, unit), asked);
  const { first, second } = choice;
  const isRated = first?.rate && second?.rate;
  const pair = isRated ? comparePair(material, dimension, first, second) : null;
  const names = sexNames(counts.teams);
  const [girls, boys] = [capital(names.female), capital(names.male)];
  const bySport = filters.sex === "any" ? compareBySport(material) : null;
  const tables: TableData[] = [
    ...(pair ? [ratesTable(pair, unit), ratiosTable(pair, unit), strataTable(pair, unit)] : []),
    ...(bySport
      ? [sportsTable(bySport.pairs, unit, [girls, boys]), sportRatiosTable(bySport.pairs, [girls, boys])]
      : []),
  ];
  return {
    dimension,
    over: all ? ("all" as const) : ("season" as const),
    choice: { options: choice.options, a: first?.key ?? null, b: second?.key ?? null },
    problem:
      choice.problem ?? (pair ? null : (first?.reason ?? second?.reason ?? "There is no rate to compare.")),
    coverage: selection.coverage,
    sentence: pair ? pairSentence(pair, filters) : [],
    note: pair
      ? [
          ...(all && dimension !== "season" ? [plain("All seasons together. ")] : []),
          ...pairNote(pair, filters),
        ]
      : [],
    /** The ratios as the picture draws them. */
    lines: pair
      ? ratioLines(pair).flatMap(({ label, ratio }) => (ratio ? [{ label, ratio: shown(ratio) }] : []))
      : [],
    unstable: pair ? pair.first.unstable || pair.second.unstable : false,
    sports: bySport && {
      heading: `${girls} against ${boys.toLowerCase()}, by sport`,
      sentence: sportsSentence(bySport.pairs, bySport.oneSided, girls),
      lines: bySport.pairs.map(({ label, female, male, ratio, robust }) => ({
        label,
        counts: `${female.injuries} and ${male.injuries} injuries${ratio ? "," : ""}`,
        ratio: shown(robust.ratio ?? ratio),
        unstable: female.unstable || male.unstable,
      })),
    },
    tables,
  };
}

export type ComparisonsView = Awaited<ReturnType<typeof comparisonsViewOf>>;
