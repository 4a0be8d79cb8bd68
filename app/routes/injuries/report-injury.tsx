import { useState } from "react";
import { data, redirect, useNavigation } from "react-router";
import { z } from "zod";
import { formObject } from "~/features/accounts/accounts.schema";
import { cautionsFor, safeDefaultReasons } from "~/features/injuries/cautions";
import {
  nameAthlete,
  openReportForm,
  readReceipt,
  sendCoachReport,
} from "~/features/injuries/coach-reports.server";
import { CautionNotes } from "~/features/injuries/components/caution-notes";
import { NowFields } from "~/features/injuries/components/now-fields";
import { useSessions } from "~/features/injuries/components/use-sessions";
import { reportSchema } from "~/features/injuries/injuries.schema";
import { answersOfForm, answersOfValues } from "~/features/injuries/seen";
import { searchOptions } from "~/features/roster/roster.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import {
  Button,
  ButtonLink,
  Field,
  Form,
  FormActions,
  formValues,
  Note,
  Page,
  PageHeading,
  TextArea,
  TextInput,
} from "~/ui";
import type { SearchOption } from "~/ui/search-select";
import type { Route } from "./+types/report-injury";

export const meta = () => [{ title: "Report an injury - Haleside" }];

export const loader = memberLoader(async ({ scope, url }) => {
  const idIn = (name: string) => z.uuid().safeParse(url.searchParams.get(name)).data ?? null;
  const sent = idIn("sent");
  const form = await openReportForm(scope, idIn("athlete"));
  return { ...form, slug: scope.slug, receipt: sent ? await readReceipt(scope, sent) : null };
});

export const action = memberAction(async ({ scope, form }) => {
  if (form.get("find") === "athlete") {
    const matches = await searchOptions(scope, String(form.get("athlete-text") ?? ""));
    return data({ errors: null, values: formValues(form), matches });
  }
  await nameAthlete(scope, form);
  const input = reportSchema.parse(formObject(form));
  await sendCoachReport(scope, input);
  // The address carries the operation alone: what to do now is shown to its sender and to nobody else.
  return redirect(`/${scope.slug}/report-injury?sent=${input.operation}`);
});

export default function ReportInjury({ loaderData, actionData }: Route.ComponentProps) {
  const { slug, receipt } = loaderData;
  return (
    <Page width="form">
      {receipt ? (
        <Sent slug={slug} receipt={receipt} />
      ) : (
        <ReportForm key={loaderData.athlete?.id} loaderData={loaderData} actionData={actionData} />
      )}
    </Page>
  );
}

type Receipt = NonNullable<Route.ComponentProps["loaderData"]["receipt"]>;

function Sent({ slug, receipt }: { slug: string; receipt: Receipt }) {
  return (
    <>
      <PageHeading>The report is sent</PageHeading>
      <Note kind="settled" role="status" title="The athletic trainer has it now">
        <p>
          {receipt.unavailable
            ? "The athlete is unavailable from now on, until a clinical role lifts it. "
            : ""}
          The report cannot be read here afterwards: what is in it concerns the athlete, the family and the
          clinical staff.
        </p>
      </Note>
      <CautionNotes cautions={receipt.cautions} reasons={[]} saved />
      <h2 className="mt-8 mb-2">What to do now</h2>
      <ol className="list-decimal space-y-2 pl-6">
        <li>Stay with the athlete, or have an adult stay with them.</li>
        <li>Phone a guardian and say what happened, before the athlete leaves.</li>
        <li>Phone the athletic trainer if something grows worse or you are unsure.</li>
      </ol>
      <FormActions>
        <ButtonLink to={`/${slug}/today`} look="primary" size="large">
          Back to today
        </ButtonLink>
        <ButtonLink to={`/${slug}/report-injury`} size="large">
          Report another injury
        </ButtonLink>
      </FormActions>
    </>
  );
}

function ReportForm({ loaderData, actionData }: Pick<Route.ComponentProps, "loaderData" | "actionData">) {
  const { slug } = loaderData;
  const back = actionData && "values" in actionData ? actionData : undefined;
  const values = back?.values;
  const [operation] = useState(loaderData.operation);
  const [answers, setAnswers] = useState(() => answersOfValues(values));
  const { athlete, choose, sessions } = useSessions(`/${slug}/report-injury`, loaderData);
  const busy = useNavigation().state !== "idle";
  const matches: SearchOption[] | undefined = back && "matches" in back ? back.matches : undefined;
  return (
    <>
      <PageHeading below="For when no athletic trainer is there. The report goes to them at once.">
        Report an injury
      </PageHeading>
      <Form
        errors={back?.errors}
        values={values}
        onChange={(event) => setAnswers(answersOfForm(event.currentTarget))}
      >
        <input
          type="hidden"
          name="operation"
          value={typeof values?.operation === "string" ? values.operation : operation}
        />
        <NowFields
          slug={slug}
          size="large"
          withMovement={false}
          answers={answers}
          athlete={athlete}
          matches={matches}
          sessions={sessions}
          onAthlete={choose}
        />
        <div aria-live="polite">
          <CautionNotes cautions={cautionsFor(answers)} reasons={safeDefaultReasons(answers)} />
        </div>
        <Field
          name="phoned"
          label="Who was phoned"
          help="Such as: mother, 18:10, told what happened."
          optional
        >
          <TextInput size="large" width="full" autoComplete="off" />
        </Field>
        <Field name="note" label="What you saw" optional>
          <TextArea rows={3} />
        </Field>
        <FormActions note="Only the clinical staff read the report. You will not be able to open it again.">
          <Button look="primary" size="large" wide busy={busy}>
            Send the report
          </Button>
        </FormActions>
      </Form>
    </>
  );
}
