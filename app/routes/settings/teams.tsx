import { redirect } from "react-router";
import { formObject } from "~/features/accounts/accounts.schema";
import { SettingsLinks } from "~/features/accounts/components/settings-links";
import { may } from "~/features/accounts/permissions";
import { teamSchema } from "~/features/accounts/settings.schema";
import { archiveTeam, readTeams, saveTeam } from "~/features/accounts/settings.server";
import { choicesOf, sportWords, teamSexWords } from "~/features/vocabulary";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import {
  Button,
  Disclosure,
  EmptyState,
  Field,
  Form,
  NumberInput,
  Page,
  PageHeading,
  Region,
  Select,
  TextInput,
} from "~/ui";
import type { Sport, TeamSex } from "~db/schema/codes";
import type { Route } from "./+types/teams";

export const meta = () => [{ title: "Teams - Haleside" }];

export const loader = memberLoader(async ({ scope }) => ({
  teams: await readTeams(scope),
  base: `/${scope.slug}`,
  mayWrite: may(scope.roles, "settings.write"),
}));

export const action = memberAction(async ({ scope, form }) => {
  const team = form.get("team");
  const id = typeof team === "string" && team ? team : null;
  const intent = form.get("intent");
  if (id && (intent === "archive" || intent === "restore"))
    await archiveTeam(scope, id, intent === "archive");
  else await saveTeam(scope, id, teamSchema.parse(formObject(form)));
  return redirect(`/${scope.slug}/settings/teams`);
});

type Values = { name?: string; sport?: string; sex?: string; underAge?: number | null };

function TeamFields({ name, sport, sex, underAge }: Values) {
  return (
    <>
      <Field name="name" label="Name" help="As it stands in your files.">
        <TextInput defaultValue={name} />
      </Field>
      <Field name="sport" label="Sport">
        <Select
          width="medium"
          placeholder="Choose the sport"
          options={choicesOf(sportWords)}
          defaultValue={sport}
        />
      </Field>
      <Field name="sex" label="For">
        <Select
          width="medium"
          placeholder="Choose one"
          options={choicesOf(teamSexWords)}
          defaultValue={sex}
        />
      </Field>
      <Field
        name="underAge"
        label="Under the age of"
        optional
        help="15 for an under-15 team; empty for seniors."
      >
        <NumberInput width="short" defaultValue={underAge ?? ""} />
      </Field>
    </>
  );
}

function TeamWords({ team }: { team: Route.ComponentProps["loaderData"]["teams"][number] }) {
  const details = [
    sportWords[team.sport as Sport],
    teamSexWords[team.sex as TeamSex],
    team.underAge ? `under ${team.underAge}` : "seniors",
    team.archivedAt ? "archived" : "",
  ];
  return (
    <span>
      {team.name}
      <span className="font-normal text-soft">, {details.filter(Boolean).join(", ")}</span>
    </span>
  );
}

export default function Teams({ loaderData, actionData }: Route.ComponentProps) {
  const { teams, base, mayWrite } = loaderData;
  const adding = actionData && !actionData.values.team ? actionData : undefined;
  return (
    <Page width="form">
      <PageHeading>Teams</PageHeading>
      <SettingsLinks base={base} here="Teams" />
      {teams.length === 0 ? (
        <EmptyState title="No team yet">
          Teams belong here. A roster import offers to add the teams that it names, so you may leave this to
          the athletic trainer.
        </EmptyState>
      ) : null}
      {teams.map((team) => {
        const editing = actionData?.values.team === team.id ? actionData : undefined;
        return mayWrite ? (
          <Disclosure key={team.id} summary={<TeamWords team={team} />} open={editing !== undefined}>
            <Form {...(editing ?? {})} idPrefix={`team-${team.id}`}>
              <input type="hidden" name="team" value={team.id} />
              <TeamFields {...team} />
              <div className="flex flex-wrap gap-3">
                <Button name="intent" value="save">
                  Save
                </Button>
                <Button look="quiet" name="intent" value={team.archivedAt ? "restore" : "archive"}>
                  {team.archivedAt ? "Bring back" : "Archive"}
                </Button>
              </div>
            </Form>
          </Disclosure>
        ) : (
          <p key={team.id} className="border-0 border-b border-line py-2.5">
            <TeamWords team={team} />
          </p>
        );
      })}
      {mayWrite ? (
        <Region heading="Add a team">
          <Form {...(adding ?? {})} idPrefix="new">
            <TeamFields />
            <Button look="primary">Add the team</Button>
          </Form>
        </Region>
      ) : null}
    </Page>
  );
}
