import { notFound } from "~/platform/errors";
import type { Tx } from "~db/client.server";
import { bodyAreasViewOf } from "./body-areas/body-areas-view.server";
import { comparisonsViewOf } from "./comparisons/comparisons-view.server";
import { kindsOf } from "./counting";
import { coverageOf } from "./coverage";
import { coverageViewOf } from "./coverage/coverage-view.server";
import { noNarrowing, type RatesFilters } from "./filters";
import { seasonOf } from "./periods";
import { prevalenceViewOf } from "./prevalence/prevalence-view.server";
import { outcomeColumn } from "./programme/programme-tables";
import { programmeViewOf } from "./programme/programme-view.server";
import { listRatedTeams, tallySessions } from "./rates.queries.server";
import { recentWeeksViewOf } from "./recent-weeks/recent-weeks-view.server";
import { severityViewOf } from "./severity/severity-view.server";
import { type TableData, writeTableCsv } from "./tables";
import { teamRatesViewOf } from "./teams/team-rates-view.server";
import { trendsViewOf } from "./trends/trends-view.server";
import type { Period, RatesView } from "./view.server";

type Tables = {
  tables: readonly TableData[];
  /** They are of all seasons whichever the address names. */
  all?: boolean;
  /** What a table is narrowed to, where that is not what the address says. */
  filtersOf?: (table: TableData) => RatesFilters;
};
type TablesOf = (tx: Tx, view: RatesView, url: URL) => Promise<Tables>;

/** The tables of each view, for their files: the same functions as the pages', so that both say the same. */
const views: Record<string, TablesOf> = {
  severity: async (tx, view, url) => ({
    tables: Object.values((await severityViewOf(tx, view, url)).tables),
    all: view.filters.by === "season",
  }),
  prevalence: async (tx, view, url) => ({
    tables: Object.values((await prevalenceViewOf(tx, view, url)).tables),
  }),
  "body-areas": async (tx, view, url) => ({
    tables: Object.values((await bodyAreasViewOf(tx, view, url)).tables),
  }),
  coverage: coverageViewOf,
  comparisons: async (tx, view, url) => {
    const { tables, over } = await comparisonsViewOf(tx, view, url);
    return { tables, all: over === "all" };
  },
  trends: async (tx, view) => ({ tables: (await trendsViewOf(tx, view)).tables, all: true }),
  teams: teamRatesViewOf,
  programme: async (tx, view, url) => {
    const { tables, result } = await programmeViewOf(tx, view, url);
    const ofPlan = result?.filters ?? view.filters;
    // Warm-ups are of people and sessions, not of injuries.
    const ofWarmUps = {
      ...ofPlan,
      area: noNarrowing.area,
      contact: noNarrowing.contact,
      onset: noNarrowing.onset,
    };
    const isOfInjuries = ({ columns }: TableData) => columns.some(({ id }) => id === outcomeColumn);
    return { tables, filtersOf: (table) => (isOfInjuries(table) ? ofPlan : ofWarmUps) };
  },
  "recent-weeks": async (tx, view) => ({ tables: (await recentWeeksViewOf(tx, view)).tables, all: true }),
};

export const viewNames = Object.keys(views);

/** The tables of a view by its name in the address; null for one that there is not. */
export async function tablesOf(tx: Tx, view: RatesView, url: URL, name: string): Promise<Tables | null> {
  return (Object.hasOwn(views, name) && (await views[name]?.(tx, view, url))) || null;
}

/** The days of all seasons that have begun, for what is counted over them. */
export function allSeasons({ viewing, period }: RatesView, today: string): Period {
  const first = viewing.seasons.map(({ startsOn }) => startsOn).sort()[0];
  const last = viewing.seasons
    .filter(({ startsOn }) => startsOn <= today)
    .map(({ endsOn }) => endsOn)
    .sort()
    .at(-1);
  return {
    season: "all seasons",
    from: first && first < period.from ? first : period.from,
    to: last && last < today ? last : today,
  };
}

/** Coverage of the sessions that a view's filters ask for, as its page shows it. */
async function coverageOfView(tx: Tx, { filters, teamIds, viewing }: RatesView, { from, to }: Period) {
  const kinds: readonly string[] = kindsOf[filters.sessions];
  const sportOf = new Map((await listRatedTeams(tx, teamIds)).map(({ id, sport }) => [id, sport]));
  const tallies = await tallySessions(tx, { from, to, teamIds });
  return coverageOf(
    tallies.filter(
      ({ day, kind, teamId }) =>
        kinds.includes(kind) &&
        (filters.sport === "any" || sportOf.get(teamId) === filters.sport) &&
        seasonOf(day, viewing.seasons) !== undefined,
    ),
  );
}

/**
 * One table of a view as a file: its name and its text.
 * @throws DomainError not_found for a view or a table that there is not
 */
export async function tableFileOf(
  tx: Tx,
  view: RatesView,
  url: URL,
  name: { view: string; table: string },
): Promise<{ name: string; text: string }> {
  const found = await tablesOf(tx, view, url, name.view);
  const table = found?.tables.find(({ id }) => id === name.table);
  if (!table) throw notFound("That table");
  const { viewing, organisation } = view;
  const filters = found?.filtersOf?.(table) ?? view.filters;
  const period = found?.all ? allSeasons(view, tx.scope.today) : view.period;
  const text = writeTableCsv(table, {
    ...period,
    organisation,
    filters,
    team: viewing.team?.name ?? (tx.scope.teams === "all" ? "all teams" : "own teams"),
    coverage: await coverageOfView(tx, view, period),
  });
  const file = [name.view, name.table, period.season].join("-").replace(/[^A-Za-z0-9]+/g, "-");
  return { name: `${file}.csv`, text };
}
