import { lazy, Suspense } from "react";
import { useLocation } from "react-router";
import { Lede, Region } from "~/ui";
import { CoverageNote } from "../components/coverage-note";
import { FigureTable } from "../components/figure-table";
import type { Frame } from "../components/rates-frame";
import { SentenceParts } from "../components/sentence-parts";
import { decimalsFor, formatRate } from "../figures";
import { unitWords } from "../sentence";
import type { TableData } from "../tables";
import { searchWith } from "../views";
import type { TeamRatesView as View } from "./team-rates-view.server";

// Charts reach the browser only where one shows.
const FunnelChart = lazy(() => import("~/ui/charts/funnel-chart"));

type Props = { frame: Frame; data: View };

/** Teams against the whole: who lies outside in words, the funnel, the table. */
export function TeamRatesView({ frame: { slug, filters }, data }: Props) {
  const { search } = useLocation();
  const { coverage, sentence, note, points, whole, limits, tables } = data;
  const [teams, expected] = tables;
  const recordsOf = (key: string) =>
    `/${slug}/rates/records${searchWith(search, { by: "team", group: key })}`;
  const linked = (table: TableData): TableData => ({
    ...table,
    rows: table.rows.map((row) =>
      row.total || !row.cells.injuries ? row : { ...row, href: recordsOf(row.key) },
    ),
  });
  return (
    <>
      <Lede note={<SentenceParts parts={note} />}>
        <SentenceParts parts={sentence} />
      </Lede>
      <CoverageNote coverage={coverage} />
      {whole !== null && limits.length > 0 && points.length > 0 ? (
        <Suspense fallback={<div style={{ height: 440 }} />}>
          <FunnelChart
            points={points}
            centre={{ value: whole, label: `all ${formatRate(whole, decimalsFor([whole]))}` }}
            limits={limits.map(({ level, points: curve }) => ({ label: `${level * 100} %`, points: curve }))}
            xUnit={filters.per === "aes" ? "athlete-exposures of the team" : "hours of the team"}
            yUnit={`per ${unitWords[filters.per]}`}
            title="Each team's rate against its exposure, with the limits between which it should lie if its true rate were the whole's; the table below holds the numbers."
          />
        </Suspense>
      ) : null}
      <p className="mb-6 max-w-prose text-soft">
        Hollow spots rest on fewer than 5 injuries. The less exposure a team has, the further its rate may lie
        from the whole's by luck. Limits: Poisson (mid-P) around the whole's rate, the team itself included.
        The shrunken rate is the better guess of what a team's rate will be next.
      </p>
      {teams ? <FigureTable table={linked(teams)} slug={slug} view="teams" /> : null}
      {expected && limits.length > 0 ? (
        <Region heading="At the same ages and share of matches">
          <FigureTable table={linked(expected)} slug={slug} view="teams" />
        </Region>
      ) : null}
    </>
  );
}
