import { addDays } from "~/platform/clock";
import type { Tx } from "~db/client.server";
import { decimalsFor, formatRate } from "../figures";
import { listGroups } from "../groups";
import { dayWords } from "../periods";
import { findCountingRules, listRatedTeams } from "../rates.queries.server";
import type { RatesView } from "../view.server";
import { searchWith } from "../views";
import { assemblePrevalence, type PeopleGrouping, peopleGroupingOf } from "./prevalence";
import { sumPrevalence } from "./prevalence.queries.server";
import { prevalenceTables } from "./prevalence-tables";
import { groupingNote, prevalenceNote, prevalenceSentence } from "./prevalence-words";

/** What of an address narrows this view to one of its groups; null for a month, which it cannot be narrowed to. */
function narrowingTo(by: PeopleGrouping, key: string): Record<string, string> | null {
  const [sex = "", ...band] = key.split(" ");
  if (by === "sex-age") return { sex, age: band.join(" ") };
  return by === "month" ? null : { [by]: key };
}

/** The counts behind a view of prevalence: one statement for all athlete-days. */
export async function countPrevalence(tx: Tx, { filters, period, teamIds, viewing }: RatesView) {
  const { from, to } = period;
  const by = peopleGroupingOf(filters.by);
  const { bands } = await findCountingRules(tx);
  const teams = await listRatedTeams(tx, teamIds);
  // A season that has not begun has no day yet.
  const rows = from > to ? [] : await sumPrevalence(tx, { from, to, teamIds, by, bands, people: filters });
  const groups = listGroups(by, { bands, teams, seasons: viewing.seasons, from, to });
  const sundayOf = (week: string) => addDays(week, 6);
  return { by, parts: assemblePrevalence(rows, { groups, today: tx.scope.today, sundayOf }) };
}

/** Prevalence of a view: words, the line of its weeks, and tables. */
export async function prevalenceViewOf(tx: Tx, view: RatesView, url: URL) {
  const { filters, scopeName, period } = view;
  const { by, parts } = await countPrevalence(tx, view);
  const { whole, weeks } = parts;
  const hrefOf = (key: string) => {
    const narrowing = narrowingTo(by, key);
    return narrowing
      ? `/${tx.scope.slug}/rates/prevalence${searchWith(url.search, { by: undefined, ...narrowing })}`
      : undefined;
  };
  return {
    sentence: prevalenceSentence(parts, filters, scopeName),
    note: prevalenceNote(parts, filters),
    groupingNote: groupingNote(filters),
    season: period.season,
    weeks: weeks.map(({ week, finished, shares: { limited }, unstable }) => {
      const { estimate, lower, upper } = limited;
      return { label: dayWords(week), finished, point: { estimate, lower, upper, unstable } };
    }),
    mean: whole
      ? {
          value: whole.shares.limited.estimate,
          label: `season ${formatRate(whole.shares.limited.estimate, decimalsFor([whole.shares.limited.estimate]))} %`,
        }
      : null,
    tables: prevalenceTables(parts, hrefOf),
  };
}

export type PrevalenceView = Awaited<ReturnType<typeof prevalenceViewOf>>;
