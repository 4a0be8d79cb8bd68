import { redirect } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { NoticePreview } from "~/features/notices/components/notice-preview";
import { NotTold, PhoneFirst, Recipients } from "~/features/notices/components/recipients";
import { WordsFields } from "~/features/notices/components/words-fields";
import { sendSchema, wordsSchema } from "~/features/notices/notices.schema";
import { prepareNotice, previewNotice, sendNotices } from "~/features/notices/writing.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { formatDay } from "~/platform/days";
import {
  Button,
  ChoiceButtons,
  Disclosure,
  Form,
  FormActions,
  formValues,
  Note,
  Page,
  PageHeading,
  TextLink,
} from "~/ui";
import type { Route } from "./+types/notice";

export const loader = memberLoader(async ({ scope, id }) => {
  const prepared = await prepareNotice(scope, id("injury"));
  const { name: callName, phone: callPhone } = prepared.call;
  const draft = { ...prepared.words, callName, callPhone };
  return {
    prepared,
    preview: await previewNotice(scope, prepared, draft, prepared.injury.urgency),
    slug: scope.slug,
  };
});

export const action = memberAction(async ({ scope, form, id }) => {
  const typed = formObject(form);
  if (typed.intent === "send") {
    const { noticeIds } = await sendNotices(scope, id("injury"), sendSchema.parse(typed));
    return redirect(`/${scope.slug}/notices/${noticeIds[0]}?done=sent`);
  }
  const words = wordsSchema.parse(typed);
  const prepared = await prepareNotice(scope, id("injury"));
  const urgency = typed.urgency === "urgent" ? "urgent" : prepared.injury.urgency;
  return { preview: await previewNotice(scope, prepared, words, urgency), values: formValues(form) };
});

export const meta = () => [{ title: "Tell the guardians - Haleside" }];

export default function WriteNotice({ loaderData, actionData }: Route.ComponentProps) {
  const { prepared, slug } = loaderData;
  const { injury, athlete, guardians, words, call } = prepared;
  const answer = actionData && !(actionData instanceof Response) ? actionData : undefined;
  const errors = answer && "errors" in answer ? answer.errors : undefined;
  const preview = answer && "preview" in answer ? answer.preview : loaderData.preview;
  const name = `${athlete.givenName} ${athlete.familyName}`;
  const urgent = injury.urgency === "urgent";
  const nobody = injury.withdrawn || !guardians.some(({ way }) => way !== "nobody");
  return (
    <Page width="form">
      <PageHeading
        above={<TextLink to={`/${slug}/injuries/${injury.id}`}>The injury</TextLink>}
        below={`Injury of ${formatDay(injury.onsetDay, "full")}`}
      >
        Tell the guardians of {name}
      </PageHeading>
      {nobody ? (
        <>
          <Note kind="attention" title="Nobody can be told">
            {injury.withdrawn ? (
              <p>This injury was recorded in error and withdrawn.</p>
            ) : guardians.length === 0 ? (
              <p>
                No guardian is on file.{" "}
                <TextLink to={`/${slug}/roster`}>Add one on the athlete's page of the roster.</TextLink>
              </p>
            ) : null}
          </Note>
          <NotTold guardians={guardians} />
        </>
      ) : (
        <>
          {injury.cautions.map(({ kind, title, text }) => (
            <Note key={kind} kind="serious" title={title}>
              <p>{text}</p>
            </Note>
          ))}
          {injury.phoned ? (
            <Note kind="info" title="Noted with the injury: who was phoned">
              <p>{injury.phoned}</p>
            </Note>
          ) : null}
          <Form errors={errors} values={answer?.values}>
            <input
              type="hidden"
              name="operation"
              defaultValue={
                typeof answer?.values?.operation === "string" ? answer.values.operation : prepared.operation
              }
            />
            {/* The first button answers the Enter key: it must not be the one that sends. */}
            <button
              type="submit"
              name="intent"
              value="preview"
              className="sr-only"
              tabIndex={-1}
              aria-hidden="true"
            >
              Show how it will arrive
            </button>
            {urgent ? (
              <>
                <input type="hidden" name="urgency" value="urgent" />
                <PhoneFirst guardians={guardians} urgent />
              </>
            ) : (
              <ChoiceButtons
                name="urgency"
                legend="Is it urgent?"
                help="Urgent: the e-mail asks them to call at once, and you phone first."
                layout="segments"
                defaultValue="routine"
                choices={[
                  { value: "routine", label: "Not urgent" },
                  { value: "urgent", label: "Urgent" },
                ]}
              />
            )}
            <Recipients guardians={guardians} slug={slug} />
            <WordsFields words={words} call={call} />
            {urgent ? null : (
              <Disclosure
                summary="I also phoned"
                open={Boolean(
                  answer?.values?.callGuardian || answer?.values?.callTold || errors?.fields.callGuardian,
                )}
              >
                <PhoneFirst guardians={guardians} urgent={false} />
              </Disclosure>
            )}
            <FormActions note="Who may be told is checked again at the moment each e-mail goes out.">
              <Button name="intent" value="send" look="primary">
                Send now
              </Button>
              <Button name="intent" value="preview">
                Show how it will arrive
              </Button>
            </FormActions>
          </Form>
          <NoticePreview preview={preview} />
        </>
      )}
    </Page>
  );
}
