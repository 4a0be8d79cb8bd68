import { useLocation } from "react-router";
import { siteWords } from "~/features/injuries/summary";
import { contactWords, gradeWords, sentenceCase, sessionKindWords } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { Lede, LinkRow, Region, TextLink } from "~/ui";
import { type Column, DataTable } from "~/ui/data-table";
import type { Frame } from "../components/rates-frame";
import { formatCount } from "../figures";
import { injuriesInWords, partWords, peopleInWords } from "../filter-words";
import { searchWith } from "../views";
import type { Records } from "./records.server";

type Line = Records["lines"][number] & { href: string };

const injuryColumns: Column<Line>[] = [
  {
    id: "athlete",
    header: "Athlete",
    rowHeader: true,
    value: ({ name }) => name,
    cell: ({ name, href }) => <TextLink to={href}>{name}</TextLink>,
  },
  { id: "onset", header: "Onset", value: (row) => row.onsetDay, cell: (row) => formatDay(row.onsetDay) },
  {
    id: "site",
    header: "Injury",
    value: ({ bodyArea, side }) => siteWords(bodyArea, side),
    cell: ({ bodyArea, side }) => sentenceCase(siteWords(bodyArea, side)),
  },
  {
    id: "contact",
    header: "Contact",
    value: ({ contact }) => (contact ? contactWords[contact] : null),
    cell: ({ contact }) => (contact ? sentenceCase(contactWords[contact]) : "Not said"),
  },
  { id: "team", header: "Team", value: ({ team }) => team },
  {
    id: "days",
    header: "Days lost",
    numeric: true,
    value: ({ daysLost }) => daysLost,
    cell: ({ daysLost, ongoing }) => (ongoing ? `${daysLost}, ongoing` : daysLost),
  },
];

const reasonColumn: Column<Line> = {
  id: "reason",
  header: "Why it is left out",
  value: ({ reason }) => reason,
};

type Exposure = Records["exposure"][number];

const exposureColumns: Column<Exposure>[] = [
  {
    id: "day",
    header: "Day",
    rowHeader: true,
    value: ({ day }) => day,
    cell: ({ day }) => formatDay(day),
  },
  { id: "team", header: "Team", value: ({ team }) => team },
  {
    id: "kind",
    header: "Session",
    value: ({ kind }) => kind,
    cell: ({ kind }) => sentenceCase(sessionKindWords[kind]),
  },
  {
    id: "grade",
    header: "Exposure",
    value: ({ grade }) => grade,
    cell: ({ grade }) => sentenceCase(gradeWords[grade]),
  },
  {
    id: "aes",
    header: "Athlete-exposures",
    numeric: true,
    value: ({ aes }) => aes,
    cell: ({ aes, grade }) => (grade === "estimated" ? "–" : String(Math.round(aes * 10) / 10)),
  },
  {
    id: "hours",
    header: "Hours",
    numeric: true,
    value: ({ hours }) => hours,
    cell: ({ hours }) => hours.toFixed(1),
  },
];

/** The figure in words: "Girls, 15 to 16: knee injuries with time loss, ongoing". */
function figureWords({ filters }: Frame, { group, severity, ongoing }: Records) {
  const who = peopleInWords(filters);
  return [
    injuriesInWords(filters),
    who,
    partWords.sessions[filters.sessions],
    group ? `${partWords.by[filters.by]}: ${group}` : "",
    severity ? `${severity} days lost` : "",
    ongoing ? "time loss still running" : "",
  ]
    .filter(Boolean)
    .join("; ");
}

/** The injuries and the exposure behind one figure. */
export function RecordsBehind({ frame, records }: { frame: Frame; records: Records }) {
  const { search } = useLocation();
  const { slug } = frame;
  const hidden = records.injuries - records.lines.length;
  const withHref = (lines: Records["lines"]) =>
    lines.map((line) => ({ ...line, href: `/${slug}/injuries/${line.id}` }));
  return (
    <>
      <Lede note={`${sentenceCase(figureWords(frame, records))}. ${frame.season}.`}>
        <strong>
          {records.injuries === 0
            ? "No injury is"
            : records.injuries === 1
              ? "One injury is"
              : `${formatCount(records.injuries)} injuries are`}
        </strong>{" "}
        counted in this figure, over exposure of{" "}
        <strong>
          {formatCount(records.sessions)} {records.sessions === 1 ? "session" : "sessions"}
        </strong>
        .
      </Lede>
      <DataTable
        caption="Injuries counted"
        columns={injuryColumns}
        rows={withHref(records.lines)}
        rowKey={({ id }) => id}
        sortParam="sort-injuries"
        empty="No injury behind this figure."
      />
      {hidden > 0 ? (
        <p className="max-w-prose text-soft">
          {hidden === 1 ? "One more is" : `${hidden} more are`} of athletes whom you no longer cover: counted,
          not named.
        </p>
      ) : null}
      {records.leftOut.length > 0 ? (
        <Region heading="Left out, and why">
          <DataTable
            captionHidden
            caption="Injuries left out of this figure"
            columns={[...injuryColumns, reasonColumn]}
            rows={withHref(records.leftOut)}
            rowKey={({ id }) => id}
            sortParam="sort-left-out"
            empty=""
          />
        </Region>
      ) : null}
      <Region heading="The exposure under it">
        <DataTable
          captionHidden
          caption="Sessions whose exposure stands under this figure"
          columns={exposureColumns}
          rows={records.exposure}
          rowKey={({ day, teamId, kind, grade }) => `${day} ${teamId} ${kind} ${grade}`}
          sortParam="sort-exposure"
          empty="No exposure."
        />
        {records.sessions > records.exposure.length ? (
          <p className="max-w-prose text-soft">
            The latest {records.exposure.length} of {formatCount(records.sessions)}. Choose a team or a month
            for the others.
          </p>
        ) : null}
      </Region>
      <LinkRow>
        <TextLink to={`/${slug}/rates${searchWith(search)}`}>Back to the rates</TextLink>
      </LinkRow>
    </>
  );
}
