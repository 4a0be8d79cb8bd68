import { Link } from "react-router";
import { type HistoryRow, importSummary, importTitle, stateWords } from "~/features/imports/components/words";
import { listHistory } from "~/features/imports/imports.server";
import { memberLoader } from "~/middleware/handlers.server";
import { dayIn, timeIn } from "~/platform/clock";
import { formatDay } from "~/platform/days";
import { ButtonLink, EmptyState, Lede, Page, PageHeading, Pager, TextLink } from "~/ui";
import { type Column, DataTable } from "~/ui/data-table";
import type { Route } from "./+types/imports";

export const meta: Route.MetaFunction = () => [{ title: "Imports - Haleside" }];

export const loader = memberLoader(async ({ scope, url }) => {
  const page = Math.max(1, Math.trunc(Number(url.searchParams.get("page")) || 1));
  const { rows, ...paging } = await listHistory(scope, page);
  return {
    ...paging,
    coversAll: scope.teams === "all",
    rows: rows.map(
      ({ createdAt, ...row }): HistoryRow => ({
        ...row,
        day: dayIn(scope.timeZone, createdAt),
        time: timeIn(scope.timeZone, createdAt),
      }),
    ),
  };
});

const columns: Column<HistoryRow>[] = [
  {
    id: "file",
    header: "File",
    rowHeader: true,
    cell: (row) => (
      <Link
        to={row.id}
        className="inline-flex min-h-target items-center break-all text-lagoon underline underline-offset-4"
      >
        {row.fileName}
      </Link>
    ),
  },
  { id: "kind", header: "Holds", cell: (row) => row.kind },
  { id: "state", header: "State", cell: (row) => stateWords[row.state] ?? row.state },
  { id: "rows", header: "Rows", cell: (row) => importSummary(row.counts) },
  { id: "by", header: "By", cell: (row) => row.by ?? "–" },
  {
    id: "when",
    header: "When",
    cell: (row) => <span className="whitespace-nowrap">{`${formatDay(row.day)}, ${row.time}`}</span>,
  },
];

/** Who imported which file, when, and what came of it. */
export default function Imports({ loaderData }: Route.ComponentProps) {
  const { rows, total, page, pageSize, coversAll } = loaderData;
  const start = (
    <ButtonLink look="primary" to="new">
      Import a file
    </ButtonLink>
  );
  if (total === 0) {
    return (
      <Page>
        <PageHeading>Imports</PageHeading>
        <EmptyState title="No file has been imported yet" actions={start}>
          <p>
            A roster brings athletes, their teams and their guardians. Exposure brings who took part in which
            session: without it no rate can be worked out.
          </p>
          <p>
            To see the shape, download the template of a{" "}
            <TextLink reloadDocument to="templates/roster">
              roster
            </TextLink>{" "}
            or of{" "}
            <TextLink reloadDocument to="templates/exposure">
              exposure
            </TextLink>
            .
          </p>
        </EmptyState>
      </Page>
    );
  }
  const unfinished = rows.filter(({ state }) => state === "needs_answers" || state === "previewed");
  return (
    <Page>
      <PageHeading actions={start}>Imports</PageHeading>
      <Lede note={coversAll ? undefined : "You see your own imports."}>
        {importTitle(total, unfinished.length)}
      </Lede>
      <DataTable
        caption="Imports, newest first"
        captionHidden
        columns={columns}
        rows={rows}
        rowKey={(row) => row.id}
        empty="No imports on this page."
        sortedByServer
      />
      <Pager page={page} pageSize={pageSize} total={total} what="imports" />
    </Page>
  );
}
