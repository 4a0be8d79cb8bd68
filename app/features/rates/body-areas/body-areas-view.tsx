import { lazy, Suspense } from "react";
import { Lede, LinkRow, Region, TextLink } from "~/ui";
import { CoverageNote } from "../components/coverage-note";
import { FigureTable } from "../components/figure-table";
import { HowComputed } from "../components/how-computed";
import type { Frame } from "../components/rates-frame";
import { SentenceParts } from "../components/sentence-parts";
import { unitWords } from "../sentence";
import type { TableData } from "../tables";
import type { BodyAreasView as View } from "./body-areas-view.server";

// Charts reach the browser only where one shows.
const TwoSidedBars = lazy(() => import("~/ui/charts/two-sided-bars"));

function SidesPicture({ picture, unit }: { picture: View["picture"]; unit: string }) {
  const { rows, decimals } = picture;
  if (!rows.some(({ left, right }) => left || right)) return null;
  return (
    <Suspense fallback={<div style={{ height: rows.length * 44 + 132 }} />}>
      <TwoSidedBars
        rows={rows}
        decimals={decimals}
        leftLabel="left"
        rightLabel="right"
        unit={unit}
        caption="Injuries of the left and of the right, the areas with the most days lost first"
        title={`Injuries ${unit} of the left and the right side by body area, with their 95 % intervals; the tables below hold the numbers.`}
      />
    </Suspense>
  );
}

/** Body areas: where days are lost and injuries happen, left against right. */
export function BodyAreasView({ frame, view }: { frame: Frame; view: View }) {
  const { slug, filters } = frame;
  const { tables, injuries, sides } = view;
  const table = (data: TableData) => <FigureTable table={data} slug={slug} view="body-areas" />;
  return (
    <>
      <Lede note={<SentenceParts parts={view.note} />}>
        <SentenceParts parts={view.sentence} />
      </Lede>
      <CoverageNote coverage={view.coverage} />
      <SidesPicture picture={view.picture} unit={`per ${unitWords[filters.per]}`} />
      {table(tables.areas)}
      {injuries > 0 ? (
        <>
          <LinkRow>
            <TextLink to={view.href}>
              {injuries === 1
                ? "The injury behind it"
                : `The ${injuries.toLocaleString("en-GB")} injuries behind it`}
            </TextLink>
          </LinkRow>
          <Region heading="By side">
            {table(tables.sides)}
            {sides ? (
              <p className="max-w-prose">
                <SentenceParts parts={sides} />
              </p>
            ) : null}
            {table(tables.compared)}
            {tables.compared.rows.length > 4 ? (
              <p className="max-w-prose text-soft">
                Among {tables.compared.rows.length} areas one may well differ between left and right by luck
                alone.
              </p>
            ) : null}
          </Region>
        </>
      ) : null}
      <HowComputed filters={filters} />
    </>
  );
}
