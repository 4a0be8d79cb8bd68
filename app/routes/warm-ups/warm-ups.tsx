import { resolveViewing, viewedTeamIds } from "~/features/accounts/viewing.server";
import { skipReasonWords } from "~/features/vocabulary";
import { percent, reasonsOf } from "~/features/warm-ups/compliance-words";
import { ComplianceSentence } from "~/features/warm-ups/components/compliance-sentence";
import { ComplianceTable } from "~/features/warm-ups/components/compliance-table";
import { ProgrammeBlocks } from "~/features/warm-ups/components/programme-blocks";
import { SeasonLine, SeasonLineKey } from "~/features/warm-ups/components/season-line";
import { complianceByTeam, complianceTogether, programmesOf } from "~/features/warm-ups/warm-ups.server";
import { memberLoader } from "~/middleware/handlers.server";
import { Disclosure, EmptyState, Page, PageHeading, Region } from "~/ui";
import { read } from "~db/client.server";
import type { SkipReason } from "~db/schema/codes";
import type { Route } from "./+types/warm-ups";

/** Sessions on a team's line when all teams are shown; one team shows its whole season. */
const recent = 30;

export const loader = memberLoader(async ({ scope, url }) =>
  read(scope, async (tx) => {
    const viewing = await resolveViewing(tx, url);
    const teamIds = viewedTeamIds(viewing);
    const { season, team } = viewing;
    const teams = season
      ? await complianceByTeam(tx, { from: season.startsOn, to: season.endsOn, teamIds })
      : [];
    const shown = team ? undefined : -recent;
    return {
      slug: scope.slug,
      season: season?.name ?? null,
      whose: team ? team.name : scope.teams === "all" ? "All teams" : "Your teams",
      one: team !== null,
      together: complianceTogether(teams),
      teams: teams.map(({ sessions, ...rest }) => ({ ...rest, sessions: sessions.slice(shown ?? 0) })),
      programmes: await programmesOf(tx, teamIds),
    };
  }),
);

export const meta = () => [{ title: "Warm-ups - Haleside" }];

function Reasons({ together }: { together: Route.ComponentProps["loaderData"]["together"] }) {
  const reasons = reasonsOf(together);
  if (reasons.length === 0) return <p className="text-soft">No warm-up was entered as skipped.</p>;
  return (
    <table className="w-full max-w-[30rem] text-left">
      <caption className="mb-2 text-left text-soft">
        Of {together.skipped} skipped warm-ups, by the reason entered
      </caption>
      <thead className="sr-only">
        <tr>
          <th scope="col">Reason</th>
          <th scope="col">Warm-ups skipped</th>
        </tr>
      </thead>
      <tbody>
        {reasons.map(([reason, count]) => (
          <tr key={reason} className="border-0 border-b border-line">
            <th scope="row" className="w-40 py-2 font-normal">
              {skipReasonWords[reason as SkipReason]}
            </th>
            <td className="py-2">
              <span className="flex items-center gap-3">
                <span
                  aria-hidden="true"
                  className="h-1.5 rounded-sm bg-ink"
                  style={{ width: `${(count / (reasons[0]?.[1] ?? count)) * 60}%` }}
                />
                {count}
                <span className="sr-only">, {percent(count / together.skipped)}</span>
              </span>
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

const definitions = [
  "Session compliance: sessions with at least the target share of blocks done / sessions held.",
  "Weekly dose: warm-ups with at least one block / weeks in which the team held a session.",
  "Completeness: mean share of the five blocks, over the warm-ups done in full or in part.",
  "Athlete dose: warmed-up participations / participations, where attendance is recorded.",
  "Intervals: 95 %, Wilson for shares, exact Poisson for the weekly dose. Sessions not confirmed as held count only once their warm-up is recorded as done or skipped.",
];

export default function WarmUps({ loaderData }: Route.ComponentProps) {
  const { together, teams, programmes, whose, season, slug, one } = loaderData;
  return (
    <Page>
      <PageHeading above={season ? `Season ${season}` : undefined}>Warm-ups</PageHeading>
      {teams.length === 0 ? (
        <EmptyState title="No warm-ups yet">
          <p>
            Each session of a team gets a warm-up record: which of the five blocks were done, or why it was
            skipped. Once a team has sessions, this page shows whether the programme happens.
          </p>
        </EmptyState>
      ) : (
        <>
          <ComplianceSentence compliance={together} whose={whose} />
          <Region
            heading={one ? "The season, session by session" : `The last ${recent} sessions of each team`}
          >
            <SeasonLineKey />
            {teams.map(({ teamId, teamName, sessions }) => (
              <section key={teamId} className="mt-4">
                <h3 className="font-medium">{teamName}</h3>
                <SeasonLine sessions={sessions} slug={slug} team={teamName} />
              </section>
            ))}
          </Region>
          <Region heading="By team">
            <ComplianceTable teams={teams} />
            <Disclosure summary="What the measures mean">
              <ul className="max-w-prose space-y-2">
                {definitions.map((words) => (
                  <li key={words}>{words}</li>
                ))}
              </ul>
            </Disclosure>
          </Region>
          <Region heading="Why warm-ups were skipped">
            <Reasons together={together} />
          </Region>
        </>
      )}
      {programmes.map((programme) => (
        <Region key={`${programme.id} ${programme.version}`} heading={programme.name}>
          <p className="mb-2 text-soft">
            Version {programme.version}, followed by{" "}
            {teams
              .filter(({ teamId }) => programme.teamIds.includes(teamId))
              .map(({ teamName }) => teamName)
              .join(", ")}
            .
          </p>
          <ProgrammeBlocks programme={programme} />
        </Region>
      ))}
    </Page>
  );
}
