import { redirect, useSearchParams } from "react-router";
import { formObject, signInSchema } from "~/features/accounts/accounts.schema";
import { signIn } from "~/features/accounts/sign-in.server";
import { clientOf, safeNext } from "~/middleware/client.server";
import { answerForm } from "~/middleware/handlers.server";
import { Button, Field, Form, FormActions, LinkRow, Note, PageHeading, TextInput, TextLink } from "~/ui";
import type { Route } from "./+types/sign-in";

export const meta = () => [{ title: "Sign in - Haleside" }];

export function action({ request, context }: Route.ActionArgs) {
  return answerForm(request, async (form) => {
    const { email, password, next } = signInSchema.parse(formObject(form));
    const headers = await signIn(clientOf(request, context), { email, password });
    return redirect(safeNext(next), { headers });
  });
}

const messages: Record<string, string> = {
  "password-set": "Your new password is saved. Sign in with it.",
  verified: "Your e-mail address is confirmed. Sign in.",
  "signed-out": "You are signed out.",
};

export default function SignIn({ actionData }: Route.ComponentProps) {
  const [params] = useSearchParams();
  const message = messages[params.get("done") ?? ""];
  return (
    <>
      <PageHeading below="Injury surveillance and prevention for your teams.">Sign in</PageHeading>
      {message && !actionData ? (
        <Note kind="settled" role="status">
          {message}
        </Note>
      ) : null}
      <Form {...(actionData ?? {})} summaryTitle="You are not signed in yet">
        <input type="hidden" name="next" value={params.get("next") ?? ""} />
        <Field name="email" label="E-mail address">
          <TextInput type="email" autoComplete="username" inputMode="email" autoCapitalize="none" />
        </Field>
        <Field name="password" label="Password">
          <TextInput type="password" autoComplete="current-password" />
        </Field>
        <FormActions>
          <Button look="primary">Sign in</Button>
        </FormActions>
      </Form>
      <div className="mt-8">
        <LinkRow>
          <TextLink to="/forgot-password">I have forgotten my password</TextLink>
        </LinkRow>
        <p className="mt-3 max-w-prose text-soft">
          Accounts are by invitation only. If you should have one, ask your club&rsquo;s or school&rsquo;s
          administrator.
        </p>
      </div>
    </>
  );
}
