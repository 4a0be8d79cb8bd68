import { useState } from "react";
import { data, redirect, useNavigation } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { cautionsFor, safeDefaultReasons } from "~/features/injuries/cautions";
import { nameAthlete } from "~/features/injuries/coach-reports.server";
import { CautionNotes } from "~/features/injuries/components/caution-notes";
import { NowFields } from "~/features/injuries/components/now-fields";
import { draftWords, useDraft } from "~/features/injuries/components/use-draft";
import { useSessions } from "~/features/injuries/components/use-sessions";
import { discardDraft, logDraft } from "~/features/injuries/drafts.server";
import { gapsOf } from "~/features/injuries/gaps";
import { logSchema } from "~/features/injuries/injuries.schema";
import { logInjury, openLogForm } from "~/features/injuries/log-injury.server";
import { type Answers, answersOfForm, answersOfValues } from "~/features/injuries/seen";
import { searchOptions } from "~/features/roster/roster.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { timeIn } from "~/platform/clock";
import { Button, Form, FormActions, formValues, Page, PageHeading } from "~/ui";
import type { SearchOption } from "~/ui/search-select";
import type { Route } from "./+types/new";

export const meta = () => [{ title: "Log an injury - Haleside" }];

const idIn = (url: URL, name: string) => {
  const text = url.searchParams.get(name);
  return text && /^[0-9a-f-]{36}$/.test(text) ? text : null;
};

export const loader = memberLoader(async ({ scope, url }) => {
  const form = await openLogForm(scope, {
    athleteId: idIn(url, "athlete"),
    reportId: idIn(url, "report"),
  });
  return {
    ...form,
    draftSavedAt: form.draftSavedAt && timeIn(scope.timeZone, form.draftSavedAt),
    slug: scope.slug,
  };
});

export const action = memberAction(async ({ scope, form, url }) => {
  if (form.get("intent") === "discard") {
    await discardDraft(scope, logDraft(idIn(url, "report")));
    return redirect(`/${scope.slug}/injuries/new${url.search}`);
  }
  if (form.get("find") === "athlete") {
    const matches = await searchOptions(scope, String(form.get("athlete-text") ?? ""));
    return data({ errors: null, values: formValues(form), matches });
  }
  await nameAthlete(scope, form);
  const { id } = await logInjury(scope, logSchema.parse(formObject(form)));
  return redirect(`/${scope.slug}/injuries/${id}?saved=new`);
});

const numbers = ["No", "One", "Two", "Three", "Four", "Five", "Six", "Seven", "Eight", "Nine", "Ten"];

/** How much of the record stays open when the first group is saved alone. */
function waiting(answers: Answers) {
  const { length } = gapsOf({
    sessionId: answers.inSession ? "chosen" : null,
    outsideSport: answers.outside,
    bodyArea: answers.bodyArea ?? "unspecified",
    side: "left",
    couldContinue: answers.couldContinue ?? true,
    onset: null,
    contact: null,
    movement: answers.movement,
    warmedUp: null,
    pathology: null,
    certainty: null,
    subsequence: null,
    hasAvailability: safeDefaultReasons(answers).length > 0,
    hasEarlier: false,
  });
  return `${numbers[length] ?? length} ${length === 1 ? "detail" : "details"} can wait. Phone the guardian first; the notice confirms.`;
}

export default function NewInjury({ loaderData, actionData }: Route.ComponentProps) {
  const { slug, reportId, draftForm, draftSavedAt } = loaderData;
  const back = actionData && "values" in actionData ? actionData : undefined;
  const values = back?.values ?? loaderData.values;
  // One id for this form however often the page is loaded again behind it: a double press saves once.
  const [operation] = useState(loaderData.operation);
  const [answers, setAnswers] = useState(() => answersOfValues(values));
  const { draft, keep, cancel } = useDraft(`/${slug}/injuries/draft`, draftForm, draftSavedAt);
  const { athlete, choose, sessions } = useSessions(`/${slug}/injuries/new`, loaderData);
  const busy = useNavigation().state !== "idle";
  const matches: SearchOption[] | undefined = back && "matches" in back ? back.matches : undefined;
  const reasons = safeDefaultReasons(answers);
  const below = draftWords(draft);
  return (
    <Page width="form">
      <PageHeading below={<span aria-live="polite">{below ?? "The first group is enough to save."}</span>}>
        {reportId ? "Log the injury a coach reported" : "Log an injury"}
      </PageHeading>
      <Form
        errors={back?.errors}
        values={values}
        onChange={(event) => {
          setAnswers(answersOfForm(event.currentTarget));
          keep(event.currentTarget);
        }}
        onSubmit={cancel}
      >
        <input
          type="hidden"
          name="operation"
          value={typeof back?.values.operation === "string" ? back.values.operation : operation}
        />
        {reportId ? <input type="hidden" name="report" value={reportId} /> : null}
        <NowFields
          slug={slug}
          answers={answers}
          athlete={athlete}
          matches={matches}
          sessions={sessions}
          onAthlete={choose}
        />
        <div aria-live="polite">
          <CautionNotes cautions={cautionsFor(answers)} reasons={reasons} />
        </div>
        <FormActions note={waiting(answers)}>
          <Button look="primary" size="large" wide busy={busy}>
            Save now, complete later
          </Button>
        </FormActions>
      </Form>
      {draft.savedAt ? (
        <Form reloadDocument onSubmit={cancel} className="mt-6">
          <Button look="quiet" name="intent" value="discard">
            Throw the draft away and begin again
          </Button>
        </Form>
      ) : null}
    </Page>
  );
}
