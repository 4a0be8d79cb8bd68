import { data, type ShouldRevalidateFunctionArgs } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { EmergencyCard } from "~/features/sessions/components/emergency-card";
import { ProgrammeBlocks } from "~/features/warm-ups/components/programme-blocks";
import { RecordStatus } from "~/features/warm-ups/components/record-status";
import { useWarmUpRecord } from "~/features/warm-ups/components/use-warm-up-record";
import { type PostedAnswer, WarmUpBoard } from "~/features/warm-ups/components/warm-up-board";
import { openWarmUpPage, submitWarmUp } from "~/features/warm-ups/warm-up-page.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { formValues, LinkRow, Note, Page, Region, TextLink } from "~/ui";
import { read } from "~db/client.server";
import type { Route } from "./+types/warm-up";

export const loader = memberLoader(({ scope, id }) =>
  read(scope, (tx) => openWarmUpPage(tx, scope, id("session"))),
);

export const action = memberAction(async ({ scope, id, form }) => {
  const answer = await submitWarmUp(scope, id("session"), formObject(form));
  if ("conflicts" in answer)
    return data({ conflicts: answer.conflicts, values: formValues(form) }, { status: 409 });
  return answer;
});

export const shouldRevalidate = ({ actionStatus, defaultShouldRevalidate }: ShouldRevalidateFunctionArgs) =>
  actionStatus === 409 || defaultShouldRevalidate;

export const meta = ({ loaderData }: Route.MetaArgs) => [
  { title: `Warm-up${loaderData ? `, ${loaderData.session.teamName}` : ""} - Haleside` },
];

function savedWords(page: Route.ComponentProps["loaderData"]) {
  if (!page.lastSaved) return null;
  return `Saved${page.lastSaved.by ? ` by ${page.lastSaved.by}` : ""}, ${page.lastSaved.at}.`;
}

export default function WarmUp({ loaderData, actionData }: Route.ComponentProps) {
  const posted: PostedAnswer = actionData ?? {};
  return <WarmUpOf key={loaderData.session.id} page={loaderData} posted={posted} />;
}

function WarmUpOf({ page, posted }: { page: Route.ComponentProps["loaderData"]; posted: PostedAnswer }) {
  const record = useWarmUpRecord(page.state, page.session.id, page.syncAddress);
  const { session, programme } = page;
  return (
    <>
      <RecordStatus
        waiting={record.waitingCount}
        trouble={record.trouble}
        lastSaved={record.savedHere ? "All saved." : savedWords(page)}
      />
      <Page width="text">
        {page.mayWrite ? null : (
          <Note kind="info">
            {session.state === "cancelled"
              ? "This session is cancelled, so there is no warm-up to record."
              : page.begun
                ? "Your role reads the warm-up; the coach or the athletic trainer records it."
                : "This session has not come yet. The warm-up is ticked off on its day."}
          </Note>
        )}
        <WarmUpBoard page={page} posted={posted} record={record} />
        <LinkRow>
          <TextLink to="../attendance" relative="path">
            Attendance of the session
          </TextLink>
          <TextLink to="..">The session</TextLink>
        </LinkRow>
        <Region heading="Emergency card">
          <EmergencyCard card={page.card} />
        </Region>
        {programme ? (
          <Region heading={programme.name}>
            <ProgrammeBlocks programme={programme} />
          </Region>
        ) : null}
      </Page>
    </>
  );
}
