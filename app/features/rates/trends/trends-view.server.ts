import type { Tx } from "~db/client.server";
import { select } from "../selection";
import { countView, type RatesView } from "../view.server";
import { monthRows, trendOf, trendWithinKinds } from "./trends";
import { seasonRows, seasonsSoFar } from "./trends-seasons";
import { monthsTable, seasonsTable, soFarTable, trendTable } from "./trends-tables";
import { soFarSentence, trendNote, trendSentence } from "./trends-words";

/** Rates over the months of all seasons, their trend, the seasons, and the season so far. */
export async function trendsViewOf(tx: Tx, view: RatesView) {
  const { filters, period, viewing, scopeName } = view;
  const unit = filters.per;
  const counts = await countView(tx, view, { all: true });
  const selection = select(counts, filters);
  const material = { counts, selection, unit };
  const months = monthRows(material);
  const trend = trendOf(months);
  const kinds =
    filters.sessions === "training-and-matches" ? trendWithinKinds(months, selection, unit) : null;
  const seasons = seasonRows(material);
  const soFar = viewing.season ? seasonsSoFar(material, viewing.season.id, period.to) : [];
  return {
    coverage: selection.coverage,
    sentence: trendSentence(trend, kinds, scopeName),
    note: trendNote(trend, kinds, seasons, months),
    soFarSentence: soFarSentence(soFar, filters),
    months: months.map(({ month, label, row, unfinished }) => ({
      ...{ month, label, unfinished },
      /** The season whose address lists the month's records. */
      season: counts.seasons.find(
        ({ startsOn, endsOn }) => startsOn <= `${month}-31` && endsOn >= `${month}-01`,
      )?.id,
      rate: row?.rate ?? null,
      unstable: row?.unstable ?? false,
    })),
    tables: [
      monthsTable(months, unit),
      trendTable(trend, kinds),
      seasonsTable(seasons, unit),
      soFarTable(soFar, unit),
    ],
  };
}

export type TrendsView = Awaited<ReturnType<typeof trendsViewOf>>;
