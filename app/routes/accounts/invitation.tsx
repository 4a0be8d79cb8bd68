import { redirect } from "react-router";
import { acceptSchema, formObject } from "~/features/accounts/accounts.schema";
import { currentPerson } from "~/features/accounts/identity.server";
import {
  acceptInvitation,
  createInvitedPerson,
  hasAccount,
  readInvitation,
} from "~/features/accounts/invitations.server";
import { roleNames } from "~/features/accounts/permissions";
import { signIn } from "~/features/accounts/sign-in.server";
import { clientOf } from "~/middleware/client.server";
import { errorResponse } from "~/middleware/error-response.server";
import { answerForm } from "~/middleware/handlers.server";
import { Button, ButtonLink, Field, Form, FormActions, Note, PageHeading, TextInput } from "~/ui";
import type { Route } from "./+types/invitation";

export const meta = () => [{ title: "Invitation - Haleside" }];

export async function loader({ request, params, context }: Route.LoaderArgs) {
  try {
    const { clientAddress } = clientOf(request, context);
    const invitation = await readInvitation(params.organisationId, params.token, clientAddress);
    const person = await currentPerson(request);
    return {
      invitation,
      signedInAs: person?.email ?? null,
      known: await hasAccount(invitation.email),
    };
  } catch (error) {
    throw errorResponse(error);
  }
}

export function action({ request, params, context }: Route.ActionArgs) {
  const client = clientOf(request, context);
  const accept = (person: { id: string; email: string; name: string }) =>
    acceptInvitation(params.organisationId, params.token, person, client.clientAddress);
  return answerForm(request, async (form) => {
    const person = await currentPerson(request);
    if (person) return redirect(`/${await accept(person)}/today`);
    const { email } = await readInvitation(params.organisationId, params.token, client.clientAddress);
    const input = acceptSchema.parse(formObject(form));
    const slug = await accept(await createInvitedPerson(email, input));
    const headers = await signIn(client, { email, password: input.password });
    return redirect(`/${slug}/today`, { headers });
  });
}

export default function Invitation({ loaderData, actionData, params }: Route.ComponentProps) {
  const { invitation, signedInAs, known } = loaderData;
  const { organisation, email, roles, teams, needsConfirmation } = invitation;
  const words = roles.map((role) => roleNames[role]).join(" and ");
  const here = `/invitations/${params.organisationId}/${params.token}`;
  const mine = signedInAs?.toLowerCase() === email;
  return (
    <>
      <PageHeading below={`As ${words}, ${teams === "all" ? "for all teams" : `for ${teams.join(", ")}`}.`}>
        {organisation} invites you
      </PageHeading>
      {needsConfirmation ? (
        <Note kind="info">
          This role opens clinical records, so a medical lead confirms it before it begins. You can accept
          now.
        </Note>
      ) : null}
      {mine ? (
        <Form {...(actionData ?? {})}>
          <p className="mb-4">You are signed in as {email}.</p>
          <Button look="primary">Accept the invitation</Button>
        </Form>
      ) : signedInAs ? (
        <Note kind="attention" title="You are signed in with another address">
          <p>
            This invitation is for {email}; you are signed in as {signedInAs}. Sign out first, then open the
            link in the mail again.
          </p>
          <Form action="/sign-out">
            <Button>Sign out</Button>
          </Form>
        </Note>
      ) : known ? (
        <>
          <p className="mb-4 max-w-prose">There is an account for {email}. Sign in to accept.</p>
          <ButtonLink look="primary" to={`/sign-in?next=${encodeURIComponent(here)}`}>
            Sign in
          </ButtonLink>
        </>
      ) : (
        <Form {...(actionData ?? {})}>
          <p className="mb-5 max-w-prose">
            Your account will be for <strong className="font-medium">{email}</strong>.
          </p>
          <Field name="name" label="Your name" help="As colleagues know you.">
            <TextInput autoComplete="name" defaultValue={invitation.name} />
          </Field>
          <Field
            name="password"
            label="Password"
            help="At least 12 characters. Three or four unrelated words work well."
          >
            <TextInput type="password" autoComplete="new-password" />
          </Field>
          <FormActions>
            <Button look="primary">Accept the invitation</Button>
          </FormActions>
        </Form>
      )}
    </>
  );
}
