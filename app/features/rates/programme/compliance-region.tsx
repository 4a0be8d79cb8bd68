import { lazy, Suspense } from "react";
import { useLocation } from "react-router";
import { Disclosure, Lede, Region, TextLink } from "~/ui";
import { FigureTable } from "../components/figure-table";
import { SentenceParts } from "../components/sentence-parts";
import { searchWith } from "../views";
import { compact } from "./programme-compliance-tables";
import { skipSentence, unrecordedNote } from "./programme-sentence";
import type { ProgrammeResult } from "./programme-view.server";

// Charts reach the browser only where one shows.
const LineWithBand = lazy(() => import("~/ui/charts/line-with-band"));
const PeriodGrid = lazy(() => import("~/ui/charts/period-grid"));

const keeps = ["plan"];

/** Who does the warm-up: which team skips it, the club by week, every team by week, the four measures. */
export function ProgrammeCompliance({
  slug,
  compliance,
}: {
  slug: string;
  compliance: ProgrammeResult["compliance"];
}) {
  const { search } = useLocation();
  const { skipping, least, together, line, grid, periods, tables } = compliance;
  const table = { slug, view: "programme", keeps };
  const hasLine = line.points.some((point) => point !== null);
  return (
    <Region heading="Is it done?">
      <Lede note={unrecordedNote(least, together.notRecorded, together.held)}>
        <SentenceParts parts={skipSentence(skipping)} />
      </Lede>
      <FigureTable {...table} table={compact(tables.skipped)} />
      <p className="max-w-prose text-soft">
        Skipped share: of the sessions with a warm-up record. From: the day the team began the programme. Only
        days from a team's own start count; sessions are the trainings and matches asked for above.
      </p>
      {grid.length > 0 ? (
        <Suspense fallback={<div style={{ height: grid.length * 40 + 60 }} />}>
          <PeriodGrid
            rows={grid.map(({ teamId, ...row }) => ({
              ...row,
              href: `/${slug}/rates/programme${searchWith(search, { team: teamId })}`,
            }))}
            periods={periods}
            title="Each team's recorded sessions with the target share of blocks done, week by week"
            caption="Done, of the sessions with a record, week by week"
            emptyText="nothing recorded"
          />
        </Suspense>
      ) : null}
      {grid.length > 0 ? (
        <p className="max-w-prose text-soft">
          A full stroke: done before every recorded session of the week. An empty one: none. A dot: no
          session, or none with a record.{" "}
          <TextLink
            to={`/${slug}/rates/csv/programme/team-weeks${searchWith(search)}`}
            reloadDocument
            className="print:hidden"
          >
            The numbers of every stroke as CSV
          </TextLink>
        </p>
      ) : null}
      {hasLine ? (
        <Suspense fallback={<div className="h-[340px]" />}>
          <LineWithBand
            {...line}
            series={[{ series: 1, label: "done", points: line.points }]}
            unit="per cent of sessions with a record"
            title="Session compliance of all these teams together, by week, with its 95 % interval; the table holds the numbers"
            caption="Session compliance by week, all these teams together"
          />
        </Suspense>
      ) : null}
      <FigureTable {...table} table={compact(tables.measures)} />
      <dl className="mb-4 max-w-prose text-soft [&_dt]:inline [&_dt]:font-semibold [&_dd]:inline">
        {measureWords.map(([term, words]) => (
          <div key={term}>
            <dt>{term}:</dt> <dd>{words}</dd>
          </div>
        ))}
      </dl>
      <Disclosure summary="The four measures week by week">
        <FigureTable {...table} table={compact(tables.weeks)} captionHidden />
      </Disclosure>
    </Region>
  );
}

const measureWords = [
  [
    "Session compliance",
    "sessions with at least the target share of blocks done, of those with a record; and of all held, where the unrecorded count as not done.",
  ],
  ["Weekly dose", "warm-ups per week in which a team held a session."],
  ["Completeness", "mean share of the five blocks done in a warm-up that took place."],
  [
    "Athlete dose",
    "warmed-up participations of all participations; without a record they count as not warmed up.",
  ],
] as const;
