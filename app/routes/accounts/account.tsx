import { redirect, useSearchParams } from "react-router";
import { changePasswordSchema, formObject } from "~/features/accounts/accounts.schema";
import {
  changePassword,
  listSessions,
  revokeOtherSessions,
  revokeSession,
} from "~/features/accounts/sign-in.server";
import { personOf } from "~/middleware/access";
import { clientOf } from "~/middleware/client.server";
import { answerForm } from "~/middleware/handlers.server";
import { Button, Field, Form, FormActions, Note, PageHeading, Region, TextInput } from "~/ui";
import type { Route } from "./+types/account";

export const meta = () => [{ title: "My account - Haleside" }];

export async function loader({ request, context }: Route.LoaderArgs) {
  const person = personOf(context);
  return {
    name: person.name,
    email: person.email,
    sessions: await listSessions(clientOf(request, context), person.sessionId),
  };
}

export function action({ request, context }: Route.ActionArgs) {
  const person = personOf(context);
  const client = clientOf(request, context);
  return answerForm(request, async (form) => {
    const intent = form.get("intent");
    if (intent === "end-session") {
      await revokeSession(client, String(form.get("session")));
      return redirect("/account?done=ended");
    }
    if (intent === "end-others") {
      await revokeOtherSessions(client);
      return redirect("/account?done=ended");
    }
    const headers = await changePassword(client, person, changePasswordSchema.parse(formObject(form)));
    return redirect("/account?done=password", { headers });
  });
}

const messages: Record<string, string> = {
  password: "Your new password is saved. You are signed out on every other device.",
  ended: "Done. That device is signed out.",
};

export default function Account({ loaderData, actionData }: Route.ComponentProps) {
  const { name, email, sessions } = loaderData;
  const [params] = useSearchParams();
  const message = messages[params.get("done") ?? ""];
  return (
    <>
      <PageHeading below={email}>{name}</PageHeading>
      {message && !actionData ? (
        <Note kind="settled" role="status">
          {message}
        </Note>
      ) : null}
      <Region heading="Change my password">
        <Form {...(actionData ?? {})}>
          <Field name="current" label="Current password">
            <TextInput type="password" autoComplete="current-password" />
          </Field>
          <Field
            name="password"
            label="New password"
            help="At least 12 characters. Three or four unrelated words work well."
          >
            <TextInput type="password" autoComplete="new-password" />
          </Field>
          <FormActions>
            <Button look="primary" name="intent" value="password">
              Save the password
            </Button>
          </FormActions>
        </Form>
      </Region>
      <Region heading="Where I am signed in">
        <ul className="border-0 border-t border-line">
          {sessions.map((session) => (
            <li
              key={session.id}
              className="flex flex-wrap items-center justify-between gap-3 border-0 border-b border-line py-2"
            >
              <span>
                {session.device}
                {session.current ? <strong className="font-medium">, this device</strong> : null}
              </span>
              {session.current ? null : (
                <Form>
                  <input type="hidden" name="session" value={session.id} />
                  <Button name="intent" value="end-session">
                    Sign out there
                  </Button>
                </Form>
              )}
            </li>
          ))}
        </ul>
        {sessions.length > 1 ? (
          <Form className="mt-4">
            <Button name="intent" value="end-others">
              Sign out everywhere else
            </Button>
          </Form>
        ) : null}
      </Region>
    </>
  );
}
