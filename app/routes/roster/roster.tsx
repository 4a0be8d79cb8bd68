import { Form, useSearchParams } from "react-router";
import { may } from "~/features/accounts/permissions";
import { rosterQuerySchema } from "~/features/roster/roster.schema";
import { listRoster, rosterPageSize } from "~/features/roster/roster.server";
import { sexWords } from "~/features/vocabulary";
import { memberLoader } from "~/middleware/handlers.server";
import { formatDay } from "~/platform/days";
import { Button, ButtonLink, EmptyState, LinkRow, Page, PageHeading, Pager, TextLink } from "~/ui";
import { type Column, DataTable } from "~/ui/data-table";
import type { Sex } from "~db/schema/codes";
import type { Route } from "./+types/roster";

export const meta = () => [{ title: "Roster - Haleside" }];

export const loader = memberLoader(async ({ scope, url }) => {
  const query = rosterQuerySchema.parse(Object.fromEntries(url.searchParams));
  const roster = await listRoster(scope, url, query);
  return {
    ...roster,
    query,
    pageSize: rosterPageSize,
    base: `/${scope.slug}`,
    mayWrite: may(scope.roles, "roster.write"),
    mayImport: may(scope.roles, "imports"),
  };
});

type Row = Route.ComponentProps["loaderData"]["rows"][number] & { href: string };

const nameColumn: Column<Row> = {
  id: "name",
  header: "Athlete",
  rowHeader: true,
  value: (row) => `${row.familyName} ${row.givenName}`,
  cell: (row) => (
    <TextLink to={row.href}>
      {row.givenName} {row.familyName}
    </TextLink>
  ),
};
const teamsColumn: Column<Row> = {
  id: "teams",
  header: "Teams today",
  value: (row) => row.teams,
  cell: (row) => row.teams ?? (row.visitor ? "visitor" : "no team"),
};
const columnsForContacts: Column<Row>[] = [
  nameColumn,
  { id: "number", header: "Number", value: (row) => row.number, cell: (row) => row.number ?? "none" },
  teamsColumn,
  {
    id: "born",
    header: "Born",
    value: (row) => row.dateOfBirth,
    cell: (row) => (row.dateOfBirth ? formatDay(row.dateOfBirth) : "not known"),
  },
  { id: "sex", header: "Sex", value: (row) => row.sex, cell: (row) => sexWords[row.sex as Sex] },
];
const columnsForCoaches = [nameColumn, teamsColumn];

const showWords = {
  current: "on a team today",
  "no-team": "without a team",
  visitors: "visitors and try-outs",
  archived: "archived",
};

function useShown() {
  const [params] = useSearchParams();
  return (show: string) => {
    const changed = new URLSearchParams(params);
    changed.set("show", show);
    changed.delete("page");
    return `?${changed}`;
  };
}

export default function Roster({ loaderData }: Route.ComponentProps) {
  const { rows, total, team, query, base, mayWrite, mayImport, contacts, pageSize } = loaderData;
  const shownHref = useShown();
  const [params] = useSearchParams();
  const sentence =
    query.show === "current"
      ? `${total} ${total === 1 ? "athlete" : "athletes"} on ${team ? team.name : "the teams"} today`
      : `${total} ${total === 1 ? "athlete" : "athletes"}, ${showWords[query.show]}`;
  return (
    <Page>
      <PageHeading
        below={query.q ? `${sentence} match “${query.q}”.` : `${sentence}.`}
        actions={
          mayWrite ? (
            <>
              <ButtonLink to={`${base}/roster/new`} look="primary">
                Add an athlete
              </ButtonLink>
              {mayImport ? (
                <ButtonLink to={`${base}/imports/new?kind=roster`}>Import a roster</ButtonLink>
              ) : null}
            </>
          ) : null
        }
      >
        Roster
      </PageHeading>
      <Form method="get" role="search" className="mb-5 flex flex-wrap items-end gap-3">
        {["season", "team", "show"].map((name) =>
          params.get(name) ? (
            <input key={name} type="hidden" name={name} value={params.get(name) ?? ""} />
          ) : null,
        )}
        <label className="block">
          <span className="mb-1 block font-medium">Find by name{contacts ? " or number" : ""}</span>
          <input
            type="search"
            name="q"
            defaultValue={query.q}
            className="min-h-target w-full rounded-md border border-edge bg-paper px-3.5 sm:w-80"
          />
        </label>
        <Button>Find</Button>
      </Form>
      {contacts ? (
        <LinkRow>
          {(Object.keys(showWords) as (keyof typeof showWords)[]).map((show) =>
            show === query.show ? (
              <strong key={show} className="font-medium">
                {showWords[show]}
              </strong>
            ) : (
              <TextLink key={show} to={shownHref(show)}>
                {showWords[show]}
              </TextLink>
            ),
          )}
        </LinkRow>
      ) : null}
      {total === 0 && !query.q && query.show === "current" ? (
        <EmptyState
          title={team ? `Nobody is on ${team.name} today` : "The roster is empty"}
          actions={
            mayImport ? (
              <>
                <ButtonLink to={`${base}/imports/new?kind=roster`} look="primary">
                  Import a roster
                </ButtonLink>
                <TextLink to={`${base}/imports/templates/roster`} reloadDocument>
                  Download a sample file
                </TextLink>
              </>
            ) : null
          }
        >
          Athletes with their teams belong here. From the roster, Haleside knows whom to offer for a session,
          whom to count and which families to tell.
        </EmptyState>
      ) : (
        <>
          <DataTable
            caption="Athletes"
            captionHidden
            columns={contacts ? columnsForContacts : columnsForCoaches}
            rows={rows.map((row) => ({ ...row, href: `${base}/roster/${row.id}` }))}
            rowKey={(row) => row.id}
            sortedByServer
            empty={`Nobody here is called “${query.q}”. Check the spelling, or look among the archived athletes.`}
          />
          <Pager page={query.page} pageSize={pageSize} total={total} what="athletes" />
        </>
      )}
    </Page>
  );
}
