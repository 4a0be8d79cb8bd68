import { openDoor } from "~/features/accounts/doors.server";
import { may } from "~/features/accounts/permissions";
import type { MemberScope } from "~/features/accounts/scope.server";
import { resolveViewing, type Viewing } from "~/features/accounts/viewing.server";
import { complianceByTeam } from "~/features/warm-ups/warm-ups.server";
import { read, type Scope, type Tx } from "~db/client.server";
import { fixTables } from "./fixed/fixed-tables";
import { computeRates, type RateRow } from "./rates";
import { listExposedAthletes } from "./rollups/exposure.queries.server";
import { countSeasons, countView, type Period, periodOf, type RatesView, teamsOf } from "./view.server";
import { hidesOtherTeams } from "./whole";

/**
 * The whole club's rate, to stand beside a part of it: its sums alone leave this function. Null where they would give
 * another team's numbers away to a person of listed teams.
 */
async function countClub(tx: Tx, view: RatesView): Promise<RateRow | null> {
  const { teams } = tx.scope;
  const counts = await countView(tx, { ...view, teamIds: null }, { all: view.filters.by === "season" });
  if (teams !== "all" && !hidesOtherTeams(counts, view.filters, teams)) return null;
  return { ...computeRates(counts, view.filters).total, key: "club", label: "All teams" };
}

/**
 * Incidence in the view of an address, for clinical roles: their own teams and, beside them, the club's total where
 * it gives no other team away.
 * By season all seasons are looked at, whichever the address names.
 */
export async function incidenceOf(tx: Tx, view: RatesView) {
  const { filters, teamIds } = view;
  const counts = await countView(tx, view, { all: filters.by === "season" });
  // The injuries themselves stay here: a page of rates needs their counts alone.
  const { counted: _counted, reportedWeeks, ...rates } = computeRates(counts, filters);
  return {
    rates,
    /** Whether the view is of some of the teams alone. */
    isPart: teamIds !== null,
    club: teamIds === null ? null : await countClub(tx, view),
    reportedWeeks,
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
    const counts = await countSeasons(tx, viewing.season ? [viewing.season] : [], null);
    const exposed = await listExposedAthletes(tx, { ...period, teamIds: null });
    return fixTables(counts, exposed, counts.smallNumber);
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
  const teams = await complianceByTeam(tx, { ...period, teamIds: teamsOf(viewing, tx.scope) });
  return teams.map(({ teamId, teamName, compliance: { ofHeld, ofRecorded } }) => ({
    id: teamId,
    name: teamName,
    ofHeld,
    ofRecorded,
  }));
}

export type TeamWarmUps = Awaited<ReturnType<typeof warmUpsBeside>>[number];

export const seesRates = (scope: Scope) => may(scope.roles, "rates.clinical");
