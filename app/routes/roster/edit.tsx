import { redirect, type ShouldRevalidateFunctionArgs } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { AthleteFields } from "~/features/roster/components/athlete-fields";
import { athleteSchema } from "~/features/roster/roster.schema";
import { archiveAthlete, editAthlete, readAthlete } from "~/features/roster/roster.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { Button, ButtonLink, ConfirmButton, Form, FormActions, Page, PageHeading, Region } from "~/ui";
import type { Route } from "./+types/edit";

export const meta = () => [{ title: "Edit an athlete - Haleside" }];

export const loader = memberLoader(async ({ scope, url, id }) => {
  const { athlete } = await readAthlete(scope, url, id("athlete"));
  return { athlete, base: `/${scope.slug}/roster` };
});

export const action = memberAction(async ({ scope, form, id }) => {
  const athleteId = id("athlete");
  const intent = form.get("intent");
  if (intent === "archive" || intent === "restore")
    await archiveAthlete(scope, athleteId, intent === "archive");
  else {
    const version = Number(form.get("version"));
    await editAthlete(scope, athleteId, version, athleteSchema.parse(formObject(form)));
  }
  return redirect(`/${scope.slug}/roster/${athleteId}`);
});

/** After a conflict the page takes the newer version, so that saving again is possible. */
export const shouldRevalidate = ({ actionStatus, defaultShouldRevalidate }: ShouldRevalidateFunctionArgs) =>
  actionStatus === 409 || defaultShouldRevalidate;

export default function EditAthlete({ loaderData, actionData }: Route.ComponentProps) {
  const { athlete, base } = loaderData;
  const name = `${athlete.givenName} ${athlete.familyName}`;
  return (
    <Page width="form">
      <PageHeading>Edit {name}</PageHeading>
      <Form {...(actionData ?? {})}>
        <input type="hidden" name="version" value={athlete.version} />
        <AthleteFields values={athlete} />
        <FormActions>
          <Button look="primary" name="intent" value="save">
            Save
          </Button>
          <ButtonLink to={`${base}/${athlete.id}`}>Cancel</ButtonLink>
        </FormActions>
      </Form>
      <Region heading={athlete.archivedAt ? "Archived" : "Left for good?"}>
        <p className="mb-3 max-w-prose text-soft">
          {athlete.archivedAt
            ? "This athlete is in no list and no search. Everything recorded is kept and still counts."
            : "An archived athlete leaves every list and search. Everything recorded is kept and still counts."}
        </p>
        <Form>
          {athlete.archivedAt ? (
            <Button name="intent" value="restore">
              Bring back
            </Button>
          ) : (
            <ConfirmButton
              label="Archive"
              question={`Archive ${name}? Nothing is deleted, and you can bring the athlete back.`}
              confirmLabel="Archive"
              name="intent"
              value="archive"
            />
          )}
        </Form>
      </Region>
    </Page>
  );
}
