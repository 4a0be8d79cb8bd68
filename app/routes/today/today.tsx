import { may, roleNames } from "~/features/accounts/permissions";
import { SentenceParts } from "~/features/rates/components/sentence-parts";
import { seasonSoFar } from "~/features/rates/season-so-far.server";
import { EmergencyCard } from "~/features/sessions/components/emergency-card";
import { AvailabilityList } from "~/features/today/components/availability-list";
import { CoachSession } from "~/features/today/components/coach-session";
import { SessionLines } from "~/features/today/components/session-lines";
import { TaskList } from "~/features/today/components/task-list";
import { counted, joined } from "~/features/today/tasks";
import { readCoachToday, readPeopleTasks, readToday, readWarmUpWeek } from "~/features/today/today.server";
import { memberLoader } from "~/middleware/handlers.server";
import { formatDay } from "~/platform/days";
import { ButtonLink, EmptyState, Lede, Note, Page, PageHeading, Region, TextLink } from "~/ui";
import type { Route } from "./+types/today";

export const meta = () => [{ title: "Today - Haleside" }];

export const loader = memberLoader(async ({ scope, url }) => {
  const { roles } = scope;
  const shared = {
    base: `/${scope.slug}`,
    today: scope.today,
    timeZone: scope.timeZone,
    waitingRoles: scope.unconfirmed.map((role) => roleNames[role]),
    clinical: may(roles, "injuries.read"),
    acts: may(roles, "availability.restrictions"),
    rates: may(roles, "rates.read"),
    imports: may(roles, "imports"),
  };
  if (roles.length === 0) return { ...shared, day: null, coach: null, week: null, soFar: null };
  const onlyCoach = roles.every((role) => role === "coach");
  const day = await readToday(scope, url);
  return {
    ...shared,
    day: { ...day, tasks: [...day.tasks, ...(await readPeopleTasks(scope))] },
    coach: onlyCoach ? await readCoachToday(scope) : null,
    week: may(roles, "warm-ups.write") ? await readWarmUpWeek(scope) : null,
    soFar: await seasonSoFar(scope),
  };
});

type Data = Route.ComponentProps["loaderData"];

/** The page's sentence: what the day holds and what waits. */
function daySentence({ day }: Data) {
  if (!day) return null;
  const { sessions, limited, tasks } = day;
  const held = sessions.filter(({ status }) => status !== "cancelled");
  const unavailable = limited.filter(({ state }) => state === "unavailable").length;
  const waiting = tasks.reduce((sum, group) => sum + group.tasks.length + (group.more?.count ?? 0), 0);
  return (
    <>
      <strong>{counted(held.length, "session")}</strong> today.{" "}
      <strong>{limited.length === 0 ? "Every athlete" : counted(limited.length, "athlete")}</strong>{" "}
      {limited.length === 0
        ? "is fully available"
        : `${limited.length === 1 ? "is" : "are"} not fully available`}
      {unavailable > 0 && unavailable < limited.length ? `, ${unavailable} of them unavailable` : ""}.{" "}
      {waiting > 0 ? (
        <>
          <strong>{counted(waiting, "thing")}</strong> {waiting === 1 ? "waits" : "wait"} for you.
        </>
      ) : (
        "Nothing waits for you."
      )}
    </>
  );
}

/** The coach's own week in one sentence. */
function weekSentence(week: Data["week"]) {
  if (!week) return null;
  const { sessions, recorded, notRecorded, ofRecorded } = week;
  if (sessions === 0) return null;
  const missing =
    notRecorded > 0 ? `, and ${notRecorded} ${notRecorded === 1 ? "has" : "have"} no record` : "";
  return `In the last seven days ${counted(sessions, "session was", "sessions were")} held; the warm-up was done as planned in ${ofRecorded.successes} of ${recorded} recorded${missing}.`;
}

export default function Today({ loaderData }: Route.ComponentProps) {
  const { base, today, timeZone, waitingRoles, day, coach, clinical, acts, rates, imports, soFar } =
    loaderData;
  const sentence = weekSentence(loaderData.week);
  return (
    <Page>
      <PageHeading
        above={formatDay(today, "full")}
        actions={
          day && clinical ? (
            <>
              <ButtonLink to={`${base}/injuries/new`} look="primary">
                Log an injury
              </ButtonLink>
              <ButtonLink to={`${base}/encounters/new`}>Add an encounter</ButtonLink>
            </>
          ) : null
        }
      >
        Today
      </PageHeading>
      {waitingRoles.length > 0 ? (
        <Note kind="attention" title={`Your role as ${joined(waitingRoles)} waits for a medical lead`}>
          It opens clinical records, so a medical lead confirms it first. You need do nothing; ask them if it
          takes long.
        </Note>
      ) : null}
      {coach ? (
        <CoachSession session={coach.session} base={base} today={today} />
      ) : day ? (
        <Lede>{daySentence(loaderData)}</Lede>
      ) : null}
      {day && !coach && day.tasks.length > 0 ? (
        <Region heading="To do next">
          <TaskList groups={day.tasks} />
        </Region>
      ) : null}
      {day ? (
        <>
          {coach && day.sessions.length <= 1 ? null : (
            <Region heading="Today's sessions">
              {day.sessions.length > 0 ? (
                <SessionLines sessions={day.sessions} base={base} />
              ) : (
                <EmptyState
                  title="No session is planned today"
                  as="h3"
                  actions={
                    <>
                      <ButtonLink to={`${base}/sessions/new`}>Add a session</ButtonLink>
                      {imports ? (
                        <TextLink to={`${base}/imports/new?kind=exposure`}>Import exposure</TextLink>
                      ) : null}
                    </>
                  }
                >
                  Sessions belong here, with who took part and for how long: without exposure no rate can be
                  trusted.
                </EmptyState>
              )}
            </Region>
          )}
          <Region heading="Not fully available">
            {day.limited.length > 0 ? (
              <>
                <AvailabilityList athletes={day.limited} timeZone={timeZone} />
                {acts ? (
                  <p className="mt-3">
                    <TextLink to={`${base}/today/day-list`}>Day list to print</TextLink>
                  </p>
                ) : null}
              </>
            ) : (
              <p className="text-soft">Every athlete is fully available today.</p>
            )}
          </Region>
        </>
      ) : null}
      {coach ? (
        <Region heading="If somebody is hurt">
          <p className="mb-4 max-w-prose">
            No athletic trainer there? Report it from here, in under a minute. The athlete is out until a
            clinician says otherwise.
          </p>
          <ButtonLink to={`${base}/report-injury`} look="danger" size="large">
            Report an injury
          </ButtonLink>
          <div className="mt-6">
            <EmergencyCard card={coach.card} />
          </div>
        </Region>
      ) : null}
      {coach && day && day.tasks.length > 0 ? (
        <Region heading="To do next">
          <TaskList groups={day.tasks} />
        </Region>
      ) : null}
      {sentence || rates ? (
        <Region heading={coach ? "Your week" : "The season"}>
          {soFar ? (
            <p className="max-w-prose">
              <SentenceParts parts={soFar} />
            </p>
          ) : null}
          {sentence ? <p className="mt-2 max-w-prose">{sentence}</p> : null}
          <p className="mt-2 flex flex-wrap gap-x-6">
            <TextLink to={`${base}/warm-ups`}>Warm-ups by team</TextLink>
            {rates ? <TextLink to={`${base}/rates`}>Rates of this season</TextLink> : null}
          </p>
        </Region>
      ) : null}
    </Page>
  );
}
