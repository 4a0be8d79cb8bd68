import type { Tx } from "~db/client.server";
import { coverageOf } from "../coverage";
import { select } from "../selection";
import { countView, type RatesView } from "../view.server";
import { hidesOtherTeams } from "../whole";
import { teamRates } from "./team-rates";
import { expectedTable, teamsTable } from "./team-rates-tables";
import { teamsNote, teamsSentence } from "./team-rates-words";

/**
 * The teams of a view against the whole organisation. The whole is counted once; of teams that the view is not of,
 * nothing but their part in its sums leaves this function, and not that where it would be one other team's.
 */
export async function teamRatesViewOf(tx: Tx, view: RatesView) {
  const { filters, teamIds } = view;
  const unit = filters.per;
  const counts = await countView(tx, { ...view, teamIds: null });
  const selection = select(counts, filters);
  const { teams: own } = tx.scope;
  const wholeHidden = own !== "all" && !hidesOtherTeams(counts, filters, own);
  const rates = teamRates({ counts, selection, unit }, teamIds, wholeHidden);
  return {
    coverage: wholeHidden
      ? coverageOf(selection.sessions.filter(({ teamId }) => teamIds?.includes(teamId)))
      : selection.coverage,
    sentence: teamsSentence(rates, filters, view.organisation),
    note: teamsNote(rates),
    points: rates.teams.flatMap(({ row, outside }) =>
      row.rate && row.denominator
        ? [
            {
              label: row.label,
              exposure: row.denominator,
              rate: row.rate.estimate,
              outside: outside[0] !== null,
              unstable: row.unstable,
            },
          ]
        : [],
    ),
    whole: rates.whole?.estimate ?? null,
    limits: rates.limits,
    tables: [
      teamsTable(rates, unit, teamIds === null ? "All together" : "All teams of the club"),
      expectedTable(rates),
    ],
  };
}

export type TeamRatesView = Awaited<ReturnType<typeof teamRatesViewOf>>;
