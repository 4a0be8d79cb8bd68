import { lazy, Suspense } from "react";
import { useLocation } from "react-router";
import { Lede, Region } from "~/ui";
import { CoverageNote } from "../components/coverage-note";
import { FigureTable } from "../components/figure-table";
import type { Frame } from "../components/rates-frame";
import { SentenceParts } from "../components/sentence-parts";
import { unitWords } from "../sentence";
import type { TableData } from "../tables";
import { searchWith } from "../views";
import type { TrendsView as View } from "./trends-view.server";

// Charts reach the browser only where one shows.
const LineWithBand = lazy(() => import("~/ui/charts/line-with-band"));

type Months = View["months"];

/**
 * A month of hardly any exposure has an interval many times longer than the others', which would press them flat: it
 * stands in the table only.
 */
function pictured(months: Months) {
  const reach = (list: Months) => Math.max(0, ...list.map(({ rate }) => rate?.upper ?? 0));
  const stable = reach(months.filter(({ unstable }) => !unstable));
  const end = stable === 0 ? Infinity : stable * 2.5;
  return months.map((month) => (month.rate && month.rate.upper <= end ? month : { ...month, rate: null }));
}

function MonthPicture({ months, unit, label }: { months: Months; unit: string; label: string }) {
  const shown = pictured(months);
  const missing = shown.filter(({ rate }, index) => !rate && months[index]?.rate);
  const unfinished = shown.find((month) => month.unfinished && month.rate);
  const notes = [
    "Hollow spots rest on fewer than 5 injuries; the line stops in months without exposure.",
    unfinished ? `${unfinished.label} is not finished.` : "",
    missing.length > 0
      ? `${missing.map((month) => month.label).join(", ")}: too little exposure for this axis, in the table only.`
      : "",
  ];
  return (
    <>
      <Suspense fallback={<div style={{ height: 340 }} />}>
        <LineWithBand
          periods={shown.map((month) => month.label)}
          series={[
            { series: 1, label, points: shown.map(({ rate, unstable }) => rate && { ...rate, unstable }) },
          ]}
          unit={unit}
          title="The rate of each month with its 95 % interval; the table below holds the numbers."
        />
      </Suspense>
      <p className="mb-6 max-w-prose text-soft">{notes.filter(Boolean).join(" ")}</p>
    </>
  );
}

type Props = { frame: Frame; data: View };

/** The rates over the months and seasons: the trend in words, the months, the seasons, the season so far. */
export function TrendsView({ frame: { slug, filters, season }, data }: Props) {
  const { search } = useLocation();
  const { coverage, sentence, note, soFarSentence, months, tables } = data;
  const records = (changes: Record<string, string | undefined>) =>
    `/${slug}/rates/records${searchWith(search, changes)}`;
  const monthHref = (key: string) =>
    records({ by: "month", group: key, season: months.find(({ month }) => month === key)?.season });
  const linked = (id: string, hrefOf?: (key: string) => string): TableData | undefined => {
    const table = tables.find((each) => each.id === id);
    if (!table || !hrefOf) return table;
    const rows = table.rows.map((row) => (row.cells.injuries ? { ...row, href: hrefOf(row.key) } : row));
    return { ...table, rows };
  };
  const seasonHref = (key: string) => records({ by: "season", group: key });
  const [byMonth, trend, seasons, soFar] = [
    linked("months", monthHref),
    linked("trend"),
    linked("seasons", seasonHref),
    linked("so-far"),
  ];
  const shared = { slug, view: "trends" };
  return (
    <>
      <Lede note={<SentenceParts parts={note} />}>
        <SentenceParts parts={sentence} />
      </Lede>
      <CoverageNote coverage={coverage} />
      {months.some(({ rate }) => rate) ? (
        <MonthPicture months={months} unit={`per ${unitWords[filters.per]}`} label="all together" />
      ) : null}
      {trend ? <FigureTable {...shared} table={trend} /> : null}
      {soFar ? (
        <Region heading={`Season ${season} so far`}>
          <p className="mb-4 max-w-prose">
            <SentenceParts parts={soFarSentence} />
          </p>
          <FigureTable {...shared} table={soFar} />
        </Region>
      ) : null}
      {seasons ? (
        <Region heading="Seasons">
          <FigureTable {...shared} table={seasons} captionHidden />
        </Region>
      ) : null}
      {byMonth ? (
        <Region heading="Months">
          <FigureTable {...shared} table={byMonth} captionHidden />
        </Region>
      ) : null}
    </>
  );
}
