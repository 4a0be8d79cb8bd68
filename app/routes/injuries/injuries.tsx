import { useSearchParams } from "react-router";
import { AvailabilityMark } from "~/features/availability/components/availability-mark";
import { ListFilters } from "~/features/injuries/components/list-filters";
import { listInjuries } from "~/features/injuries/list-injuries.server";
import { severityWords } from "~/features/injuries/summary";
import { bodyAreaWords, sentenceCase } from "~/features/vocabulary";
import { memberLoader } from "~/middleware/handlers.server";
import { formatDay } from "~/platform/days";
import { ButtonLink, EmptyState, Lede, LinkRow, Page, PageHeading, TextLink } from "~/ui";
import { type Column, DataTable } from "~/ui/data-table";
import type { Route } from "./+types/injuries";

export const meta = () => [{ title: "Injuries - Haleside" }];

export const loader = memberLoader(async ({ scope, url }) => {
  const list = await listInjuries(scope, url);
  const base = `/${scope.slug}`;
  return {
    ...list,
    base,
    lines: list.lines.map((line) => ({ ...line, href: `${base}/injuries/${line.id}` })),
  };
});

type Data = Route.ComponentProps["loaderData"];
type Line = Data["lines"][number];

const columns: Column<Line>[] = [
  {
    id: "athlete",
    header: "Athlete",
    rowHeader: true,
    value: (row) => row.sortName,
    cell: (row) => <TextLink to={row.href}>{row.name}</TextLink>,
  },
  { id: "onset", header: "Onset", value: (row) => row.onsetDay, cell: (row) => formatDay(row.onsetDay) },
  {
    id: "site",
    header: "Injury",
    value: (row) => row.site,
    cell: (row) => (
      <>
        {sentenceCase(row.site)}
        {row.what ? <span className="block text-sm text-soft">{row.what}</span> : null}
      </>
    ),
  },
  { id: "team", header: "Team", value: (row) => row.teams || null },
  {
    id: "days",
    header: "Days lost",
    numeric: true,
    value: (row) => row.days,
    cell: (row) => (row.ongoing ? `${row.days}, ongoing` : row.days),
  },
  {
    id: "state",
    header: "Today",
    value: (row) => row.state,
    cell: (row) => <AvailabilityMark state={row.state} />,
  },
  {
    id: "gaps",
    header: "Missing",
    numeric: true,
    value: (row) => row.gaps,
    cell: (row) => (row.gaps === 0 ? "nothing" : row.gaps),
  },
];

const counted = (count: number, one: string, many: string) => `${count} ${count === 1 ? one : many}`;

function Sentence({ data }: { data: Data }) {
  const { lines, filter, total, open, limiting, season, team, athlete } = data;
  const whose = athlete
    ? ` of ${athlete}, of every season`
    : `${season ? ` in season ${season}` : ""}${team ? `, ${team}` : ""}`;
  const narrowed = filter.state !== "all" || filter.area || filter.severity || filter.q;
  const parts = [
    filter.area ? `of the ${bodyAreaWords[filter.area]}` : "",
    filter.severity ? `with ${severityWords[filter.severity]}` : "",
    filter.q ? `matching “${filter.q}”` : "",
  ].filter(Boolean);
  const state = filter.state === "all" ? "" : `${filter.state} `;
  return (
    <Lede
      note={narrowed ? `Of ${counted(total, "injury", "injuries")}${whose} without the filter.` : undefined}
    >
      <strong>
        {lines.length} {state}
        {lines.length === 1 ? "injury" : "injuries"}
      </strong>
      {parts.length > 0 ? ` ${parts.join(", ")}` : ""}
      {whose}
      {lines.length > 0 ? `; ${open} still open, ${limiting} keeping the athlete from full part today` : ""}.
    </Lede>
  );
}

export default function Injuries({ loaderData }: Route.ComponentProps) {
  const { lines, total, filter, base, athlete } = loaderData;
  const [params] = useSearchParams();
  return (
    <Page>
      <PageHeading
        actions={
          <ButtonLink to={`${base}/injuries/new`} look="primary">
            Log an injury
          </ButtonLink>
        }
      >
        Injuries
      </PageHeading>
      {total === 0 ? (
        <EmptyState
          title={athlete ? `No injury of ${athlete} is logged` : "No injury is logged here yet"}
          actions={
            <ButtonLink to={`${base}/injuries/new`} look="primary">
              Log the first injury
            </ButtonLink>
          }
        >
          Injuries of this season and team stand here with their time loss and what is still missing. With the
          exposure of the sessions they give the rates.
        </EmptyState>
      ) : (
        <>
          <Sentence data={loaderData} />
          <ListFilters key={params.toString()} filter={filter} />
          <DataTable
            caption="Injuries, the newest first"
            captionHidden
            columns={columns}
            rows={lines}
            rowKey={(row) => row.id}
            defaultSort="-onset"
            empty="No injury fits this filter. Widen it above."
            csvHref={`${base}/injuries/export.csv?${params}`}
          />
        </>
      )}
      <LinkRow>
        <TextLink to={`${base}/coach-reports`}>Coaches' reports</TextLink>
        <TextLink to={`${base}/encounters/new`}>Note an encounter without an injury</TextLink>
      </LinkRow>
    </Page>
  );
}
