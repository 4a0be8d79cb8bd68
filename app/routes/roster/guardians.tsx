import { randomUUID } from "node:crypto";
import { redirect, useSearchParams } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { GuardianFields } from "~/features/roster/components/guardian-fields";
import {
  addGuardian,
  editGuardian,
  endGuardianship,
  readGuardians,
} from "~/features/roster/guardians.server";
import { guardianSchema, operationSchema } from "~/features/roster/roster.schema";
import { relationWords } from "~/features/vocabulary";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { Button, ConfirmButton, Disclosure, Form, Note, Page, PageHeading, Region, TextLink } from "~/ui";
import type { Route } from "./+types/guardians";

export const meta = () => [{ title: "Guardians - Haleside" }];

export const loader = memberLoader(async ({ scope, id }) => ({
  ...(await readGuardians(scope, id("athlete"))),
  base: `/${scope.slug}/roster`,
  operation: randomUUID(),
}));

export const action = memberAction(async ({ scope, form, id }) => {
  const athleteId = id("athlete");
  const guardianId = String(form.get("guardian") ?? "");
  const intent = form.get("intent");
  if (intent === "end") await endGuardianship(scope, athleteId, guardianId);
  else if (intent === "edit") {
    const seen = String(form.get("version") ?? "");
    await editGuardian(scope, athleteId, guardianId, seen, guardianSchema.parse(formObject(form)));
  } else {
    const operation = operationSchema.parse(form.get("operation"));
    await addGuardian(scope, athleteId, guardianSchema.parse(formObject(form)), operation);
  }
  return redirect(`/${scope.slug}/roster/${athleteId}/guardians?done=1`);
});

export default function Guardians({ loaderData, actionData }: Route.ComponentProps) {
  const { athlete, guardians, base, operation } = loaderData;
  const [params] = useSearchParams();
  const adding = actionData && !actionData.values.guardian ? actionData : undefined;
  return (
    <Page width="form">
      <PageHeading above={<TextLink to={`${base}/${athlete.id}`}>{athlete.name}</TextLink>}>
        Guardians
      </PageHeading>
      {params.get("done") && !actionData ? (
        <Note kind="settled" role="status">
          Saved.
        </Note>
      ) : null}
      <p className="mb-4 max-w-prose text-soft">
        Each guardian is told separately and never sees another&rsquo;s address, answers or limits.
      </p>
      {guardians.map((guardian) => {
        const editing = actionData?.values.guardian === guardian.id ? actionData : undefined;
        return (
          <Disclosure
            key={guardian.id}
            open={editing !== undefined}
            summary={`${guardian.name}, ${relationWords[guardian.relation] ?? guardian.relation}`}
          >
            {guardian.emailStoppedAt ? (
              <Note kind="attention" title="E-mail to this address has stopped">
                It was returned or refused. Phone instead, and enter a corrected address here.
              </Note>
            ) : null}
            <Form {...(editing ?? {})} idPrefix={`guardian-${guardian.id}`}>
              <input type="hidden" name="guardian" value={guardian.id} />
              <input type="hidden" name="version" value={`${guardian.guardianVersion}.${guardian.version}`} />
              <GuardianFields values={guardian} />
              <div className="flex flex-wrap gap-3">
                <Button look="primary" name="intent" value="edit">
                  Save
                </Button>
                <ConfirmButton
                  label="No longer a guardian"
                  question={`End the bond between ${guardian.name} and ${athlete.name}? Nothing more is sent. What was sent stays on record.`}
                  confirmLabel="End it"
                  name="intent"
                  value="end"
                />
              </div>
            </Form>
          </Disclosure>
        );
      })}
      <Region heading="Add a guardian">
        <Form {...(adding ?? {})} idPrefix="new">
          <input type="hidden" name="operation" value={operation} />
          <GuardianFields values={{ phoneOrder: guardians.length + 1 }} />
          <Button look="primary" name="intent" value="add">
            Add the guardian
          </Button>
        </Form>
      </Region>
    </Page>
  );
}
