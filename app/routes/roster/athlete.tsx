import { redirect } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { may } from "~/features/accounts/permissions";
import { ActionAlerts } from "~/features/roster/components/action-alerts";
import { AthleteFacts } from "~/features/roster/components/athlete-facts";
import { AthleteState } from "~/features/roster/components/athlete-state";
import { TeamsOverTime } from "~/features/roster/components/teams-over-time";
import { alertSchema, joinTeamSchema, leaveTeamSchema } from "~/features/roster/roster.schema";
import { addAlert, readAthlete, removeAlert } from "~/features/roster/roster.server";
import { joinTeam, leaveTeam } from "~/features/roster/team-memberships.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { notFound } from "~/platform/errors";
import { ButtonLink, Page, PageHeading, Region, TextLink } from "~/ui";
import type { Route } from "./+types/athlete";

export const meta = ({ loaderData }: Route.MetaArgs) => [
  {
    title: `${loaderData ? `${loaderData.athlete.givenName} ${loaderData.athlete.familyName}` : "Athlete"} - Haleside`,
  },
];

export const loader = memberLoader(async ({ scope, url, id }) => {
  const athleteId = id("athlete");
  return {
    ...(await readAthlete(scope, url, athleteId)),
    base: `/${scope.slug}`,
    today: scope.today,
    timeZone: scope.timeZone,
    mayWrite: may(scope.roles, "roster.write"),
    contacts: may(scope.roles, "roster.contacts"),
    clinical: may(scope.roles, "injuries.read"),
  };
});

export const action = memberAction(async ({ scope, form, id }) => {
  const athleteId = id("athlete");
  const input = formObject(form);
  switch (form.get("intent")) {
    case "join":
      await joinTeam(scope, athleteId, joinTeamSchema.parse(input));
      break;
    case "leave":
      await leaveTeam(scope, athleteId, leaveTeamSchema.parse(input));
      break;
    case "alert":
      await addAlert(scope, athleteId, alertSchema.parse(input));
      break;
    case "end-alert":
      await removeAlert(scope, athleteId, String(form.get("alert")));
      break;
    default:
      throw notFound("That action");
  }
  return redirect(`/${scope.slug}/roster/${athleteId}`);
});

export default function Athlete({ loaderData, actionData }: Route.ComponentProps) {
  const { athlete, entries, alerts, guardians, exposure, season, state } = loaderData;
  const { teams, base, today, timeZone, mayWrite, contacts, clinical } = loaderData;
  const name = `${athlete.givenName} ${athlete.familyName}`;
  const here = `${base}/roster/${athlete.id}`;
  const current = entries.filter(({ toDay }) => !toDay || toDay >= today).map(({ team }) => team);
  return (
    <Page>
      <PageHeading
        below={current.length > 0 ? current.join(", ") : athlete.visitor ? "Visitor" : "On no team today"}
        actions={
          <>
            {clinical ? (
              <ButtonLink to={`${base}/injuries/new?athlete=${athlete.id}`} look="primary">
                Log an injury
              </ButtonLink>
            ) : null}
            {mayWrite ? <ButtonLink to={`${here}/edit`}>Edit</ButtonLink> : null}
          </>
        }
      >
        {name}
      </PageHeading>

      <AthleteState state={state} timeZone={timeZone} />
      {clinical ? (
        <p className="mt-3 flex flex-wrap gap-x-6">
          <TextLink to={`${here}/availability`}>Change availability</TextLink>
          <TextLink to={`${base}/injuries?athlete=${athlete.id}`}>Injuries of this athlete</TextLink>
        </p>
      ) : null}

      <ActionAlerts alerts={alerts} mayWrite={mayWrite} actionData={actionData} />
      {contacts ? (
        <AthleteFacts
          athlete={athlete}
          guardians={guardians}
          exposure={exposure}
          season={season}
          here={here}
          today={today}
        />
      ) : null}
      <Region heading="Teams over time">
        <TeamsOverTime
          entries={entries}
          teams={teams}
          today={today}
          mayWrite={mayWrite}
          actionData={actionData}
        />
      </Region>
    </Page>
  );
}
