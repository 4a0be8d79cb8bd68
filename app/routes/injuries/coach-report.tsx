import { redirect, useNavigation } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { AvailabilityMark } from "~/features/availability/components/availability-mark";
import { closeReport, readReport } from "~/features/injuries/coach-reports.server";
import { CautionNotes } from "~/features/injuries/components/caution-notes";
import { closeReportSchema } from "~/features/injuries/injuries.schema";
import { siteWords } from "~/features/injuries/summary";
import { sentenceCase, sessionKindWords, signWords } from "~/features/vocabulary";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { formatDay } from "~/platform/days";
import {
  Button,
  ButtonLink,
  ChoiceButtons,
  type Description,
  DescriptionList,
  Disclosure,
  Field,
  Form,
  FormActions,
  Note,
  Page,
  PageHeading,
  TextArea,
  TextLink,
} from "~/ui";
import type { Route } from "./+types/coach-report";

export const meta = () => [{ title: "A coach's report - Haleside" }];

export const loader = memberLoader(async ({ scope, id }) => ({
  report: await readReport(scope, id("report")),
  base: `/${scope.slug}`,
}));

export const action = memberAction(async ({ scope, form, id }) => {
  await closeReport(scope, id("report"), closeReportSchema.parse(formObject(form)));
  return redirect(`/${scope.slug}/coach-reports`);
});

type Report = Route.ComponentProps["loaderData"]["report"];

const yesNo = (answer: boolean | null) => (answer === null ? "not said" : answer ? "yes" : "no");

function facts(report: Report): Description[] {
  const rows: [string, string | null][] = [
    ["When", [formatDay(report.onsetDay, "full"), report.onsetTime].filter(Boolean).join(", ")],
    [
      "Session",
      report.sessionKind
        ? `${sessionKindWords[report.sessionKind]}${report.teamName ? ` of ${report.teamName}` : ""}`
        : null,
    ],
    ["Body area", siteWords(report.bodyArea, report.side)],
    ["Could continue", yesNo(report.couldContinue)],
    ["Suspected concussion", report.suspectedConcussion ? "yes" : null],
    ["Signs", report.signs.map((sign) => signWords[sign]).join(", ") || "none chosen"],
    ["Who was phoned", report.phoned],
    ["What the coach saw", report.note],
    ["Sent", `${report.reportedBy ?? "A coach"}, ${report.reportedTime}`],
  ];
  return rows.flatMap(([term, detail]) =>
    detail
      ? [{ term, key: term, detail: <span className="whitespace-pre-line">{sentenceCase(detail)}</span> }]
      : [],
  );
}

export default function CoachReport({ loaderData, actionData }: Route.ComponentProps) {
  const { report, base } = loaderData;
  const name = `${report.givenName} ${report.familyName}`;
  const busy = useNavigation().state !== "idle";
  return (
    <Page width="text">
      <PageHeading
        above={<TextLink to={`${base}/coach-reports`}>Coaches' reports</TextLink>}
        below={<AvailabilityMark state={report.state} />}
      >
        {name}
      </PageHeading>
      {report.decided ? (
        <Note title="This report is dealt with">
          <p>
            {report.injuryId ? (
              <TextLink to={`${base}/injuries/${report.injuryId}`}>Open the injury it became</TextLink>
            ) : (
              `Closed: ${report.closedReason ?? "no reason kept"}`
            )}
          </p>
        </Note>
      ) : (
        <CautionNotes cautions={report.cautions} reasons={[]} saved />
      )}
      <DescriptionList items={facts(report)} />
      {report.decided ? null : (
        <>
          <FormActions>
            <ButtonLink to={`${base}/injuries/new?report=${report.id}`} look="primary">
              Log it as an injury
            </ButtonLink>
          </FormActions>
          <Disclosure summary="It is no injury: close it with a reason" open={Boolean(actionData)}>
            <Form {...(actionData ?? {})}>
              <Field name="reason" label="Why it becomes no injury">
                <TextArea rows={3} />
              </Field>
              <ChoiceButtons
                name="availability"
                legend={`${name} from today`}
                choices={[
                  { value: "full", label: "Lift what the report set" },
                  { value: "keep", label: "Leave the availability as it is" },
                ]}
              />
              <Button look="primary" busy={busy}>
                Close the report
              </Button>
            </Form>
          </Disclosure>
        </>
      )}
    </Page>
  );
}
