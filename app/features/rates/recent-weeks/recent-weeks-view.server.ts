import type { Tx } from "~db/client.server";
import { coverageOf, stableFrom } from "../coverage";
import { dayWords } from "../periods";
import { select } from "../selection";
import { countView, type RatesView } from "../view.server";
import { recentSpan, surpriseOf, surprisesByTeam } from "./recent-weeks";
import { weekCharts } from "./recent-weeks-charts";
import { teamSurprisesTable, weeksTable } from "./recent-weeks-tables";
import { lookingOften, recentNote, recentSentence, spanWords, thresholdWords } from "./recent-weeks-words";

/** The last weeks of a view against everything before them. */
export async function recentWeeksViewOf(tx: Tx, view: RatesView) {
  const { filters, period, scopeName } = view;
  const unit = filters.per;
  const counts = await countView(tx, view, { all: true });
  const selection = select(counts, filters);
  const material = { counts, selection, unit };
  const span = recentSpan(period.to, tx.scope.today, selection.cells);
  const surprise = surpriseOf(material, span);
  const teams = surprisesByTeam(material, span);
  const charts = weekCharts(material, span);
  const { weeks, centre, threshold } = charts;
  return {
    span,
    coverage: coverageOf(selection.sessions.filter(({ day }) => span.from <= day && day <= span.to)),
    sentence: recentSentence(surprise, charts, span, filters, scopeName),
    note: recentNote(surprise, teams.length),
    often: lookingOften(surprise, teams),
    reported: charts.reported,
    thresholdWords: thresholdWords(charts),
    chart: {
      periods: weeks.map(({ week }) => dayWords(week)),
      centre,
      threshold,
      isSparse: charts.usual !== null && charts.usual < 1,
      unfinished: weeks.find((week) => week.unfinished)?.week ?? null,
      points: weeks.map(({ rate, limits, events }) =>
        rate && limits ? { value: rate.estimate, ...limits, unstable: (events ?? 0) < stableFrom } : null,
      ),
      sums: weeks.map(({ cusum }) => cusum),
      crossings: weeks.flatMap(({ crossed }, index) => (crossed ? [index] : [])),
      gaps: [...new Set(weeks.flatMap(({ gap }) => gap ?? []))],
    },
    several: teams.length > 1,
    tables: [teamSurprisesTable(teams, unit, spanWords(span)), weeksTable(charts, unit)],
  };
}

export type RecentWeeksView = Awaited<ReturnType<typeof recentWeeksViewOf>>;
