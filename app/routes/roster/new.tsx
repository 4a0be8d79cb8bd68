import { randomUUID } from "node:crypto";
import { redirect } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { resolveViewing } from "~/features/accounts/viewing.server";
import { AthleteFields } from "~/features/roster/components/athlete-fields";
import { newAthleteSchema, operationSchema } from "~/features/roster/roster.schema";
import { addAthlete } from "~/features/roster/roster.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { formatDay } from "~/platform/days";
import { Button, ButtonLink, DateInput, Field, Form, FormActions, Page, PageHeading, Select } from "~/ui";
import { read } from "~db/client.server";
import type { Route } from "./+types/new";

export const meta = () => [{ title: "Add an athlete - Haleside" }];

export const loader = memberLoader(async ({ scope, url }) => {
  const viewing = await read(scope, (tx) => resolveViewing(tx, url));
  return {
    base: `/${scope.slug}/roster`,
    teams: viewing.teams,
    team: viewing.team,
    today: scope.today,
    operation: randomUUID(),
  };
});

export const action = memberAction(async ({ scope, form }) => {
  const operation = operationSchema.parse(form.get("operation"));
  const id = await addAthlete(scope, newAthleteSchema.parse(formObject(form)), operation);
  return redirect(`/${scope.slug}/roster/${id}`);
});

export default function NewAthlete({ loaderData, actionData }: Route.ComponentProps) {
  const { base, teams, team, today, operation } = loaderData;
  return (
    <Page width="form">
      <PageHeading>Add an athlete</PageHeading>
      <Form {...(actionData ?? {})}>
        <input type="hidden" name="operation" value={operation} />
        <AthleteFields />
        <Field name="team" label="Team" optional help="Leave empty for a visitor or a try-out.">
          <Select
            placeholder="No team"
            options={teams.map(({ id, name }) => ({ value: id, label: name }))}
            defaultValue={team?.id}
          />
        </Field>
        <Field name="fromDay" label="On this team from" optional help="The first day of the membership.">
          <DateInput defaultValue={formatDay(today, "figures")} />
        </Field>
        <FormActions>
          <Button look="primary">Add the athlete</Button>
          <ButtonLink to={base}>Cancel</ButtonLink>
        </FormActions>
      </Form>
    </Page>
  );
}
