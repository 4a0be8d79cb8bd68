import { lazy, Suspense } from "react";
import { useLocation } from "react-router";
import { Lede, LinkRow, Note, Region, TextLink } from "~/ui";
import type { IntervalGroup } from "~/ui/charts/interval-chart";
import { CoverageNote } from "../components/coverage-note";
import { FigureTable } from "../components/figure-table";
import type { Frame } from "../components/rates-frame";
import { SentenceParts } from "../components/sentence-parts";
import type { TableData } from "../tables";
import { searchWith } from "../views";
import { ComparisonPicker } from "./comparisons-picker";
import type { ComparisonsView as View } from "./comparisons-view.server";

// Charts reach the browser only where one shows.
const IntervalChart = lazy(() => import("~/ui/charts/interval-chart"));

const own = ["compare", "a", "b", "over"] as const;

function RatioPicture({
  groups,
  title,
  reference,
}: {
  groups: IntervalGroup[];
  title: string;
  reference: string;
}) {
  return (
    <Suspense fallback={<div style={{ height: groups.length * 50 + 90 }} />}>
      <IntervalChart
        logarithmic
        groups={groups}
        unit="times"
        decimals={2}
        reference={{ value: 1, label: reference }}
        title={title}
      />
    </Suspense>
  );
}

/** The rates table's rows lead to the injuries of each group. */
function withRecords(table: TableData, hrefOf: (key: string) => string | undefined): TableData {
  return {
    ...table,
    rows: table.rows.map((row) => {
      const href = row.cells.injuries ? hrefOf(row.key) : undefined;
      return href ? { ...row, href } : row;
    }),
  };
}

type Props = { frame: Frame; data: View };

/** Two groups held against each other, in words, as ratios with their intervals, and by stratum. */
export function ComparisonsView({ frame, data }: Props) {
  const { slug, season } = frame;
  const { search } = useLocation();
  const { dimension, over, choice, problem, coverage, sentence, note, lines, unstable, sports, tables } =
    data;
  const records = (by: string) => (key: string) =>
    `/${slug}/rates/records${searchWith(search, { by, group: key })}`;
  // The records behind a figure are listed season by season, or for a season as a group.
  const isListed = over === "season" || dimension === "season";
  const pairRecords = (key: string) =>
    isListed && (key === choice.a || key === choice.b) ? records(dimension)(key) : undefined;
  const sportRecords = (key: string) => {
    const [sport, sex] = key.split(" ");
    if (over === "all") return undefined;
    return `/${slug}/rates/records${searchWith(search, { by: "sex", group: sex, sport })}`;
  };
  const table = (id: string) => tables.find((each) => each.id === id);
  const [rates, ratios, strata, bySport] = ["rates", "ratios", "strata", "sports"].map(table);
  const sportRatios = table("sport-ratios");
  const shared = { slug, view: "comparisons", keeps: own };
  return (
    <>
      <ComparisonPicker {...{ dimension, over, season, choice }} />
      {problem ? (
        <Note kind="attention" title="Nothing is compared">
          <p>{problem.charAt(0).toUpperCase() + problem.slice(1)}</p>
        </Note>
      ) : (
        <Lede note={<SentenceParts parts={note} />}>
          <SentenceParts parts={sentence} />
        </Lede>
      )}
      <CoverageNote coverage={coverage} />
      {lines.length > 0 ? (
        <RatioPicture
          groups={lines.map(({ label, ratio }) => ({
            label,
            points: [{ series: 1, label: "", rate: ratio, unstable }],
          }))}
          reference="no difference"
          title="The rate ratio as it is, allowing for teams, and at the same ages and session kinds, with 95 % intervals on a logarithmic axis; the tables below hold the numbers."
        />
      ) : null}
      {rates ? <FigureTable {...shared} table={withRecords(rates, pairRecords)} /> : null}
      {ratios ? <FigureTable {...shared} table={ratios} /> : null}
      {strata ? (
        <Region heading="By age band and session kind">
          <FigureTable {...shared} table={strata} />
        </Region>
      ) : null}
      {sports && bySport ? (
        <Region heading={sports.heading} id="by-sport">
          <p className="mb-4 max-w-prose">
            <SentenceParts parts={sports.sentence} />
          </p>
          {sports.lines.length > 0 ? (
            <RatioPicture
              groups={sports.lines.map(({ label, counts, ratio, unstable: few }) => ({
                label,
                points: [
                  ratio
                    ? { series: 1, label: counts, rate: ratio, unstable: few }
                    : { series: 1, label: counts, rate: null, note: "no ratio" },
                ],
              }))}
              reference="no difference"
              title={`${sports.heading}: rate ratios with 95 % intervals on a logarithmic axis; the table below holds the numbers.`}
            />
          ) : null}
          <FigureTable {...shared} table={withRecords(bySport, sportRecords)} />
          {sportRatios && sports.lines.length > 0 ? <FigureTable {...shared} table={sportRatios} /> : null}
          <LinkRow>
            <TextLink
              to={searchWith(search, {
                contact: "without",
                area: "knee",
                ...(over === "all" ? { over } : {}),
              })}
            >
              Only knee injuries without direct contact
            </TextLink>
          </LinkRow>
        </Region>
      ) : null}
    </>
  );
}
