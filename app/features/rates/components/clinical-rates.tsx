import { useLocation } from "react-router";
import { Lede, LinkRow, Region, TextLink } from "~/ui";
import { injuriesInWords } from "../filter-words";
import { splitsExposure } from "../filters";
import { referenceNameOf } from "../picture";
import type { RateRow } from "../rates";
import type { Incidence } from "../rates.server";
import { unitWords, writeNote, writeSentence } from "../sentence";
import { searchWith } from "../views";
import { CoverageNote } from "./coverage-note";
import { HowComputed } from "./how-computed";
import { LeftOut } from "./left-out";
import type { Frame } from "./rates-frame";
import { RatesPicture } from "./rates-picture";
import { RatesTable } from "./rates-table";
import { SentenceParts } from "./sentence-parts";

const capital = (words: string) => words.charAt(0).toUpperCase() + words.slice(1);

/** The incidence of the clinical roles: the sentence, the picture, the table, and what is left out. */
export function ClinicalRates({ frame, incidence }: { frame: Frame; incidence: Incidence }) {
  const { search } = useLocation();
  const { rates, club, isPart, reportedWeeks } = incidence;
  const { filters, scopeName, slug } = frame;
  const season = filters.by === "season" ? "all seasons" : frame.season;
  const title = `${capital(injuriesInWords(filters))} per ${unitWords[filters.per]}, ${season}`;
  const reference: RateRow = club ?? rates.total;
  const total = { ...rates.total, label: club ? scopeName : "All together" };
  const counted = rates.total.injuries ?? 0;
  const hasRates = rates.rows.some(({ rate }) => rate);
  const recordsOf = (changes: Record<string, string>) =>
    `/${slug}/rates/records${searchWith(search, { by: filters.by, ...changes })}`;
  return (
    <>
      <Lede note={<SentenceParts parts={writeNote(rates, filters, reportedWeeks)} />}>
        <SentenceParts parts={writeSentence(rates, filters, scopeName)} />
      </Lede>
      <CoverageNote coverage={rates.coverage} />
      {hasRates ? (
        <div className="border-0 border-t border-line pt-2">
          <RatesPicture
            rows={rates.rows}
            by={filters.by}
            // Groups of injuries share one exposure: the whole's rate is their sum, not a yardstick.
            reference={splitsExposure(filters.by) ? reference : null}
            referenceName={referenceNameOf(incidence, scopeName)}
            title={`${title}: rates with their 95 % intervals; the table below holds the numbers.`}
          />
        </div>
      ) : null}
      <RatesTable
        caption={title}
        rows={rates.rows}
        totals={club ? [total, club] : [total]}
        unit={filters.per}
        recordsOf={(row) => recordsOf({ group: row.key })}
      />
      {isPart && !club ? (
        <p className="max-w-prose text-soft">
          The rate of all teams is not shown here: with your own teams taken off, it could give one other
          team's numbers away.
        </p>
      ) : null}
      <LinkRow>
        <a
          href={`/${slug}/rates.csv${searchWith(search)}`}
          download
          className="text-lagoon underline underline-offset-4"
        >
          Download this table (CSV)
        </a>
        {counted > 0 ? (
          <TextLink to={recordsOf({})}>
            {counted === 1
              ? "The injury behind it"
              : `The ${counted.toLocaleString("en-GB")} injuries behind it`}
          </TextLink>
        ) : null}
      </LinkRow>
      {rates.ongoing > 0 ? (
        <p className="max-w-prose text-soft">
          {counted === 1
            ? "It is"
            : rates.ongoing === 1
              ? "One of them is"
              : `${rates.ongoing.toLocaleString("en-GB")} of them are`}{" "}
          ongoing: time loss is counted to today.
        </p>
      ) : null}
      <HowComputed filters={filters} />
      <Region heading="What is left out">
        <LeftOut
          leftOut={rates.leftOut}
          sessionsLeftOut={rates.sessionsLeftOut}
          silentExposure={rates.silentExposure}
          unit={filters.per}
        />
      </Region>
    </>
  );
}
