import { formatCount } from "../figures";
import { countedInWords } from "../filter-words";
import type { RatesFilters } from "../filters";
import { dayWords } from "../periods";
import type { Part } from "../sentence";
import { amountWords, attention, chanceWords, interval, listWords, plain, strong } from "../wording";
import type { RecentSpan, Surprise, TeamSurprise } from "./recent-weeks";
import type { Week, WeekCharts } from "./recent-weeks-charts";
import { falseAlarmWeeks, weeksToFind } from "./recent-weeks-cusum";

/** What the recent weeks say in words. */

export const spanWords = ({ from, to }: RecentSpan) => `${dayWords(from)} to ${dayWords(to, true)}`;

/** "7 injuries where 2.1 were expected", its chance, and whether a week or the running sum stands out. */
export function recentSentence(
  surprise: Surprise,
  charts: WeekCharts,
  span: RecentSpan,
  filters: RatesFilters,
  scope: string,
): Part[] {
  const { observed, expected, probability, reason } = surprise;
  const start = plain(`In the four weeks from ${spanWords(span)} ${scope} `);
  if (observed === null)
    return [start, plain(reason === "not reported" ? "has not been reported on." : "had no exposure.")];
  const counted = countedInWords(observed, filters);
  if (!expected || probability === null)
    return [
      start,
      plain("had "),
      strong(counted),
      plain(`. How many to expect cannot be said (${reason}). `),
      ...standOut(charts),
    ];
  const limits = `(${amountWords(expected.lower)} to ${amountWords(expected.upper)})`;
  return [
    start,
    plain("had "),
    strong(`${counted} where ${amountWords(expected.estimate)} were expected`),
    plain(" "),
    interval(limits),
    plain(". "),
    ...chanceParts(observed, probability),
    ...standOut(charts),
  ];
}

function chanceParts(observed: number, probability: number): Part[] {
  if (observed === 0) return [plain("That is no more than expected. ")];
  const words = `So many or more would come by luck with a probability of ${chanceWords(probability)}`;
  if (probability > 0.2) return [plain(`${words}: nothing unusual. `)];
  return [plain(`${words.replace("of below", "below")}. `)];
}

/** Weeks outside of their limits, and whether the running sum crossed its threshold. */
function standOut({ weeks, centre }: WeekCharts): Part[] {
  if (centre === null) return [plain("There are too few weeks or injuries for limits week by week.")];
  const hasSum = weeks.some(({ cusum }) => cusum !== null);
  const above = weeks.filter(({ limits, rate }) => limits?.signal && (rate?.estimate ?? 0) > limits.upper);
  const crossed = weeks.filter((week) => week.crossed);
  const days = (list: typeof weeks) => listWords(list.slice(-3).map(({ week }) => dayWords(week)));
  const last = crossed.at(-1);
  return [
    above.length === 0
      ? plain("No single week lies above its limit")
      : attention(
          `${above.length === 1 ? "The week" : `${above.length} weeks, lately those`} from ${days(above)} ${above.length === 1 ? "lies" : "lie"} above the limit`,
        ),
    last
      ? attention(` and the running sum crossed its threshold in the week from ${dayWords(last.week)}.`)
      : plain(hasSum ? " and the running sum has not crossed its threshold." : "."),
  ];
}

/** How often a surprise of this size comes by luck when one looks every week, at one whole and at many teams. */
export function lookingOften({ probability }: Surprise, teams: readonly TeamSurprise[]): string {
  const judged = teams.filter((team) => team.probability !== null);
  const [first] = judged;
  const aYear = (p: number, count: number) => amountWords(Math.min(52 * p * count, 52 * count));
  const texts = [
    probability === null || probability > 0.5
      ? ""
      : `Looking often finds something: with one look a week, a surprise of this size or larger comes by luck at about ${aYear(probability, 1)} of a year's 52 looks.`,
    judged.length > 1 && first && first.probability !== null
      ? `Among ${judged.length} teams the largest surprise is that of ${first.name} (${chanceWords(first.probability)}); with no change anywhere, the chance that one of ${judged.length} teams shows as much today is ${chanceWords(1 - (1 - first.probability) ** judged.length)}, and over a year about ${aYear(first.probability, judged.length)} of ${formatCount(52 * judged.length)} looks would.`
      : "",
  ];
  return texts.filter(Boolean).join(" ");
}

/** Where the expected number comes from, and how many team-weeks were reported on. */
export function recentNote(
  { observed, baseline, expected, probabilityAtUpper, reported }: Surprise,
  teams: number,
): Part[] {
  const team = teams === 1;
  const texts = [
    expected
      ? `Expected: the rates by session kind of all ${formatCount(baseline.weeks)} earlier weeks with exposure, ${formatCount(baseline.injuries)} injuries, times the exposure of these four weeks.${
          observed === 0
            ? ""
            : ` They are themselves uncertain; at the upper limit of what they let expect the probability is ${chanceWords(probabilityAtUpper ?? 1)}.`
        }`
      : "",
    reported.all === 0
      ? ""
      : team
        ? `${formatCount(reported.reported)} of ${formatCount(reported.all)} weeks were reported on.`
        : `In ${formatCount(reported.reported)} of ${formatCount(reported.all)} team-weeks an injury was entered or it was confirmed that there was none.`,
    "An injury counts here once its time loss is entered, so the last days may still grow.",
  ];
  return texts.filter(Boolean).map((text, index) => plain(index === 0 ? text : ` ${text}`));
}

/** What the threshold of the running sum means. */
export function thresholdWords({
  threshold,
  usual,
  weeks,
}: Pick<WeekCharts, "threshold" | "usual"> & { weeks: readonly Pick<Week, "cusum">[] }): string {
  if (!weeks.some(({ cusum }) => cusum !== null))
    return "A running sum needs to know the usual rate, and there is too little baseline for that yet.";
  const weeksNeeded = usual && usual > 0 ? Math.max(1, Math.ceil(weeksToFind(usual, threshold))) : null;
  const find =
    weeksNeeded === null
      ? ""
      : weeksNeeded <= 52
        ? ` A true doubling would be found after about ${weeksNeeded} weeks at the usual exposure.`
        : " With so little exposure a true doubling would take more than a year to show here; the sum finds larger rises only.";
  return `The sum adds what each week had more than a level between the usual rate and twice that rate, for the week's own exposure, and never falls below 0. Its threshold is ${threshold.toFixed(1)} injuries: with no change at all it is crossed by luck at most once in ${falseAlarmWeeks} weeks on average.${find} After a crossing and after a break between seasons it begins again at 0.`;
}
