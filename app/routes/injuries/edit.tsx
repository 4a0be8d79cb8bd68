import { useState } from "react";
import { redirect, useNavigation } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { cautionsFor, safeDefaultReasons, signGroups } from "~/features/injuries/cautions";
import { CautionNotes } from "~/features/injuries/components/caution-notes";
import { DiagnosisFields } from "~/features/injuries/components/diagnosis-fields";
import {
  Course,
  HowItHappened,
  SignsAndCare,
  WhenAndWhere,
} from "~/features/injuries/components/record-fields";
import { draftWords, useDraft } from "~/features/injuries/components/use-draft";
import { discardDraft, editDraft } from "~/features/injuries/drafts.server";
import { editInjury } from "~/features/injuries/edit-injury.server";
import { gapAnchor } from "~/features/injuries/gaps";
import { editSchema } from "~/features/injuries/injuries.schema";
import { openEditForm } from "~/features/injuries/read-injury.server";
import { answersOfForm, answersOfValues } from "~/features/injuries/seen";
import { sentenceCase } from "~/features/vocabulary";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { Button, ButtonLink, Form, FormActions, Note, Page, PageHeading, TextLink } from "~/ui";
import type { Route } from "./+types/edit";

export const meta = ({ loaderData }: Route.MetaArgs) => [
  {
    title: `${loaderData ? `Complete the injury of ${loaderData.page.name}` : "Complete an injury"} - Haleside`,
  },
];

export const loader = memberLoader(async ({ scope, id }) => ({
  page: await openEditForm(scope, id("injury")),
  slug: scope.slug,
}));

export const action = memberAction(async ({ scope, form, id }) => {
  const injuryId = id("injury");
  const page = `/${scope.slug}/injuries/${injuryId}`;
  if (form.get("intent") === "discard") {
    await discardDraft(scope, editDraft(injuryId));
    return redirect(`${page}/edit`);
  }
  await editInjury(scope, injuryId, editSchema.parse(formObject(form)));
  return redirect(`${page}?saved=edit`);
});

export default function EditInjury({ loaderData, actionData }: Route.ComponentProps) {
  const { page, slug } = loaderData;
  const here = `/${slug}/injuries/${page.id}`;
  const values = actionData?.values ?? page.values;
  const [operation] = useState(page.operation);
  const [version] = useState(() => String(page.values.version));
  const [answers, setAnswers] = useState(() => answersOfValues(values));
  const { draft, keep, cancel } = useDraft(`/${slug}/injuries/draft`, page.draftForm, page.draftSavedAt);
  const busy = useNavigation().state !== "idle";
  if (page.withdrawn)
    return (
      <Page width="form">
        <PageHeading above={<TextLink to={here}>Back to the injury</TextLink>}>{page.name}</PageHeading>
        <Note kind="attention" title="This record is withdrawn">
          <p>It can be read and no longer changed.</p>
        </Note>
      </Page>
    );
  const missing = page.gaps.filter(({ field }) => field !== "availability");
  return (
    <Page width="form">
      <PageHeading
        above={<TextLink to={here}>{page.name}</TextLink>}
        below={
          <span aria-live="polite">{draftWords(draft) ?? "What stood before stays in the history."}</span>
        }
      >
        Complete or correct the injury
      </PageHeading>
      {missing.length > 0 ? (
        <nav aria-label="Still missing" className="mb-6">
          <p className="font-medium">Still missing</p>
          <ul className="flex flex-wrap gap-x-6">
            {missing.map(({ field, label }) => (
              <li key={field}>
                <a
                  href={`#${gapAnchor(field)}`}
                  className="inline-flex min-h-target items-center text-lagoon underline underline-offset-4"
                >
                  {sentenceCase(label)}
                </a>
              </li>
            ))}
          </ul>
        </nav>
      ) : null}
      <Form
        errors={actionData?.errors}
        values={values}
        onChange={(event) => {
          setAnswers(answersOfForm(event.currentTarget));
          keep(event.currentTarget);
        }}
        onSubmit={cancel}
      >
        <input type="hidden" name="operation" value={operation} />
        <input type="hidden" name="version" value={version} />
        <WhenAndWhere page={page} />
        <HowItHappened warmedUpProposed={page.warmedUpProposed} />
        <SignsAndCare headOpen={answers.signs.some((sign) => !signGroups.joint.includes(sign))} />
        <div aria-live="polite">
          <CautionNotes cautions={cautionsFor(answers)} reasons={[]} saved />
          {safeDefaultReasons(answers).length > 0 &&
          safeDefaultReasons(answersOfValues(page.values)).length === 0 ? (
            <Note kind="attention">
              <p>With these answers the athlete becomes unavailable when you save.</p>
            </Note>
          ) : null}
        </div>
        <DiagnosisFields furtherOpen={Boolean(values.further1)} />
        <Course page={page} />
        <FormActions>
          <Button look="primary" size="large" busy={busy}>
            Save the changes
          </Button>
          <ButtonLink to={here} size="large">
            Back without saving
          </ButtonLink>
        </FormActions>
      </Form>
      {draft.savedAt ? (
        <Form reloadDocument onSubmit={cancel} className="mt-6">
          <Button look="quiet" name="intent" value="discard">
            Throw the draft away
          </Button>
        </Form>
      ) : null}
    </Page>
  );
}
