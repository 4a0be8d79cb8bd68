import { redirect, type ShouldRevalidateFunctionArgs, useSearchParams } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { SettingsLinks } from "~/features/accounts/components/settings-links";
import { may } from "~/features/accounts/permissions";
import { organisationSchema } from "~/features/accounts/settings.schema";
import { editOrganisation, readOrganisation } from "~/features/accounts/settings.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import {
  Button,
  DescriptionList,
  Field,
  Form,
  FormActions,
  Note,
  NumberInput,
  Page,
  PageHeading,
  TextArea,
  TextInput,
} from "~/ui";
import type { Route } from "./+types/settings";

export const meta = () => [{ title: "Settings - Haleside" }];

export const loader = memberLoader(async ({ scope }) => ({
  organisation: await readOrganisation(scope),
  base: `/${scope.slug}`,
  mayWrite: may(scope.roles, "settings.write"),
}));

export const action = memberAction(async ({ scope, form }) => {
  await editOrganisation(scope, Number(form.get("version")), organisationSchema.parse(formObject(form)));
  return redirect(`/${scope.slug}/settings?done=1`);
});

/** After a conflict the page takes the newer version, so that saving again is possible. */
export const shouldRevalidate = ({ actionStatus, defaultShouldRevalidate }: ShouldRevalidateFunctionArgs) =>
  actionStatus === 409 || defaultShouldRevalidate;

export default function Settings({ loaderData, actionData }: Route.ComponentProps) {
  const { organisation, base, mayWrite } = loaderData;
  const [params] = useSearchParams();
  const bands = organisation.ageBands.map(({ label }) => label).join("\n");
  return (
    <Page width="form">
      <PageHeading>Settings</PageHeading>
      <SettingsLinks base={base} here="Organisation" />
      {params.get("done") && !actionData ? (
        <Note kind="settled" role="status">
          Saved.
        </Note>
      ) : null}
      {mayWrite ? (
        <Form {...(actionData ?? {})}>
          <input type="hidden" name="version" value={organisation.version} />
          <Field name="name" label="Name">
            <TextInput defaultValue={organisation.name} />
          </Field>
          <Field name="timeZone" label="Time zone" help="Days and times of sessions are this clock's.">
            <TextInput width="medium" defaultValue={organisation.timeZone} />
          </Field>
          <Field
            name="phone"
            label="Phone for guardians"
            help="Stands in every notice, and on a link that has expired."
          >
            <TextInput type="tel" width="medium" defaultValue={organisation.phone} />
          </Field>
          <Field name="phoneHours" label="When it is answered" optional>
            <TextInput width="medium" defaultValue={organisation.phoneHours ?? ""} />
          </Field>
          <Field
            name="ageBands"
            label="Age bands"
            help="One a line, such as under 10, 13-14 or over 25. Together they cover every age."
          >
            <TextArea rows={8} defaultValue={bands} />
          </Field>
          <Field
            name="ownDecisionAge"
            label="Age of an athlete's own decision"
            help="In years. From this birthday on, guardians are no longer told. Local law comes first."
          >
            <NumberInput width="short" defaultValue={organisation.ownDecisionAge} />
          </Field>
          <Field name="noticeLinkDays" label="A notice's link works for" help="In days.">
            <NumberInput width="short" defaultValue={organisation.noticeLinkDays} />
          </Field>
          <Field
            name="smallNumber"
            label="Hide counts below"
            help="Outside the clinical roles, so that nobody is recognised in a table."
          >
            <NumberInput width="short" defaultValue={organisation.smallNumber} />
          </Field>
          <Field
            name="retentionYears"
            label="Keep records for"
            help="In years after the athlete leaves. Local law comes first."
          >
            <NumberInput width="short" defaultValue={organisation.retentionYears} />
          </Field>
          <FormActions>
            <Button look="primary">Save</Button>
          </FormActions>
        </Form>
      ) : (
        <DescriptionList
          items={[
            { term: "Name", detail: organisation.name },
            { term: "Time zone", detail: organisation.timeZone },
            { term: "Phone for guardians", detail: organisation.phone },
            { term: "Age bands", detail: organisation.ageBands.map(({ label }) => label).join(", ") },
            { term: "Age of own decision", detail: `${organisation.ownDecisionAge} years` },
          ]}
        />
      )}
    </Page>
  );
}
