import { AvailabilityList } from "~/features/today/components/availability-list";
import { readToday } from "~/features/today/today.server";
import { memberLoader } from "~/middleware/handlers.server";
import { timeIn } from "~/platform/clock";
import { formatDay } from "~/platform/days";
import { Note, Page, PageHeading, Region, TextLink } from "~/ui";
import type { Route } from "./+types/day-list";

export const meta = () => [{ title: "Day list - Haleside" }];

export const loader = memberLoader(async ({ scope, url }) => {
  const { limited } = await readToday(scope, url);
  const teams = [...new Set(limited.flatMap((athlete) => athlete.teams.map(({ name }) => name)))].sort();
  return {
    groups: [
      ...teams.map((team) => ({
        team,
        athletes: limited.filter((a) => a.teams.some(({ name }) => name === team)),
      })),
      { team: "No team", athletes: limited.filter((a) => a.teams.length === 0) },
    ].filter(({ athletes }) => athletes.length > 0),
    organisation: scope.organisationName,
    base: `/${scope.slug}`,
    today: scope.today,
    timeZone: scope.timeZone,
    printedAt: timeIn(scope.timeZone),
  };
});

/** Who may do what today, by team, for paper. Never why. */
export default function DayList({ loaderData }: Route.ComponentProps) {
  const { groups, organisation, base, today, timeZone, printedAt } = loaderData;
  return (
    <Page width="text">
      <PageHeading
        above={
          <span className="print:hidden">
            <TextLink to={`${base}/today`}>Today</TextLink>
          </span>
        }
        below={`${organisation}, ${formatDay(today, "full")}, as of ${printedAt}. Whoever is not listed is fully available.`}
      >
        Day list
      </PageHeading>
      {groups.length === 0 ? <p>Every athlete is fully available.</p> : null}
      {groups.map(({ team, athletes }) => (
        <Region key={team} heading={team}>
          <AvailabilityList athletes={athletes} timeZone={timeZone} />
        </Region>
      ))}
      <Note kind="attention">
        A list on paper grows old. Later today, or when in doubt, ask the athletic trainer before playing.
      </Note>
    </Page>
  );
}
