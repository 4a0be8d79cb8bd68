import { redirect, useSearchParams } from "react-router";
import { z } from "zod";
import { changeTeamsSchema, formObject, inviteSchema } from "~/features/accounts/accounts.schema";
import { InviteForm } from "~/features/accounts/components/invite-form";
import { MemberItem, OpenInvitation } from "~/features/accounts/components/people-list";
import { SettingsLinks } from "~/features/accounts/components/settings-links";
import {
  changeTeams,
  confirmInvitation,
  confirmMember,
  endMember,
  grantRole,
  invite,
  listPeople,
  removeRole,
  resendInvitation,
  revokeInvitation,
} from "~/features/accounts/people.server";
import { may } from "~/features/accounts/permissions";
import type { MemberScope } from "~/features/accounts/scope.server";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import { notFound } from "~/platform/errors";
import { Note, Page, PageHeading, Region } from "~/ui";
import { roles } from "~db/schema/codes";
import type { Route } from "./+types/people";

export const meta = () => [{ title: "People - Haleside" }];

export const loader = memberLoader(async ({ scope }) => ({
  ...(await listPeople(scope)),
  base: `/${scope.slug}`,
  self: scope.personId,
  timeZone: scope.timeZone,
  manages: may(scope.roles, "people.manage"),
  confirms: may(scope.roles, "people.confirm"),
}));

const role = z.enum(roles);

/** What each button of the page does; permissions are checked in the use cases. */
function perform(scope: MemberScope, form: FormData) {
  const person = String(form.get("person") ?? "");
  const invitation = String(form.get("invitation") ?? "");
  switch (form.get("intent")) {
    case "invite":
      return invite(scope, inviteSchema.parse(formObject(form)));
    case "resend":
      return resendInvitation(scope, invitation);
    case "revoke":
      return revokeInvitation(scope, invitation);
    case "confirm-invitation":
      return confirmInvitation(scope, invitation);
    case "confirm":
      return confirmMember(scope, person);
    case "teams":
      return changeTeams(scope, person, changeTeamsSchema.parse(formObject(form)));
    case "grant":
      return grantRole(scope, person, role.parse(form.get("role")));
    case "remove":
      return removeRole(scope, person, role.parse(form.get("role")));
    case "end":
      return endMember(scope, person);
    default:
      throw notFound("That action");
  }
}

export const action = memberAction(async ({ scope, form }) => {
  await perform(scope, form);
  return redirect(`/${scope.slug}/settings/people?done=${form.get("intent")}`);
});

const messages: Record<string, string> = {
  invite: "The invitation is on its way.",
  resend: "The invitation is on its way again; the earlier link no longer works.",
  revoke: "The invitation is withdrawn.",
  "confirm-invitation": "Confirmed: the role begins when the invitation is accepted.",
  confirm: "Confirmed: the role counts from now on.",
  end: "The membership has ended. What this person recorded stays theirs.",
};

export default function People({ loaderData, actionData }: Route.ComponentProps) {
  const { members, invitations, teams, base, manages, confirms, self, timeZone } = loaderData;
  const [params] = useSearchParams();
  const done = params.get("done");
  const current = members.filter(({ endedAt }) => !endedAt);
  const ended = members.filter(({ endedAt }) => endedAt);
  return (
    <Page width="text">
      <PageHeading below="Clinical roles (medical lead, athletic trainer) count once a medical lead has confirmed them.">
        People
      </PageHeading>
      <SettingsLinks base={base} here="People" />
      {done && !actionData ? (
        <Note kind="settled" role="status">
          {messages[done] ?? "Saved."}
        </Note>
      ) : null}
      {actionData && actionData.values.intent !== "invite" && actionData.errors.form ? (
        <Note kind="serious" role="alert">
          {actionData.errors.form.join(" ")}
        </Note>
      ) : null}
      {invitations.length > 0 ? (
        <Region heading="Invited, not yet accepted">
          <ul className="border-0">
            {invitations.map((invitation) => (
              <OpenInvitation
                key={invitation.id}
                invitation={invitation}
                teams={teams}
                manages={manages}
                confirms={confirms}
                timeZone={timeZone}
              />
            ))}
          </ul>
        </Region>
      ) : null}
      <Region heading="Members">
        <ul className="border-0">
          {current.map((member) => (
            <MemberItem
              key={member.personId}
              member={member}
              teams={teams}
              manages={manages}
              confirms={confirms && member.personId !== self}
            />
          ))}
        </ul>
        {ended.length > 0 ? (
          <p className="mt-4 max-w-prose text-soft">
            No longer members: {ended.map(({ displayName }) => displayName).join(", ")}.
          </p>
        ) : null}
      </Region>
      {manages ? (
        <Region heading="Invite somebody">
          <InviteForm
            teams={teams}
            actionData={actionData?.values.intent === "invite" ? actionData : undefined}
          />
        </Region>
      ) : null}
    </Page>
  );
}
