import { lazy, type ReactNode, Suspense } from "react";
import { Lede, Region } from "~/ui";
import { FigureTable } from "../components/figure-table";
import { SentenceParts } from "../components/sentence-parts";
import { decimalsFor } from "../figures";
import type { TableData } from "../tables";
import type { Contrast } from "./programme";
import type { ContrastPicture } from "./programme-picture";
import { type ContrastWords, clusterNote, contrastSentence } from "./programme-sentence";
import { methodsOf, onPage } from "./programme-tables";

// Charts reach the browser only where one shows.
const IntervalChart = lazy(() => import("~/ui/charts/interval-chart"));

const keeps = ["plan"];

type Props = {
  slug: string;
  heading: string;
  /** Null: nothing can be compared, for this reason. */
  contrast: Contrast | null;
  reason: string | null;
  withheld: string | null;
  words: ContrastWords;
  picture: ContrastPicture | null;
  tables: (TableData | null)[];
  children?: ReactNode;
};

function Picture({ picture, title }: { picture: ContrastPicture; title: string }) {
  const rates = picture.groups.flatMap(({ points }) => points.flatMap(({ rate }) => rate?.estimate ?? []));
  if (rates.length === 0) return null;
  const lines = picture.groups.reduce((sum, { points }) => sum + points.length * 22 + 28, 90);
  return (
    <Suspense fallback={<div style={{ height: lines }} />}>
      <IntervalChart
        groups={picture.groups}
        unit="per 1000"
        title={title}
        decimals={decimalsFor(rates)}
        max={picture.max}
      />
    </Suspense>
  );
}

/** One comparison: its sentence, its picture, its rates and the ratio by each way of making it. */
export function ProgrammeContrast(given: Props) {
  const { slug, heading, contrast, reason, withheld, words, picture, tables, children } = given;
  const [rates, ratios] = tables;
  const methods = ratios ? methodsOf(ratios) : "";
  return (
    <Region heading={heading}>
      {contrast && !withheld ? (
        <Lede note={clusterNote(contrast)}>
          <SentenceParts parts={contrastSentence(contrast, words)} />
        </Lede>
      ) : (
        <Lede>No comparison: {withheld ?? reason}.</Lede>
      )}
      {children}
      {picture && rates && !withheld ? (
        <Picture picture={picture} title={`${rates.caption}; the table holds the numbers`} />
      ) : null}
      {(contrast?.robust || withheld ? tables : [rates]).map((table) =>
        table ? (
          <FigureTable key={table.id} table={onPage(table)} slug={slug} view="programme" keeps={keeps} />
        ) : null,
      )}
      {methods ? <p className="-mt-3 max-w-prose text-sm text-soft">{methods}</p> : null}
    </Region>
  );
}
