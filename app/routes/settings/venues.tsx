import { redirect } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { SettingsLinks } from "~/features/accounts/components/settings-links";
import { may } from "~/features/accounts/permissions";
import { venueSchema } from "~/features/accounts/settings.schema";
import { readVenues, saveVenue } from "~/features/accounts/settings.server";
import { choicesOf, surfaceWords } from "~/features/vocabulary";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import {
  Button,
  Disclosure,
  Field,
  Form,
  Page,
  PageHeading,
  Region,
  Select,
  TextArea,
  TextInput,
} from "~/ui";
import type { Route } from "./+types/venues";

export const meta = () => [{ title: "Venues - Haleside" }];

export const loader = memberLoader(async ({ scope }) => ({
  venues: await readVenues(scope),
  base: `/${scope.slug}`,
  mayWrite: may(scope.roles, "settings.write"),
}));

export const action = memberAction(async ({ scope, form }) => {
  const id = form.get("venue");
  await saveVenue(scope, typeof id === "string" && id ? id : null, venueSchema.parse(formObject(form)));
  return redirect(`/${scope.slug}/settings/venues`);
});

type Values = {
  name?: string;
  address?: string;
  access?: string;
  defibrillator?: string;
  emergencyNumbers?: string;
  surface?: string | null;
};

function VenueFields(values: Values) {
  return (
    <>
      <Field name="name" label="Name">
        <TextInput defaultValue={values.name} />
      </Field>
      <Field name="address" label="Address for an ambulance" optional>
        <TextArea rows={2} defaultValue={values.address} />
      </Field>
      <Field name="access" label="How an ambulance gets in" optional help="Gate, key, who waits where.">
        <TextArea rows={2} defaultValue={values.access} />
      </Field>
      <Field name="defibrillator" label="Where the defibrillator is" optional>
        <TextInput defaultValue={values.defibrillator} />
      </Field>
      <Field name="emergencyNumbers" label="Emergency numbers" optional>
        <TextInput defaultValue={values.emergencyNumbers} />
      </Field>
      <Field name="surface" label="Surface" optional>
        <Select
          width="medium"
          placeholder="Not said"
          options={choicesOf(surfaceWords)}
          defaultValue={values.surface ?? ""}
        />
      </Field>
    </>
  );
}

export default function Venues({ loaderData, actionData }: Route.ComponentProps) {
  const { venues, base, mayWrite } = loaderData;
  const adding = actionData && !actionData.values.venue ? actionData : undefined;
  return (
    <Page width="form">
      <PageHeading below="Each venue's emergency card is on the coach's page of every session there.">
        Venues
      </PageHeading>
      <SettingsLinks base={base} here="Venues" />
      {venues.map((venue) => {
        const editing = actionData?.values.venue === venue.id ? actionData : undefined;
        return mayWrite ? (
          <Disclosure key={venue.id} summary={venue.name} open={editing !== undefined}>
            <Form {...(editing ?? {})} idPrefix={`venue-${venue.id}`}>
              <input type="hidden" name="venue" value={venue.id} />
              <VenueFields {...venue} />
              <Button>Save</Button>
            </Form>
          </Disclosure>
        ) : (
          <p key={venue.id} className="border-0 border-b border-line py-2.5">
            {venue.name}
            <span className="text-soft">{venue.address ? `, ${venue.address}` : ""}</span>
          </p>
        );
      })}
      {mayWrite ? (
        <Region heading="Add a venue">
          <Form {...(adding ?? {})} idPrefix="new">
            <VenueFields />
            <Button look="primary">Add the venue</Button>
          </Form>
        </Region>
      ) : null}
    </Page>
  );
}
