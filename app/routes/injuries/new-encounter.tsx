import { randomUUID } from "node:crypto";
import { useState } from "react";
import { data, redirect, useNavigation, useSearchParams } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { addEncounter, findNamedAthlete, nameAthlete } from "~/features/injuries/coach-reports.server";
import { encounterSchema } from "~/features/injuries/injuries.schema";
import { searchOptions } from "~/features/roster/roster.server";
import { sentenceCase } from "~/features/vocabulary";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import {
  Button,
  ChoiceButtons,
  Field,
  Form,
  FormActions,
  formValues,
  Note,
  NumberInput,
  Page,
  PageHeading,
  TextArea,
} from "~/ui";
import { SearchSelect } from "~/ui/search-select";
import { encounterKinds } from "~db/schema/codes";
import type { Route } from "./+types/new-encounter";

export const meta = () => [{ title: "Note an encounter - Haleside" }];

export const loader = memberLoader(async ({ scope, url }) => ({
  slug: scope.slug,
  operation: randomUUID(),
  athlete: await findNamedAthlete(scope, url.searchParams.get("athlete")),
}));

export const action = memberAction(async ({ scope, form }) => {
  if (form.get("find") === "athlete") {
    const matches = await searchOptions(scope, String(form.get("athlete-text") ?? ""));
    return data({ errors: null, values: formValues(form), matches });
  }
  await nameAthlete(scope, form);
  await addEncounter(scope, encounterSchema.parse(formObject(form)));
  return redirect(`/${scope.slug}/encounters/new?saved=yes`);
});

export default function NewEncounter({ loaderData, actionData }: Route.ComponentProps) {
  const [params] = useSearchParams();
  return (
    <Page width="form">
      <PageHeading below="An athlete seen without a new injury. It counts the work, not the injuries.">
        Note an encounter
      </PageHeading>
      {params.has("saved") && !actionData ? (
        <Note kind="settled" role="status">
          <p>The encounter is saved. Note the next one, or leave the page.</p>
        </Note>
      ) : null}
      <EncounterForm
        key={actionData ? "again" : loaderData.operation}
        loaderData={loaderData}
        actionData={actionData}
      />
    </Page>
  );
}

function EncounterForm({ loaderData, actionData }: Pick<Route.ComponentProps, "loaderData" | "actionData">) {
  const { slug, athlete } = loaderData;
  const busy = useNavigation().state !== "idle";
  const sent = actionData?.values.operation;
  const [operation] = useState(typeof sent === "string" ? sent : loaderData.operation);
  return (
    <Form errors={actionData?.errors} values={actionData?.values}>
      <input type="hidden" name="operation" value={operation} />
      <Field name="athlete" label="Athlete">
        <SearchSelect
          source={`/api/${slug}/athletes`}
          defaultOption={athlete}
          matches={actionData && "matches" in actionData ? actionData.matches : undefined}
          nothingFound="No athlete of that name. Try fewer letters."
        />
      </Field>
      <ChoiceButtons
        name="kind"
        legend="What it was"
        choices={encounterKinds.map((value) => ({ value, label: sentenceCase(value) }))}
      />
      <Field name="minutes" label="Minutes" optional>
        <NumberInput />
      </Field>
      <Field name="note" label="Note" optional>
        <TextArea rows={2} />
      </Field>
      <FormActions>
        <Button look="primary" size="large" busy={busy}>
          Save the encounter
        </Button>
      </FormActions>
    </Form>
  );
}
