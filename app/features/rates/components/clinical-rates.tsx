import { Lede, LinkRow, Region, TextLink } from "~/ui";
import type { RatesFilters } from "../filters";
import type { RateRow } from "../rates";
import type { Incidence } from "../rates.server";
import { unitWords, writeNote, writeSentence } from "../sentence";
import { CoverageNote } from "./coverage-note";
import { FilterSentence } from "./filter-sentence";
import { HowComputed } from "./how-computed";
import { LeftOut } from "./left-out";
import { RatesPicture } from "./rates-picture";
import { RatesTable } from "./rates-table";
import { SentenceParts } from "./sentence-parts";

type Props = {
  incidence: Incidence & { rates: NonNullable<Incidence["rates"]>; period: NonNullable<Incidence["period"]> };
  filters: RatesFilters;
  scopeName: string;
  csvHref: string;
  injuriesHref: string;
};

const definitionTitles: Record<RatesFilters["injuries"], string> = {
  "time-loss": "Injuries with time loss",
  "medical-attention": "Injuries that needed attention",
};

/** The rates of the clinical roles: the sentence, the picture, the table, and what is left out. */
export function ClinicalRates({ incidence, filters, scopeName, csvHref, injuriesHref }: Props) {
  const { rates, club, period } = incidence;
  const title = `${definitionTitles[filters.injuries]} per ${unitWords[filters.per]}, ${period.season}`;
  const reference: RateRow = club ?? rates.total;
  const total = { ...rates.total, label: club ? scopeName : "All together" };
  const counted = rates.total.injuries ?? 0;
  const hasRates = rates.rows.some(({ rate }) => rate);
  return (
    <>
      <FilterSentence filters={filters} />
      <Lede note={<SentenceParts parts={writeNote(rates, filters)} />}>
        <SentenceParts parts={writeSentence(rates, filters, scopeName)} />
      </Lede>
      <CoverageNote coverage={rates.coverage} />
      {hasRates ? (
        <div className="border-0 border-t border-line pt-2">
          <RatesPicture
            rows={rates.rows}
            by={filters.by}
            reference={reference}
            referenceName="all teams"
            title={`${title}: rates with their 95 % intervals; the table below holds the numbers.`}
          />
        </div>
      ) : null}
      <RatesTable
        caption={title}
        rows={rates.rows}
        totals={club ? [total, club] : [total]}
        unit={filters.per}
      />
      <LinkRow>
        <a href={csvHref} download className="text-lagoon underline underline-offset-4">
          Download this table (CSV)
        </a>
        {counted > 0 ? (
          <TextLink to={injuriesHref}>
            {counted === 1
              ? "The injury behind it"
              : `The ${counted.toLocaleString("en-GB")} injuries behind it`}
          </TextLink>
        ) : null}
      </LinkRow>
      {rates.ongoing > 0 ? (
        <p className="max-w-prose text-soft">
          {rates.ongoing === 1 ? "One of them is" : `${rates.ongoing} of them are`} ongoing: time loss is
          counted to today.
        </p>
      ) : null}
      <HowComputed filters={filters} />
      <Region heading="What is left out">
        <LeftOut leftOut={rates.leftOut} sessionsLeftOut={rates.sessionsLeftOut} />
      </Region>
    </>
  );
}
