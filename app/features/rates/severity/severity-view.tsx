import { lazy, Suspense } from "react";
import { Disclosure, Lede, LinkRow, Region, TextLink } from "~/ui";
import { CoverageNote } from "../components/coverage-note";
import { FigureTable } from "../components/figure-table";
import { HowComputed } from "../components/how-computed";
import type { Frame } from "../components/rates-frame";
import { SentenceParts } from "../components/sentence-parts";
import { stableFrom } from "../coverage";
import type { TableData } from "../tables";
import type { SeverityView as View } from "./severity-view.server";
import { injuriesOf } from "./severity-words";

// Charts reach the browser only where one shows.
const BurdenChart = lazy(() => import("~/ui/charts/burden-chart"));
const StepCurve = lazy(() => import("~/ui/charts/step-curve"));

/** Heights of the two pictures in px, so that nothing moves when they come. */
const room = { burden: 528, curve: 448 };

function BurdenPicture({ points, equalBurdens }: Pick<View, "points" | "equalBurdens">) {
  if (points.length === 0) return null;
  return (
    <>
      <Suspense fallback={<div style={{ height: room.burden }} />}>
        <BurdenChart
          points={points}
          curves={equalBurdens}
          xUnit="injuries per 1000 hours"
          yUnit="days lost per injury"
          caption="How often against how long: along each line the days lost per 1000 hours are the same"
          title="Mean days lost per injury against injuries per 1000 hours, by group, with lines of equal burden; the tables below hold the numbers."
        />
      </Suspense>
      <p className="max-w-prose text-soft">
        The larger the spot, the more injuries; a hollow one rests on fewer than {stableFrom}. Groups without
        a day lost stand in the tables only.
      </p>
    </>
  );
}

function ReturnPicture({ curves, caption }: { curves: View["curves"]["whole"]; caption: string }) {
  return (
    <Suspense fallback={<div style={{ height: room.curve }} />}>
      <StepCurve
        curves={curves}
        start={1}
        xUnit="days lost"
        yUnit="share not yet back"
        mark={{ y: 0.5, label: "half" }}
        caption={caption}
        title={`${caption}: a step for each return, a tick for each ongoing injury; the tables below hold the numbers.`}
      />
    </Suspense>
  );
}

function HowSeverityIsComputed() {
  return (
    <Disclosure summary="How burden and time to return are computed">
      <div className="max-w-prose space-y-3">
        <p>
          <strong className="font-semibold">Burden.</strong> Days lost per 1000 hours of exposure. Its 95 %
          interval (compound Poisson, on the log scale) grows with every long injury. Days are those on which
          the athlete was not fully available, from the day after onset; those of one injury are counted once,
          also when several reasons overlap. They run on after the end of the season.
        </p>
        <p>
          <strong className="font-semibold">Ongoing injuries</strong> count with the days they have lasted,
          also where the athlete has left meanwhile. So the burden and the days of an injury are the least
          they can end with, and an ongoing injury may still move to a longer band.
        </p>
        <p>
          <strong className="font-semibold">Time to return.</strong> The quarter, the median and the three
          quarters of closed injuries leave out the ongoing ones, which are often the long ones. The
          Kaplan-Meier curve counts those for as long as they were watched; its median is the first day by
          which half are back. Limits by Greenwood's variance, log-log.
        </p>
      </div>
    </Disclosure>
  );
}

/** Severity and burden: what injuries cost by group, and how soon the injured are back. */
export function SeverityView({ frame, view }: { frame: Frame; view: View }) {
  const { slug, filters } = frame;
  const { tables, curves, comparison, injuries, ongoing, links } = view;
  const table = (data: TableData, captionHidden = false) => (
    <FigureTable table={data} slug={slug} view="severity" captionHidden={captionHidden} />
  );
  return (
    <>
      <Lede note={<SentenceParts parts={view.note} />}>
        <SentenceParts parts={view.sentence} />
      </Lede>
      <CoverageNote coverage={view.coverage} />
      <BurdenPicture {...view} />
      {table(tables.frequency)}
      {table(tables.burden)}
      {injuries > 0 ? (
        <LinkRow>
          <TextLink to={links.all}>
            {injuries === 1 ? "The injury behind it" : `The ${injuriesOf(injuries)} behind it`}
          </TextLink>
          {ongoing > 0 ? (
            <TextLink to={links.ongoing}>
              {ongoing === 1 ? "The ongoing injury" : `The ${ongoing} ongoing injuries`}
            </TextLink>
          ) : null}
        </LinkRow>
      ) : null}
      {injuries > 0 ? (
        <>
          <Region heading="How long injuries last">
            {table(tables.bands)}
            {table(tables.groups)}
          </Region>
          <Region heading="Time to return">
            <ReturnPicture curves={curves.whole} caption="Share not yet back after so many days" />
            {comparison ? (
              <>
                <ReturnPicture curves={curves.groups} caption="The same by group" />
                <p className="max-w-prose">
                  <SentenceParts parts={comparison.words} />
                </p>
              </>
            ) : null}
            {table(tables.returns)}
            <Disclosure summary="The curve in figures">{table(tables.curve, true)}</Disclosure>
          </Region>
        </>
      ) : null}
      <HowSeverityIsComputed />
      <HowComputed filters={{ ...filters, per: "hours" }} />
    </>
  );
}
