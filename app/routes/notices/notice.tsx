import { redirect } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { may } from "~/features/accounts/permissions";
import { NoticeBody, PhoneLink } from "~/features/notices/components/notice-body";
import { NoticeTable } from "~/features/notices/components/notice-table";
import { NoticeWay } from "~/features/notices/components/notice-way";
import { CallFields } from "~/features/notices/components/recipients";
import { logCallSchema, resendSchema } from "~/features/notices/notices.schema";
import { logCall, readNotice, resendNotice } from "~/features/notices/notices.server";
import { relationWords } from "~/features/vocabulary";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import {
  Button,
  ConfirmButton,
  Disclosure,
  Form,
  FormActions,
  Lede,
  Note,
  Page,
  PageHeading,
  Region,
  TextLink,
} from "~/ui";
import type { Route } from "./+types/notice";

export const loader = memberLoader(async ({ scope, id, url }) => ({
  ...(await readNotice(scope, id("notice"))),
  slug: scope.slug,
  maySend: may(scope.roles, "notices.send"),
  done: url.searchParams.get("done"),
}));

export const action = memberAction(async ({ scope, form, id }) => {
  const typed = formObject(form);
  const notice = id("notice");
  if (typed.intent === "resend") {
    await resendNotice(scope, notice, resendSchema.parse(typed).operation);
    return redirect(`/${scope.slug}/notices/${notice}?done=sent`);
  }
  await logCall(scope, notice, logCallSchema.parse(typed));
  return redirect(`/${scope.slug}/notices/${notice}?done=call`);
});

export const meta = () => [{ title: "Notice - Haleside" }];

const doneWords: Record<string, string> = {
  sent: "It is on its way. This page shows how far it has come.",
  call: "The call is on record.",
};

export default function NoticePage({ loaderData, actionData }: Route.ComponentProps) {
  const { line, way, content, siblings, mayResend, whyNot, mayPhone, operation, slug, maySend, done } =
    loaderData;
  const { guardianName, guardianPhone, relation, athleteName, injuryId, urgent, state } = line;
  const answer = actionData && !(actionData instanceof Response) ? actionData : undefined;
  return (
    <Page width="text">
      <PageHeading
        above={<TextLink to={`/${slug}/notices`}>All notices</TextLink>}
        below={
          <>
            About {athleteName}. <TextLink to={`/${slug}/injuries/${injuryId}`}>Open the injury</TextLink>
          </>
        }
      >
        Notice to {guardianName}, {relationWords[relation] ?? relation}
      </PageHeading>
      {done && doneWords[done] && !answer ? (
        <Note kind="settled" role="status">
          {doneWords[done]}
        </Note>
      ) : null}
      <Lede note={urgent ? "Urgent: a guardian is phoned before the child leaves." : undefined}>
        {state.line}.
      </Lede>
      {state.phoneTask && mayPhone ? (
        <Note kind="attention" title={`Please phone: ${state.phoneTask}`}>
          {guardianPhone ? (
            <PhoneLink phone={guardianPhone} large />
          ) : (
            <p>No number is on file for {guardianName}.</p>
          )}
        </Note>
      ) : null}
      {whyNot ? (
        <Note kind="info" title="No e-mail goes out now">
          <p>{whyNot}</p>
        </Note>
      ) : null}
      <Region heading="Its way">
        <NoticeWay steps={way} />
      </Region>
      {maySend ? (
        <Region heading="Log a call">
          {mayPhone ? null : <p className="mb-3 text-soft">{whyNot}</p>}
          <Form errors={answer?.errors} values={answer?.values} idPrefix="call">
            <input type="hidden" name="operation" defaultValue={operation} />
            <CallFields />
            <FormActions>
              <Button look="primary" name="intent" value="call">
                Save the call
              </Button>
            </FormActions>
          </Form>
        </Region>
      ) : null}
      {maySend && mayResend ? (
        <Region heading="Send it again">
          <Form idPrefix="resend">
            <input type="hidden" name="operation" defaultValue={operation} />
            <ConfirmButton
              label="Send this notice again"
              question={`${guardianName} gets the same words with a new link. Links in earlier e-mails stop working.`}
              confirmLabel="Send it again"
              name="intent"
              value="resend"
              look="primary"
            />
          </Form>
        </Region>
      ) : null}
      {siblings.length > 0 ? (
        <Region heading="Other notices of this injury">
          <NoticeTable notices={siblings} slug={slug} empty="" />
        </Region>
      ) : null}
      <Region heading="Its words">
        <Disclosure summary="What the family reads behind the link">
          <h3 className="text-xl font-semibold">News about {content.childName}</h3>
          <NoticeBody content={content} as="h4" />
        </Disclosure>
      </Region>
    </Page>
  );
}
