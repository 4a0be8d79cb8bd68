import { lazy, Suspense } from "react";
import { useLocation } from "react-router";
import { Lede, LinkRow, Region, TextLink } from "~/ui";
import { CoverageNote } from "../components/coverage-note";
import { FigureTable } from "../components/figure-table";
import type { Frame } from "../components/rates-frame";
import { SentenceParts } from "../components/sentence-parts";
import { decimalsFor, formatCount, formatRate } from "../figures";
import { dayWords, monthsOf, monthWords } from "../periods";
import { unitWords } from "../sentence";
import { searchWith } from "../views";
import type { RecentWeeksView as View } from "./recent-weeks-view.server";

// Charts reach the browser only where one shows.
const ControlChart = lazy(() => import("~/ui/charts/control-chart"));
const ThresholdChart = lazy(() => import("~/ui/charts/threshold-chart"));

type Chart = View["chart"];

function WeekPicture({ chart, unit }: { chart: Chart; unit: string }) {
  const { periods, points, centre, gaps, unfinished } = chart;
  if (centre === null) return null;
  const notes = [
    "The limits are three standard errors around the mean of these weeks, wider where there was less exposure. Hollow spots rest on fewer than 5 injuries.",
    chart.isSparse
      ? "Fewer than one injury is expected a week: one or two injuries then lie outside such limits too easily, so judge the four weeks together."
      : "",
    unfinished ? `The week from ${dayWords(unfinished)} is not finished: it counts up to yesterday.` : "",
  ];
  return (
    <>
      <Suspense fallback={<div style={{ height: 362 }} />}>
        <ControlChart
          periods={periods}
          points={points}
          centre={{ value: centre, label: `mean ${formatRate(centre, decimalsFor([centre]))}` }}
          limitLabel="limit"
          unit={unit}
          title="The rate of each of the last weeks with the limits for its exposure; the table below holds the numbers."
          {...(gaps.length > 0 ? { gapNote: gaps.join(" or ") } : {})}
        />
      </Suspense>
      <p className="mb-6 max-w-prose text-soft">{notes.filter(Boolean).join(" ")}</p>
    </>
  );
}

function SumPicture({ chart }: { chart: Chart }) {
  const { periods, sums, threshold, crossings } = chart;
  if (!sums.some((value) => value !== null)) return null;
  return (
    <Suspense fallback={<div style={{ height: 340 }} />}>
      <ThresholdChart
        periods={periods}
        values={sums}
        threshold={{ value: threshold, label: `threshold ${threshold.toFixed(1)}` }}
        crossings={crossings}
        unit="injuries beyond the level, added up"
        title="The running sum of injuries beyond what the earlier weeks let expect, with its threshold; the table below holds the numbers."
      />
    </Suspense>
  );
}

type Props = { frame: Frame; data: View };

/** Whether something is wrong now: the last four weeks in words, weeks against their limits, the running sum, teams. */
export function RecentWeeksView({ frame: { slug, filters }, data }: Props) {
  const { pathname, search } = useLocation();
  const { span, coverage, sentence, note, often, reported, thresholdWords, chart, several, tables } = data;
  const [teams, weeks] = tables;
  const unit = `per ${unitWords[filters.per]}`;
  const byTeam = teams && {
    ...teams,
    rows: teams.rows.map((row) => ({
      ...row,
      href: several ? pathname + searchWith(search, { team: row.key }) : undefined,
    })),
  };
  return (
    <>
      <Lede note={<SentenceParts parts={note} />}>
        <SentenceParts parts={sentence} />
      </Lede>
      <CoverageNote coverage={coverage} />
      {often ? <p className="mb-6 max-w-prose">{often}</p> : null}
      <WeekPicture chart={chart} unit={unit} />
      {byTeam ? <FigureTable table={byTeam} slug={slug} view="recent-weeks" /> : null}
      <LinkRow>
        {monthsOf(span.from, span.to).map((month) => (
          <TextLink
            key={month}
            to={`/${slug}/rates/records${searchWith(search, { by: "month", group: month })}`}
          >
            Injuries of {monthWords(month)}
          </TextLink>
        ))}
      </LinkRow>
      <Region heading="A lasting rise">
        <p className="mb-4 max-w-prose">{thresholdWords}</p>
        <SumPicture chart={chart} />
      </Region>
      {weeks ? (
        <Region heading="Weeks">
          <p className="mb-4 max-w-prose text-soft">
            In {formatCount(reported.reported)} of the {formatCount(reported.all)}{" "}
            {several ? "team-weeks" : "weeks"} with exposure an injury was entered or it was confirmed that
            there was none.{" "}
            {reported.reported === reported.all
              ? ""
              : several
                ? "The others count as their teams' rates do: all exposure of a team that reports."
                : "The others are gaps in the pictures; mean, limits and sum count all exposure, as the team's rate does."}
          </p>
          <FigureTable table={weeks} slug={slug} view="recent-weeks" captionHidden />
        </Region>
      ) : null}
    </>
  );
}
