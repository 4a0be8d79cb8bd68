import type { MemberScope } from "~/features/accounts/scope.server";
import { resolveViewing } from "~/features/accounts/viewing.server";
import { read } from "~db/client.server";
import { sumExposure } from "./counting";
import { coverageOf } from "./coverage";
import { defaultFilters } from "./filters";
import { rateRow } from "./rates";
import { listConfirmedWeeks, tallySessions } from "./rates.queries.server";
import { seesRates } from "./rates.server";
import { sumExposureCells } from "./rollups/exposure.queries.server";
import { countRolled } from "./rollups/rollups";
import { countInjuriesRolled } from "./rollups/rollups-injuries.queries.server";
import { type Part, writeSoFar } from "./sentence";
import { splitSilent } from "./silence";
import { periodOf, teamsOf } from "./view.server";

/**
 * The incidence of the current season in a sentence, for pages that need no more: injuries with time loss per 1000
 * athlete-exposures, counted from the roll-ups alone. Null outside the clinical roles and without a season.
 */
export async function seasonSoFar(scope: MemberScope): Promise<Part[] | null> {
  if (!seesRates(scope)) return null;
  return read(scope, async (tx) => {
    const viewing = await resolveViewing(tx, new URL("http://localhost/"));
    const period = periodOf(viewing, scope.today);
    if (!period) return null;
    const range = { from: period.from, to: period.to, teamIds: teamsOf(viewing, scope) };
    const rolled = await countInjuriesRolled(tx, range);
    const entered = rolled.map(({ teamId, leftOut }) => ({ teamId, withdrawn: leftOut === "withdrawn" }));
    const { cells } = splitSilent(
      await sumExposureCells(tx, range),
      entered,
      await listConfirmedWeeks(tx, range),
    );
    const { injuries: definition, sessions, per: unit } = defaultFilters;
    const { counted } = countRolled(rolled, { definition, sessions, unit });
    const row = rateRow({
      group: { key: "total", label: "", sex: null, band: null, teamId: null },
      events: counted.reduce((sum, { injuries }) => sum + injuries, 0),
      exposure: sumExposure(cells),
      unit,
      coverage: coverageOf(await tallySessions(tx, range)),
    });
    return writeSoFar(row, period.season);
  });
}
