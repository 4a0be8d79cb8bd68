import { redirect } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { SessionFields } from "~/features/sessions/components/session-fields";
import { newSessionSchema } from "~/features/sessions/sessions.schema";
import { addSession, offerNewSession } from "~/features/sessions/sessions.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { Button, Checkbox, EmptyState, Field, Form, FormActions, Page, PageHeading, Select } from "~/ui";
import { read } from "~db/client.server";
import type { Route } from "./+types/new";

export const loader = memberLoader(async ({ scope, url }) => ({
  ...(await read(scope, (tx) => offerNewSession(tx, url.searchParams.get("team")))),
  today: scope.today,
}));

export const action = memberAction(async ({ scope, form }) => {
  const input = newSessionSchema.parse(formObject(form));
  const session = await addSession(scope, input, { another: form.get("another") === "on" });
  throw redirect(`/${scope.slug}/sessions/${session.id}`);
});

export const meta = () => [{ title: "Add a session - Haleside" }];

export default function NewSession({ loaderData, actionData }: Route.ComponentProps) {
  const { teams, venues, teamId, usual, today } = loaderData;
  const refused = actionData?.errors?.form?.some((words) => words.includes("already has"));
  return (
    <Page width="form">
      <PageHeading below="Today unless you say another day.">Add a session</PageHeading>
      {teams.length === 0 ? (
        <EmptyState title="No team yet">
          <p>A session belongs to a team, and your membership covers none. Ask your administrator.</p>
        </EmptyState>
      ) : (
        <Form {...(actionData ?? {})}>
          {refused ? (
            <Checkbox
              name="another"
              size="large"
              label="This is another session of the same kind on that day"
            />
          ) : null}
          <Field name="teamId" label="Team">
            <Select
              size="large"
              width="medium"
              defaultValue={teamId ?? ""}
              {...(teams.length > 1 ? { placeholder: "Choose a team" } : {})}
              options={teams.map(({ id, name }) => ({ value: id, label: name }))}
            />
          </Field>
          <SessionFields
            venues={venues}
            values={{
              day: today,
              startTime: usual?.startTime ?? null,
              kind: "training",
              plannedMinutes: usual?.plannedMinutes ?? null,
              surface: usual?.surface ?? null,
              venueId: usual?.venueId ?? null,
            }}
          />
          <FormActions>
            <Button look="primary" size="large">
              Add the session
            </Button>
          </FormActions>
        </Form>
      )}
    </Page>
  );
}
