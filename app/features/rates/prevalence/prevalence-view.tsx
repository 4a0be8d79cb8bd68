import { lazy, Suspense } from "react";
import { Disclosure, Lede, Region } from "~/ui";
import { FigureTable } from "../components/figure-table";
import type { Frame } from "../components/rates-frame";
import { SentenceParts } from "../components/sentence-parts";
import type { TableData } from "../tables";
import type { PrevalenceView as View } from "./prevalence-view.server";

// Charts reach the browser only where one shows.
const LineWithBand = lazy(() => import("~/ui/charts/line-with-band"));

/** Height of the picture in px, so that nothing moves when it comes. */
const room = 390;

function WeeksPicture({ weeks, mean, season }: Pick<View, "weeks" | "mean" | "season">) {
  if (weeks.length === 0) return null;
  const open = weeks.at(-1)?.finished === false;
  return (
    <>
      <Suspense fallback={<div style={{ height: room }} />}>
        <LineWithBand
          periods={weeks.map(({ label }) => label)}
          series={[{ series: 1, label: "by week", points: weeks.map(({ point }) => point) }]}
          unit="% of the day's roster not fully available"
          title={`Share of athletes not fully available in each week of ${season}, with its 95 % interval; the table below holds the numbers.`}
          {...(mean ? { reference: mean } : {})}
        />
      </Suspense>
      {open ? (
        <p className="-mt-3 mb-6 text-soft">The last week is not finished: it holds the days up to today.</p>
      ) : null}
    </>
  );
}

function HowPrevalenceIsComputed() {
  return (
    <Disclosure summary="How this is computed">
      <div className="max-w-prose space-y-3">
        <p>
          <strong className="font-semibold">A day.</strong> Whoever stands on a roster that day is looked at:
          once in the whole, also when in two teams, and once in each of these teams. The state of the day is
          the most restrictive one that any reason gives, injury, illness or other. Unavailable and modified
          together are not fully available. A coach's report that nobody has taken up yet is among the other
          causes. Visitors have no roster and do not count; after the day an athlete left, neither do they.
          Ages are those on the day.
        </p>
        <p>
          <strong className="font-semibold">A week, a season.</strong> The share of each day's roster,
          averaged over the days; days to come never count. The days of a period resemble each other, so its
          95 % interval (Wilson, conservative) rests on the roster of an average day, not on the sum of the
          days. A figure from fewer than 5 different athletes is marked unstable.
        </p>
      </div>
    </Disclosure>
  );
}

/** Prevalence: who is not fully available, by week, by group and by cause. */
export function PrevalenceView({ frame, view }: { frame: Frame; view: View }) {
  const { tables, groupingNote } = view;
  const table = (data: TableData, captionHidden = false) => (
    <FigureTable table={data} slug={frame.slug} view="prevalence" captionHidden={captionHidden} />
  );
  return (
    <>
      <Lede note={<SentenceParts parts={view.note} />}>
        <SentenceParts parts={view.sentence} />
      </Lede>
      <WeeksPicture {...view} />
      {table(tables.weeks)}
      <Region heading="By group">
        {groupingNote ? <p className="max-w-prose text-soft">{groupingNote}</p> : null}
        {table(tables.groups)}
        <Disclosure summary="Unavailable and modified, by group">
          {table(tables.groupStates, true)}
        </Disclosure>
      </Region>
      <Region heading="Unavailable or modified, and why">
        {table(tables.split)}
        <Disclosure summary="Unavailable and modified, week by week">
          {table(tables.weekStates, true)}
        </Disclosure>
        <Disclosure summary="Causes, week by week">{table(tables.weekCauses, true)}</Disclosure>
      </Region>
      <HowPrevalenceIsComputed />
    </>
  );
}
