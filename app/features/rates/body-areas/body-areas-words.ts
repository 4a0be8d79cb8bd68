import type { BodyArea } from "~db/schema/codes";
import { bodyAreaWords, sentenceCase } from "../../vocabulary";
import { stableFrom } from "../coverage";
import { decimalsFor, formatCount, formatRate, formatRatio } from "../figures";
import { injuriesInWords, peopleInWords } from "../filter-words";
import type { RatesFilters } from "../filters";
import { dayWords } from "../periods";
import { type Part, readRatio, sessionsNote, unitWords } from "../sentence";
import { unreportedWords } from "../severity/severity-words";
import { attention, interval, listWords, plain, ratioLimits, strong } from "../wording";
import type { AreaWithSides, BodyAreas } from "./body-areas";

/** The words of body areas. Pure. */

/** "knee injuries", "injuries of several areas". */
export function areaInjuries(area: BodyArea): string {
  if (area === "unspecified") return "injuries without a named area";
  if (area === "multiple") return "injuries of several areas";
  return `${bodyAreaWords[area]} injuries`;
}

const several = (count: number, one: string, many: string) =>
  `${formatCount(count)} ${count === 1 ? one : many}`;
const percentOf = (share: number) => `${Math.round(share * 100)} %`;

/** The areas with the most injuries: over one exposure, those with the highest rate. */
const mostFrequent = (areas: readonly AreaWithSides[]) => {
  const most = Math.max(...areas.map(({ injuries }) => injuries));
  return areas.filter(({ injuries }) => injuries === most);
};

function rateParts({ rate }: AreaWithSides, unit: RatesFilters["per"]): Part[] {
  if (!rate) return [];
  const decimals = decimalsFor([rate.estimate]);
  const [estimate, lower, upper] = [rate.estimate, rate.lower, rate.upper].map((value) =>
    formatRate(value, decimals),
  );
  return [
    plain(", "),
    strong(`${estimate} per ${unitWords[unit]}`),
    plain(" "),
    interval(`(${lower} to ${upper})`),
  ];
}

function daysParts({ area, daysLost, daysShare, injuries }: AreaWithSides, all: number, who: string): Part[] {
  const what = areaInjuries(area);
  return [
    plain(`${who ? `${sentenceCase(who)}: ${what}` : sentenceCase(what)} cost `),
    strong(`${formatCount(daysLost)} of ${several(all, "day", "days")} lost, ${percentOf(daysShare ?? 0)}`),
    plain(`, in ${several(injuries, "injury", "injuries")}`),
  ];
}

function rateSentence(first: readonly AreaWithSides[], unit: RatesFilters["per"], isSame: boolean): Part[] {
  const [area] = first;
  if (!area) return [];
  const count = several(area.injuries, "injury", "injuries");
  if (first.length > 1)
    return [
      plain(
        `. ${sentenceCase(listWords(first.map((each) => bodyAreaWords[each.area])))} have the highest rate, ${count} each`,
      ),
      ...rateParts(area, unit),
    ];
  if (isSame) return [plain("; they have the highest rate as well"), ...rateParts(area, unit)];
  return [
    plain(`. ${sentenceCase(areaInjuries(area.area))} have the highest rate: ${count}`),
    ...rateParts(area, unit),
  ];
}

/**
 * The sentence: where most days are lost, and where most injuries are.
 * @param scope who is looked at, as the sentence begins: "The club", "Girls U15 Soccer"
 */
export function bodyAreasSentence(
  { areas, total, allDays, coverage, unreported }: BodyAreas,
  filters: RatesFilters,
  scope: string,
): Part[] {
  const [longest] = areas;
  if (coverage.state === "none" && !longest)
    return [plain(`${scope} has no session in this season that was held, so there is no rate yet.`)];
  const who = peopleInWords(filters);
  const subject = who ? `${scope}, ${who},` : scope;
  if (!longest && unreported) return [plain(`${subject} has not reported: ${unreportedWords}.`)];
  if (!longest) return [plain(`${subject} had no ${injuriesInWords(filters)} in this season so far.`)];
  const first = mostFrequent(areas);
  const isSame = first.length === 1 && first[0] === longest;
  const rest =
    areas.length === 1
      ? rateParts(longest, filters.per)
      : rateSentence(first, filters.per, isSame && total.daysLost > 0);
  const thin = first[0]?.unstable ? [plain(" "), attention("This is thin evidence.")] : [];
  const withheld =
    coverage.state === "withheld"
      ? [plain(" Rates are withheld: too little of the exposure is recorded.")]
      : [];
  const end = [plain("."), ...withheld, ...thin];
  if (total.daysLost === 0)
    return [
      plain(`${subject} lost no day to ${several(total.injuries, "injury", "injuries")}`),
      ...rest,
      ...end,
    ];
  return [...daysParts(longest, allDays, who), ...rest, ...end];
}

/** The smaller line: the cut-off day, a single long injury, and how far the first place is chance. */
export function bodyAreasNote({ areas, total }: BodyAreas, filters: RatesFilters, asOf: string): Part[] {
  const dominated = areas.filter((row) => row.largestShare > 0.5 && !row.unstable);
  const unstable = areas.filter((row) => row.unstable).length;
  return [
    plain(
      areas.length === 0
        ? `${scopeOf(filters)}. `
        : `${scopeOf(filters)}. Days are counted to ${dayWords(asOf, true)}; those of an ongoing injury are the least it can end with. `,
    ),
    ...(dominated.length > 0
      ? [
          attention(
            dominated.length === 1
              ? `One of the ${listWords(dominated.map(({ area }) => areaInjuries(area)))} makes up more than half of their days`
              : `One injury makes up more than half of the days in each of ${listWords(dominated.map(({ area }) => bodyAreaWords[area]))}`,
          ),
          plain(". "),
        ]
      : []),
    ...(unstable > 0
      ? [plain(`${several(unstable, "area is", "areas are")} unstable: fewer than ${stableFrom} injuries. `)]
      : []),
    ...(areas.length > 4 && total.injuries > 0
      ? [
          plain(
            `Which of ${areas.length} areas comes first is partly chance: hold its interval against the others'.`,
          ),
        ]
      : []),
  ];
}

const scopeOf = (filters: RatesFilters) =>
  `${sentenceCase(injuriesInWords(filters))}, ${sessionsNote[filters.sessions]}`;

/** Left against right of one area, in words. */
export function sidesWords({ area, left, right, ratio }: AreaWithSides): Part[] {
  const [onLeft, onRight] = [left?.injuries ?? 0, right?.injuries ?? 0];
  const counts = [
    plain(`${sentenceCase(areaInjuries(area))}: `),
    strong(`${formatCount(onLeft)} left, ${formatCount(onRight)} right`),
  ];
  if (!ratio) return [...counts, plain(`, too few to compare (fewer than ${stableFrom} together).`)];
  const same = ". Both sides were exposed in the same sessions, so ";
  if (ratio.estimate === Infinity)
    return [
      ...counts,
      plain(`${same}the left's rate is the higher; how much has no upper limit, and it could be as low as `),
      strong(`${formatRatio(ratio.lower)} times`),
      plain(" the right's."),
    ];
  return [
    ...counts,
    plain(`${same}the left's rate is `),
    strong(`${formatRatio(ratio.estimate)} times`),
    plain(" the right's "),
    interval(ratioLimits(ratio)),
    plain(`; ${readRatio(ratio)}. Which leg or arm is the dominant one is not assumed.`),
  ];
}
