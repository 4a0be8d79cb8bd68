import { openDoor } from "~/features/accounts/doors.server";
import { may } from "~/features/accounts/permissions";
import type { MemberScope } from "~/features/accounts/scope.server";
import { resolveViewing, type Viewing, viewedTeamIds } from "~/features/accounts/viewing.server";
import { complianceByTeam } from "~/features/warm-ups/warm-ups.server";
import { read, type Scope, type Tx } from "~db/client.server";
import { sumExposure } from "./counting";
import { listExposedAthletes, type Range, sumExposureCells } from "./exposure.queries.server";
import type { RatesFilters } from "./filters";
import { fixTables } from "./fixed-tables";
import { listInjuryRows } from "./injury-rows.queries.server";
import { type Counts, computeRates, type RateRow } from "./rates";
import {
  findCountingRules,
  listConfirmingTeams,
  listRatedTeams,
  tallySessions,
} from "./rates.queries.server";

/** A season up to today. */
export type Period = { from: string; to: string; season: string };

const periodOf = ({ season }: Viewing, today: string): Period | null =>
  season && { from: season.startsOn, to: season.endsOn < today ? season.endsOn : today, season: season.name };

async function countAll(tx: Tx, range: Range): Promise<Counts & { smallNumber: number }> {
  const { bands, smallNumber } = await findCountingRules(tx);
  return {
    bands,
    smallNumber,
    cells: await sumExposureCells(tx, range),
    injuries: await listInjuryRows(tx, range),
    sessions: await tallySessions(tx, range),
    teams: await listRatedTeams(tx, range.teamIds),
    confirming: await listConfirmingTeams(tx, range),
  };
}

/** The teams a view is of: null is every team, archived ones too, which only a person of all teams sees. */
const teamsOf = (viewing: Viewing, scope: Scope): Range["teamIds"] =>
  viewing.team === null && scope.teams === "all" ? null : viewedTeamIds(viewing);

/** The whole club's rate, to stand beside a part of it: its sums alone leave this function. */
async function countClub(tx: Tx, range: Range, filters: RatesFilters): Promise<RateRow> {
  const counts = await countAll(tx, { ...range, teamIds: null });
  return { ...computeRates(counts, filters).total, key: "club", label: "All teams" };
}

/**
 * Incidence in the view of an address, for clinical roles: their own teams and, beside them, the club's total.
 * `rates` is null while the organisation has no season.
 */
export async function incidenceOf(tx: Tx, url: URL, filters: RatesFilters) {
  const viewing = await resolveViewing(tx, url);
  const period = periodOf(viewing, tx.scope.today);
  if (!period) return { viewing, period, rates: null, club: null, exposure: null };
  const teamIds = teamsOf(viewing, tx.scope);
  const range = { ...period, teamIds };
  const counts = await countAll(tx, range);
  // The injuries themselves stay here: a page of rates needs their counts alone.
  const { counted: _counted, ...rates } = computeRates(counts, filters);
  return {
    viewing,
    period,
    rates,
    club: teamIds === null ? null : await countClub(tx, range, filters),
    exposure: sumExposure(counts.cells),
  };
}

export type Incidence = Awaited<ReturnType<typeof incidenceOf>>;

/**
 * The fixed tables for those outside the clinical roles: the whole organisation, small cells hidden. The counting
 * reads clinical records as a job does; nothing but the tables leaves.
 */
export async function fixedTablesOf(scope: MemberScope, url: URL) {
  const viewing = await read(scope, (tx) => resolveViewing(tx, withoutTeam(url)));
  const period = periodOf(viewing, scope.today);
  if (!period) return { viewing, period, fixed: null };
  const counting = await openDoor("job", scope.organisationId, { personId: scope.personId });
  const fixed = await read(counting, async (tx) => {
    const range = { ...period, teamIds: null };
    const counts = await countAll(tx, range);
    return fixTables(counts, await listExposedAthletes(tx, range), counts.smallNumber);
  });
  return { viewing, period, fixed };
}

/** The fixed tables are of the whole organisation: a table per team would give hidden cells away. */
function withoutTeam(url: URL) {
  const whole = new URL(url);
  whole.searchParams.delete("team");
  return whole;
}

/** Warm-up session compliance of the viewed teams over the same days; the sessions themselves stay behind. */
export async function warmUpsBeside(tx: Tx, viewing: Viewing, period: Period) {
  const teams = await complianceByTeam(tx, { ...period, teamIds: viewedTeamIds(viewing) });
  return teams.map(({ teamId, teamName, compliance: { ofHeld, ofRecorded } }) => ({
    id: teamId,
    name: teamName,
    ofHeld,
    ofRecorded,
  }));
}

export type TeamWarmUps = Awaited<ReturnType<typeof warmUpsBeside>>[number];

export const seesRates = (scope: Scope) => may(scope.roles, "rates.clinical");
