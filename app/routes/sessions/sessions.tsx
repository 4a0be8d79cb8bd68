import { useSearchParams } from "react-router";
import { resolveViewing, viewedTeamIds } from "~/features/accounts/viewing.server";
import { SessionList, SessionsByDay } from "~/features/sessions/components/session-list";
import { countOf } from "~/features/sessions/session-words";
import { listSessions, listUnconfirmed } from "~/features/sessions/sessions.server";
import { memberLoader } from "~/middleware/handlers.server";
import { addDays, weekStart } from "~/platform/clock";
import { formatDay, parseDay } from "~/platform/days";
import { ButtonLink, EmptyState, Lede, LinkRow, Page, PageHeading, Pager, Region, TextLink } from "~/ui";
import { read } from "~db/client.server";
import type { Route } from "./+types/sessions";

const pageSize = 100;

/** The Monday of the week in the address, else of today, kept inside the season. */
function chosenWeek(url: URL, today: string, season: { startsOn: string; endsOn: string } | null) {
  const asked = parseDay(url.searchParams.get("week") ?? "");
  if (asked.ok) return weekStart(asked.day);
  if (season && today > season.endsOn) return weekStart(season.endsOn);
  return weekStart(today);
}

export const loader = memberLoader(async ({ scope, url }) =>
  read(scope, async (tx) => {
    const viewing = await resolveViewing(tx, url);
    const teamIds = viewedTeamIds(viewing);
    const { season } = viewing;
    const wholeSeason = url.searchParams.get("show") === "season" && season !== null;
    const monday = chosenWeek(url, scope.today, season);
    const range =
      wholeSeason && season
        ? { from: season.startsOn, to: season.endsOn, teamIds }
        : { from: monday, to: addDays(monday, 6), teamIds };
    const page = Math.max(1, Math.trunc(Number(url.searchParams.get("page"))) || 1);
    const listed = await listSessions(
      tx,
      range,
      wholeSeason ? { newestFirst: true, limit: pageSize, offset: (page - 1) * pageSize } : {},
    );
    const unconfirmed = await listUnconfirmed(tx, scope, teamIds);
    const earlier = unconfirmed.filter(({ day }) => wholeSeason || day < range.from);
    return {
      ...listed,
      page,
      wholeSeason,
      season: season?.name ?? null,
      monday,
      weekBefore: addDays(monday, -7),
      weekAfter: addDays(monday, 7),
      thisWeek: weekStart(scope.today),
      unconfirmed: earlier.slice(-10),
      unconfirmedCount: unconfirmed.length,
      teamCount: teamIds.length,
      base: `/${scope.slug}/sessions`,
      teamId: viewing.team?.id ?? null,
    };
  }),
);

export const meta = () => [{ title: "Sessions - Haleside" }];

type Data = Route.ComponentProps["loaderData"];

/** The address of the same list with other parameters; season and team stay. */
function useListAddress() {
  const [search] = useSearchParams();
  return (more: Record<string, string>) => {
    const params = new URLSearchParams(more);
    for (const name of ["season", "team"]) {
      const value = search.get(name);
      if (value) params.set(name, value);
    }
    return { search: params.toString() };
  };
}

function Sentence({ data }: { data: Data }) {
  const { sessions, total, wholeSeason, monday, thisWeek, unconfirmedCount } = data;
  const held = sessions.filter(({ status }) => status === "held" || status === "abandoned");
  const recorded = held.filter(({ exposureGrade }) => exposureGrade === "recorded");
  const when = wholeSeason
    ? `Season ${data.season}`
    : monday === thisWeek
      ? "This week"
      : `The week from ${formatDay(monday, "long")}`;
  return (
    <Lede
      note={
        unconfirmedCount > 0
          ? `${countOf(unconfirmedCount, "session")} in all ${unconfirmedCount === 1 ? "waits" : "wait"} to be confirmed as held or cancelled; until then ${unconfirmedCount === 1 ? "it counts" : "they count"} in no rate.`
          : undefined
      }
    >
      {when} has <strong>{countOf(total, "session")}</strong>
      {wholeSeason || held.length === 0 ? (
        "."
      ) : (
        <>
          ; {held.length} {held.length === 1 ? "was" : "were"} held and{" "}
          <strong>
            {recorded.length} of {held.length}
          </strong>{" "}
          {held.length === 1 ? "has" : "have"} attendance by athlete.
        </>
      )}
    </Lede>
  );
}

export default function Sessions({ loaderData }: Route.ComponentProps) {
  const { sessions, base, monday, thisWeek, wholeSeason, teamId, unconfirmed, total, page } = loaderData;
  const address = useListAddress();
  return (
    <Page>
      <PageHeading
        actions={
          <ButtonLink look="primary" to={`${base}/new${teamId ? `?team=${teamId}` : ""}`}>
            Add a session
          </ButtonLink>
        }
      >
        Sessions
      </PageHeading>
      <Sentence data={loaderData} />
      <nav aria-label="Weeks">
        <LinkRow>
          <TextLink to={address({ week: loaderData.weekBefore })}>Week before</TextLink>
          {monday === thisWeek && !wholeSeason ? null : <TextLink to={address({})}>This week</TextLink>}
          <TextLink to={address({ week: loaderData.weekAfter })}>Week after</TextLink>
          {wholeSeason ? null : <TextLink to={address({ show: "season" })}>Whole season</TextLink>}
        </LinkRow>
      </nav>
      {sessions.length > 0 ? (
        <SessionsByDay sessions={sessions} base={base} />
      ) : (
        <EmptyState
          title="No sessions here"
          actions={<ButtonLink to={`${base}/new`}>Add a session</ButtonLink>}
        >
          <p>
            Sessions are what exposure is counted from: trainings, matches and strength work, with who took
            part. Add one here, or import a season's from a file.
          </p>
        </EmptyState>
      )}
      {wholeSeason ? <Pager page={page} pageSize={pageSize} total={total} what="sessions" /> : null}
      {unconfirmed.length > 0 ? (
        <Region heading="Earlier sessions to confirm">
          <SessionList sessions={unconfirmed} base={base} withDay />
        </Region>
      ) : null}
    </Page>
  );
}
