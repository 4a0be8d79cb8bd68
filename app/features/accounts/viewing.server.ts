import { addDays } from "~/platform/clock";
import { notFound } from "~/platform/errors";
import type { Scope, Tx } from "~db/client.server";
import { findSeasons, findTeamsOf } from "./viewing.queries.server";

export type Season = { id: string; name: string; startsOn: string; endsOn: string };
export type TeamChoice = { id: string; name: string; sport: string; sex: string; underAge: number | null };

/** What the sentence of scope in the bar says: the season, and one team or all that the person covers. */
export type Viewing = {
  seasons: Season[];
  /** Null only while the organisation has no season at all. */
  season: Season | null;
  teams: TeamChoice[];
  team: TeamChoice | null;
};

/** The teams a member covers; archived ones only where asked for. */
export async function findOwnTeams(tx: Tx, scope: Scope, { archived = false } = {}): Promise<TeamChoice[]> {
  return scope.teams !== "all" && scope.teams.length === 0 ? [] : findTeamsOf(tx, scope, archived);
}

/**
 * Season and team from the address (`?season=ID&team=ID`); the current season and all own teams when it names none.
 * @throws DomainError not_found for a season or team that is not the person's
 */
export async function resolveViewing(tx: Tx, url: URL): Promise<Viewing> {
  const { scope } = tx;
  const seasonRows = await findSeasons(tx);
  const ownTeams = await findOwnTeams(tx, scope);
  const seasonId = url.searchParams.get("season");
  const teamId = url.searchParams.get("team");
  const current = seasonRows.find(({ startsOn }) => startsOn <= scope.today) ?? seasonRows.at(-1) ?? null;
  const season = seasonId ? seasonRows.find(({ id }) => id === seasonId) : current;
  const team = teamId ? ownTeams.find(({ id }) => id === teamId) : null;
  if (season === undefined || team === undefined) throw notFound("That season or team");
  return { seasons: seasonRows, season, teams: ownTeams, team };
}

/**
 * The last day of what lists show under the season of a viewing: what falls between two seasons stands with the one
 * before, so that nothing is in no list. Null: no end. Rates keep to the season's own days.
 */
export function lastListedDay({ season, seasons }: Viewing): string | null {
  const later = seasons.map(({ startsOn }) => startsOn).filter((day) => season && day > season.startsOn);
  const next = later.sort()[0];
  return next ? addDays(next, -1) : null;
}

/** Team ids of a viewing, for queries: the one chosen, or all that the person covers. */
export const viewedTeamIds = ({ team, teams: own }: Viewing) => (team ? [team.id] : own.map(({ id }) => id));
