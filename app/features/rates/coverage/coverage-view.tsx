import { lazy, Suspense } from "react";
import { Attention, Lede, Region } from "~/ui";
import { CoverageNote } from "../components/coverage-note";
import { FigureTable } from "../components/figure-table";
import { coverageFloor, coverageWarning, percent } from "../coverage";
import { formatCount } from "../figures";
import { dayWords, monthWords } from "../periods";
import type { CoverageRow, CoverageView as View } from "./coverage-view.server";

// Charts reach the browser only where one shows.
const PeriodGrid = lazy(() => import("~/ui/charts/period-grid"));

const listed = (names: readonly string[]) =>
  names.length < 2 ? (names[0] ?? "") : `${names.slice(0, -1).join(", ")} and ${names.at(-1)}`;

/** Teams under the warning, the lowest first. */
const lowTeams = (rows: readonly CoverageRow[]) =>
  rows
    .filter(({ coverage }) => coverage.state === "low" || coverage.state === "withheld")
    .sort((a, b) => (a.coverage.share ?? 0) - (b.coverage.share ?? 0));

function Sentence({ coverage, rows }: View) {
  if (coverage.share === null) return <>No session of this season was held yet.</>;
  const low = lowTeams(rows);
  return (
    <>
      <strong>
        {formatCount(coverage.recorded)} of {formatCount(coverage.held)}
      </strong>{" "}
      held sessions have recorded exposure, <strong>{percent(coverage.share)}</strong>.{" "}
      {low.length === 0 ? (
        `Every team is at ${coverageWarning * 100} % or above.`
      ) : (
        <>
          <Attention>
            {low.length === 1 ? "One team is" : `${low.length} teams are`} below {coverageWarning * 100} %
          </Attention>
          : {listed(low.slice(0, 4).map(({ name, coverage: own }) => `${name} (${percent(own.share ?? 0)})`))}
          {low.length > 4 ? " and others" : ""}.
        </>
      )}
    </>
  );
}

/** How much of the exposure is recorded: the sentence, the weeks of every team, the tables. */
export function CoverageView({ slug, ...view }: View & { slug: string }) {
  const { rows, weeks, tables, reported, coverage } = view;
  const [teams, byWeek] = tables;
  return (
    <>
      <Lede
        note={`Rates say so below ${coverageWarning * 100} % and are withheld below ${coverageFloor * 100} %. In ${formatCount(reported.reported)} of ${formatCount(reported.all)} team-weeks with exposure an injury was entered or somebody confirmed that there was none; the others read "not reported", never 0.`}
      >
        <Sentence {...view} />
      </Lede>
      <CoverageNote coverage={coverage} />
      <Suspense fallback={<div style={{ height: rows.length * 34 + 60 }} />}>
        <PeriodGrid
          rows={rows.map(({ name, weeks: cells, coverage: own }) => ({
            label: own.share === null ? name : `${name}, ${percent(own.share).replace(" ", "\u00a0")}`,
            cells: cells.map((cell) =>
              cell ? { share: cell.share, text: `${cell.recorded} of ${cell.held} recorded` } : null,
            ),
          }))}
          periods={weeks.map((week) => ({
            short: monthWords(week).split(" ")[0] ?? "",
            long: `week from ${dayWords(week, true)}`,
          }))}
          title="Share of each team's held sessions with recorded exposure, week by week; the tables below hold the numbers."
          emptyText="no session held"
        />
      </Suspense>
      {teams ? <FigureTable table={teams} slug={slug} view="coverage" /> : null}
      {byWeek ? (
        <Region heading="Week by week">
          <FigureTable table={byWeek} slug={slug} view="coverage" captionHidden />
        </Region>
      ) : null}
    </>
  );
}
