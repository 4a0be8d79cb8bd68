import { group } from "d3-array";
import type { MemberScope } from "~/features/accounts/scope.server";
import { resolveViewing, type Season, type Viewing, viewedTeamIds } from "~/features/accounts/viewing.server";
import { read, type Scope, type Tx } from "~db/client.server";
import type { Frame } from "./components/rates-frame";
import type { RatesFilters } from "./filters";
import { seasonOf } from "./periods";
import { findCountingRules, listConfirmedWeeks, listRatedTeams, tallySessions } from "./rates.queries.server";
import { parseRatesQuery, type RatesQuery, readBand } from "./rates.schema";
import { type Range, sumExposureCells } from "./rollups/exposure.queries.server";
import { listInjuryRows } from "./rollups/injury-rows.queries.server";
import { keepWeeksToSeasons } from "./season-weeks";
import type { Counts } from "./selection";
import { splitSilent } from "./silence";

/** What every view of rates begins with: whose days are looked at, and their counts. */

/** Days up to today, with the name of what they are. */
export type Period = { from: string; to: string; season: string };

const upTo = (day: string, today: string) => (day < today ? day : today);
const laterOf = (a: string, b: string) => (a > b ? a : b);

export const periodOf = ({ season }: Pick<Viewing, "season">, today: string): Period | null =>
  season && { from: season.startsOn, to: upTo(season.endsOn, today), season: season.name };

/** The teams a view is of: null is every team, archived ones too, which only a person of all teams sees. */
export const teamsOf = (viewing: Viewing, scope: Scope): Range["teamIds"] =>
  viewing.team === null && scope.teams === "all" ? null : viewedTeamIds(viewing);

/**
 * The counts of some seasons together, asked in one go from the first day to the last; days between two seasons count
 * nothing. Silence is judged season by season: a team that reported last year may be silent in this one.
 * @param seasons in any order; those that have not begun count nothing
 */
export async function countSeasons(
  tx: Tx,
  seasons: readonly Season[],
  teamIds: Range["teamIds"],
): Promise<Counts & { smallNumber: number }> {
  const { today } = tx.scope;
  const { bands, smallNumber } = await findCountingRules(tx);
  const begun = seasons
    .filter(({ startsOn }) => startsOn <= today)
    .sort((a, b) => (a.startsOn < b.startsOn ? -1 : 1));
  const from = begun[0]?.startsOn ?? today;
  const to = begun.reduce((last, { endsOn }) => laterOf(last, upTo(endsOn, today)), from);
  const teams = await listRatedTeams(tx, teamIds);
  const empty = { cells: [], silent: [], injuries: [], sessions: [], confirmedWeeks: [] };
  if (begun.length === 0) return { bands, smallNumber, seasons: begun, from, to, teams, ...empty };
  const range = { from, to, teamIds };
  const isInSeason = ({ day }: { day: string }) => seasonOf(day, begun) !== undefined;
  const cells = (await sumExposureCells(tx, range)).filter(isInSeason);
  const listed = (await listInjuryRows(tx, range)).filter(isInSeason);
  const injuries = begun.length > 1 ? keepWeeksToSeasons(listed, cells, begun) : listed;
  const confirmedWeeks = await listConfirmedWeeks(tx, range);
  const sessions = (await tallySessions(tx, range)).filter(isInSeason);
  const ofSeason = <T extends { day: string }>(rows: readonly T[]) =>
    group(rows, ({ day }) => seasonOf(day, begun)?.id);
  const [cellsOf, injuriesOf] = [ofSeason(cells), ofSeason(injuries)];
  const split = begun.map(({ id }) =>
    splitSilent(cellsOf.get(id) ?? [], injuriesOf.get(id) ?? [], confirmedWeeks),
  );
  return {
    ...{ bands, smallNumber, seasons: begun, from, to, teams },
    ...{ injuries, sessions, confirmedWeeks },
    cells: split.flatMap((each) => each.cells),
    silent: split.flatMap((each) => each.silent),
  };
}

/** What an address asks for, as the frame of every page of rates needs it. */
export type RatesView = {
  /** The organisation's name. */
  organisation: string;
  viewing: Viewing;
  period: Period;
  filters: RatesFilters;
  /** Null: every team. */
  teamIds: Range["teamIds"];
  /** The organisation's bands, for the choices of the filters. */
  bands: string[];
  /** The sports of the teams in view. */
  sports: string[];
  /** The organisation, a team, or "My teams": how a sentence begins. */
  scopeName: string;
};

/**
 * Season, teams and filters of an address; null while the organisation has no season.
 * @param query parsed by `parseRatesQuery`
 * @throws DomainError invalid for an age band that the organisation does not have
 */
export async function openView(tx: Tx, url: URL, query: RatesQuery): Promise<RatesView | null> {
  const { scope } = tx;
  const viewing = await resolveViewing(tx, url);
  const period = periodOf(viewing, scope.today);
  if (!period) return null;
  const teamIds = teamsOf(viewing, scope);
  const { bands, name } = await findCountingRules(tx);
  const labels = bands.map(({ label }) => label);
  const { season: _season, team: _team, ...filters } = query;
  const teams = await listRatedTeams(tx, teamIds);
  return {
    organisation: name,
    viewing,
    period,
    filters: { ...filters, age: readBand(query.age, labels) },
    teamIds,
    bands: labels,
    sports: [...new Set(teams.map(({ sport }) => sport))].sort(),
    scopeName: viewing.team?.name ?? (scope.teams === "all" ? name : "My teams"),
  };
}

/** The counts of a view's season, or of all seasons. */
export const countView = (tx: Tx, view: RatesView, { all = false } = {}) =>
  countSeasons(
    tx,
    all ? view.viewing.seasons : view.viewing.season ? [view.viewing.season] : [],
    view.teamIds,
  );

/** What the frame of a page of rates shows. */
export const frameOf = (scope: MemberScope, view: RatesView): Frame => ({
  slug: scope.slug,
  organisation: scope.organisationName,
  season: view.period.season,
  from: view.period.from,
  to: view.period.to,
  scopeName: view.scopeName,
  filters: view.filters,
  bands: view.bands,
  sports: view.sports,
});

/**
 * The loader of a view of rates: parses the address, opens the view in one read and runs its own question there.
 * `frame` is null while the organisation has no season.
 * @throws DomainError invalid, naming each parameter that is wrong
 */
export async function loadRates<T>(
  scope: MemberScope,
  url: URL,
  run: (tx: Tx, view: RatesView) => Promise<T>,
  /** `write` where records of single athletes are read, which is audited. */
  open: typeof read = read,
): Promise<{ frame: Frame; data: T } | { frame: null; data: null }> {
  const query = parseRatesQuery(url.searchParams);
  return open(scope, async (tx) => {
    const view = await openView(tx, url, query);
    if (!view) return { frame: null, data: null };
    return { frame: frameOf(scope, view), data: await run(tx, view) };
  });
}
