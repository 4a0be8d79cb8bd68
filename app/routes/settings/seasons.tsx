import { redirect } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { SettingsLinks } from "~/features/accounts/components/settings-links";
import { may } from "~/features/accounts/permissions";
import { seasonSchema } from "~/features/accounts/settings.schema";
import { readSeasons, saveSeason } from "~/features/accounts/settings.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { formatDay } from "~/platform/days";
import { Button, DateInput, Disclosure, Field, Form, Page, PageHeading, Region, TextInput } from "~/ui";
import type { Route } from "./+types/seasons";

export const meta = () => [{ title: "Seasons - Haleside" }];

export const loader = memberLoader(async ({ scope }) => ({
  seasons: await readSeasons(scope),
  base: `/${scope.slug}`,
  mayWrite: may(scope.roles, "settings.write"),
}));

export const action = memberAction(async ({ scope, form }) => {
  const id = form.get("season");
  await saveSeason(scope, typeof id === "string" && id ? id : null, seasonSchema.parse(formObject(form)));
  return redirect(`/${scope.slug}/settings/seasons`);
});

type Values = { name?: string; startsOn?: string; endsOn?: string };

function SeasonFields({ name, startsOn, endsOn }: Values) {
  return (
    <>
      <Field name="name" label="Name" help="Such as 2026/27.">
        <TextInput width="short" defaultValue={name} />
      </Field>
      <Field name="startsOn" label="First day">
        <DateInput defaultValue={startsOn ? formatDay(startsOn, "figures") : ""} />
      </Field>
      <Field name="endsOn" label="Last day">
        <DateInput defaultValue={endsOn ? formatDay(endsOn, "figures") : ""} />
      </Field>
    </>
  );
}

export default function Seasons({ loaderData, actionData }: Route.ComponentProps) {
  const { seasons, base, mayWrite } = loaderData;
  const adding = actionData && !actionData.values.season ? actionData : undefined;
  return (
    <Page width="form">
      <PageHeading below="Rates, warm-ups and reports are for a season. A day belongs to one season at most.">
        Seasons
      </PageHeading>
      <SettingsLinks base={base} here="Seasons" />
      {seasons.map((season) => {
        const editing = actionData?.values.season === season.id ? actionData : undefined;
        const words = `${season.name}: ${formatDay(season.startsOn)} to ${formatDay(season.endsOn)}`;
        return mayWrite ? (
          <Disclosure key={season.id} summary={words} open={editing !== undefined}>
            <Form {...(editing ?? {})} idPrefix={`season-${season.id}`}>
              <input type="hidden" name="season" value={season.id} />
              <SeasonFields {...season} />
              <Button>Save</Button>
            </Form>
          </Disclosure>
        ) : (
          <p key={season.id} className="border-0 border-b border-line py-2.5">
            {words}
          </p>
        );
      })}
      {mayWrite ? (
        <Region heading="Add a season">
          <Form {...(adding ?? {})} idPrefix="new">
            <SeasonFields />
            <Button look="primary">Add the season</Button>
          </Form>
        </Region>
      ) : null}
    </Page>
  );
}
