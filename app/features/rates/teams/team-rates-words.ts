import { decimalsFor, formatRate, formatRatio } from "../figures";
import { countedInWords } from "../filter-words";
import type { RatesFilters } from "../filters";
import { type Part, unitWords } from "../sentence";
import { amountWords, interval, listWords, plain, ratioLimits, strong } from "../wording";
import { fewestTeams, type TeamRate, type TeamRates } from "./team-rates";

/** What the teams against the whole say in words. */

const isOutside = ({ outside: [inner] }: TeamRate) => inner !== null;

function named(teams: readonly TeamRate[], decimals: number): Part[] {
  return teams.flatMap(({ row, outside: [inner, outer] }, index): Part[] => [
    plain(index === 0 ? "" : index === teams.length - 1 ? " and " : ", "),
    strong(row.label),
    plain(
      ` (${formatRate(row.rate?.estimate ?? 0, decimals)}, ${inner}${outer ? " even the 99.8 % limits" : ""}${row.unstable ? "; unstable" : ""})`,
    ),
  ]);
}

/** Which teams lie outside, and how many would by luck. */
export function teamsSentence(rates: TeamRates, filters: RatesFilters, wholeName: string): Part[] {
  const { whole, teams, rated } = rates;
  const silent = teams.filter(({ row }) => row.injuries === null).length;
  if (rates.wholeHidden)
    return [
      plain(
        "Your teams stand here alone. The whole is not shown: narrowed like this, or with one other team in it, it would tell the numbers of a team that is not yours.",
      ),
    ];
  if (!whole) return [plain("There is no rate of the whole to hold teams against.")];
  const decimals = decimalsFor([whole.estimate, ...teams.flatMap(({ row }) => row.rate?.estimate ?? [])]);
  const [estimate, lower, upper] = [whole.estimate, whole.lower, whole.upper].map((value) =>
    formatRate(value, decimals),
  );
  const all = [
    plain(`${wholeName} had ${countedInWords(rates.injuries, filters)}, `),
    strong(`${estimate} per ${unitWords[filters.per]}`),
    plain(" "),
    interval(`(${lower} to ${upper})`),
    plain(". "),
  ];
  if (rates.injuries === 0) return [...all, plain("Without an injury no team stands out.")];
  if (rated < fewestTeams)
    return [
      ...all,
      plain(
        `With ${rated === 1 ? "one team" : `${rated} teams`} that has a rate, the whole is hardly more than the team itself: limits, shrunken rates and expected injuries need at least ${fewestTeams}.`.replace(
          "teams that has",
          "teams that have",
        ),
      ),
    ];
  const shown = teams.filter(({ row }) => row.rate !== null);
  if (shown.length === 0)
    return [...all, plain(silent > 0 ? "The teams shown have not reported." : "No team shown has a rate.")];
  const outside = shown.filter(isOutside);
  const luck = shown.reduce((sum, team) => sum + team.luck, 0);
  const of = shown.length === 1 ? `${shown[0]?.row.label} lies` : `Of ${shown.length} teams `;
  if (outside.length === 0)
    return [
      ...all,
      strong(
        shown.length === 1
          ? `${of} within the 95 % limits`
          : `None of ${shown.length} teams lies outside the 95 % limits`,
      ),
      plain(" for its exposure."),
    ];
  const count = outside.length === 1 ? "one lies" : `${outside.length} lie`;
  return [
    ...all,
    ...(shown.length === 1
      ? []
      : [
          plain(of),
          strong(`${count} outside the 95 % limits`),
          plain(" for their exposure: ".replace("their", outside.length === 1 ? "its" : "their")),
        ]),
    ...named(outside, decimals),
    ...(shown.length === 1 ? [plain(" lies outside the 95 % limits for its exposure")] : []),
    plain(". "),
    plain(
      shown.length === 1
        ? "One team in 20 does by luck alone."
        : `By luck alone about ${amountWords(luck)} of ${shown.length} would, if all had the same true rate.`,
    ),
  ];
}

/** The smaller lines: the spread of the teams, those outside at the same ages and sessions, silent teams. */
export function teamsNote(rates: TeamRates): Part[] {
  const { teams, spread } = rates;
  const outside = teams.filter(isOutside);
  const silent = teams.filter(({ row }) => row.injuries === null).map(({ row }) => row.label);
  const standardised = outside.flatMap(({ row, ratio }) =>
    ratio ? [`${row.label} ${formatRatio(ratio.estimate)} ${ratioLimits(ratio)}`] : [],
  );
  if (rates.injuries === 0) return silent.length > 0 ? [plain(`Not reported: ${listWords(silent)}.`)] : [];
  const texts = [
    spread === "more than luck"
      ? "Between the teams the rates differ by more than luck alone would make them; the shrunken rate moves each towards the whole by as much as its exposure leaves open."
      : "",
    spread === "no more than luck"
      ? "Between the teams the rates differ no more than luck would make them, so the best guess for each team is the whole's rate: that is its shrunken rate."
      : "",
    standardised.length > 0
      ? `Against what its ages and share of matches let expect: ${listWords(standardised)}.`
      : "",
    silent.length > 0 ? `Not reported: ${listWords(silent)}.` : "",
  ];
  return texts.filter(Boolean).map((text, index) => plain(index === 0 ? text : ` ${text}`));
}
