import type { Estimate } from "~/statistics";
import { stableFrom } from "../coverage";
import { decimalsFor, formatCount, formatRate } from "../figures";
import { partWords, peopleInWords } from "../filter-words";
import type { RatesFilters } from "../filters";
import { dayWords } from "../periods";
import type { Part } from "../sentence";
import { amountWords, attention, interval, plain, strong } from "../wording";
import {
  hasInjuryNarrowing,
  type Prevalence,
  type PrevalencePart,
  type PrevalenceParts,
  type PrevalenceWeek,
  peopleGroupingOf,
} from "./prevalence";

/** The words of prevalence. Pure. */

function percentParts({ estimate, lower, upper }: Estimate): Part[] {
  const decimals = decimalsFor([estimate]);
  const [share, from, to] = [estimate, lower, upper].map((value) => formatRate(value, decimals));
  return [strong(`${share} %`), plain(" "), interval(`(${from} to ${to})`)];
}

/** Athletes in one state or with one cause on an average day. */
export const athletesIn = ({ shares, roster }: Prevalence, part: PrevalencePart) =>
  (shares[part].estimate / 100) * roster;

/** The latest week, which says where things stand now. */
function weekParts(week: PrevalenceWeek | undefined, whole: Prevalence): Part[] {
  if (!week) return [];
  const where = week.finished
    ? `In the last week, from ${dayWords(week.week)},`
    : `This week, from ${dayWords(week.week)} and not finished,`;
  if (week.shares.limited.estimate === 0) return [plain(` ${where} everybody was fully available.`)];
  const { lower, upper } = whole.shares.limited;
  const isApart = week.shares.limited.lower > upper || week.shares.limited.upper < lower;
  return [
    plain(` ${where} it ${week.finished ? "was" : "is"} `),
    ...percentParts(week.shares.limited),
    plain(isApart ? "." : "; the two intervals overlap."),
  ];
}

/**
 * The sentence: how many of the athletes were not fully available on an average day, and in the latest week.
 * @param scope who is looked at, as the sentence begins: "The club", "Girls U15 Soccer"
 */
export function prevalenceSentence(
  { whole, weeks }: PrevalenceParts,
  filters: RatesFilters,
  scope: string,
): Part[] {
  if (!whole)
    return [plain(`${scope} has nobody on a roster in this season yet, so there is no prevalence.`)];
  const people = peopleInWords(filters);
  const of = people ? `${scope} (${people})` : scope;
  const roster = `${formatCount(whole.roster)} ${Math.round(whole.roster) === 1 ? "athlete" : "athletes"}`;
  const split =
    whole.shares.limited.estimate === 0
      ? [plain(".")]
      : [
          plain(
            `: about ${amountWords(athletesIn(whole, "unavailable"))} unavailable and ${amountWords(athletesIn(whole, "modified"))} modified.`,
          ),
        ];
  return [
    plain(`${of}: on an average day of the season `),
    strong(`${amountWords(whole.limited)} of ${roster}`),
    plain(" were not fully available, "),
    ...percentParts(whole.shares.limited),
    ...split,
    ...weekParts(weeks.at(-1), whole),
    ...(whole.unstable ? [plain(" "), attention("This is thin evidence.")] : []),
  ];
}

/** The smaller line: what is counted, and which of the filters above say nothing here. */
export function prevalenceNote({ whole, weeks }: PrevalenceParts, filters: RatesFilters): Part[] {
  const thin = weeks.filter(({ unstable }) => unstable).length;
  return [
    plain(
      "Every cause counts: injury, illness or other. A case definition or a choice of sessions therefore changes nothing here. ",
    ),
    ...(hasInjuryNarrowing(filters)
      ? [
          attention("Nor does the narrowing to a kind of injury"),
          plain("; sex, age and sport do narrow it. "),
        ]
      : []),
    plain("Whoever has no entry on a day counts as fully available. "),
    ...(whole
      ? [
          plain(
            `${whole.affected === 1 ? "1 athlete was" : `${formatCount(whole.affected)} different athletes were`} not fully available on a day or more. `,
          ),
        ]
      : []),
    ...(thin > 0
      ? [
          plain(
            `${thin === 1 ? "One week is" : `${thin} weeks are`} unstable: fewer than ${stableFrom} different athletes.`,
          ),
        ]
      : []),
  ];
}

/** Why the table is not of the grouping that the address asks for; null where it is. */
export function groupingNote({ by }: RatesFilters): string | null {
  if (peopleGroupingOf(by) === by) return null;
  if (by === "season")
    return "Prevalence is of one season at a time: choose another in the bar above. This table is by sex and age band.";
  return `An athlete's day has no ${partWords.by[by]}: that belongs to sessions or to injuries. This table is by sex and age band.`;
}
