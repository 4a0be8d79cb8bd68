import { redirect, type ShouldRevalidateFunctionArgs } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { EmergencyCard } from "~/features/sessions/components/emergency-card";
import { SessionFacts, TookPart } from "~/features/sessions/components/session-facts";
import { SessionFields } from "~/features/sessions/components/session-fields";
import { SessionOutcome } from "~/features/sessions/components/session-outcome";
import { openSession, submitSession } from "~/features/sessions/session-page.server";
import { sessionMoment, sessionTitle } from "~/features/sessions/session-words";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { Button, ButtonLink, Disclosure, Form, Page, PageHeading, Region } from "~/ui";
import { read } from "~db/client.server";
import type { Route } from "./+types/session";

export const loader = memberLoader(({ scope, id }) =>
  read(scope, (tx) => openSession(tx, scope, id("session"))),
);

export const action = memberAction(async ({ scope, id, form }) => {
  await submitSession(scope, id("session"), formObject(form));
  throw redirect(`/${scope.slug}/sessions/${id("session")}`);
});

/** After a conflict the page shows what is stored now. */
export const shouldRevalidate = ({ actionStatus, defaultShouldRevalidate }: ShouldRevalidateFunctionArgs) =>
  actionStatus === 409 || defaultShouldRevalidate;

export const meta = ({ loaderData }: Route.MetaArgs) => [
  {
    title: `${loaderData ? `${sessionTitle(loaderData.session)}, ${loaderData.session.teamName}` : "Session"} - Haleside`,
  },
];

export default function Session({ loaderData, actionData }: Route.ComponentProps) {
  const { session, athletes, exposure, card, venues, mayEdit, mayRecord, mayWarmUp, dayHasCome } = loaderData;
  const open = dayHasCome && session.state !== "cancelled";
  const values = actionData?.values ?? null;
  const intent = values?.intent;
  const refused = (name: string) => (intent === name && actionData ? actionData : {});
  const base = { ...session, day: session.day };
  return (
    <Page width="text">
      <PageHeading above={sessionMoment(session)} below={session.teamName}>
        {sessionTitle(session)}
      </PageHeading>
      {open ? (
        <div className="mb-6 flex flex-col gap-3 sm:flex-row">
          {mayWarmUp ? (
            <ButtonLink look="primary" size="large" to="warm-up">
              Warm-up
            </ButtonLink>
          ) : null}
          {mayRecord ? (
            <ButtonLink size="large" to="attendance">
              Attendance
            </ButtonLink>
          ) : null}
        </div>
      ) : null}
      <SessionFacts session={session} exposure={exposure} />
      {mayRecord ? <SessionOutcome session={session} dayHasCome={dayHasCome} refused={refused} /> : null}
      <Region heading="Who took part">
        <TookPart session={session} athletes={athletes} />
      </Region>
      <Region heading="Emergency card">
        <EmergencyCard card={card} />
      </Region>
      {mayEdit ? (
        <Region heading="What was planned">
          <Disclosure summary="Change kind, day, start, minutes, surface or venue" open={intent === "edit"}>
            <Form {...refused("edit")} idPrefix="edit" key={session.version}>
              <input type="hidden" name="base" value={JSON.stringify(loaderData.editBase)} />
              <SessionFields venues={venues} values={base} />
              <Button look="primary" name="intent" value="edit">
                Save
              </Button>
            </Form>
          </Disclosure>
        </Region>
      ) : null}
    </Page>
  );
}
