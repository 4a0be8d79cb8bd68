import { forgotPasswordSchema, formObject } from "~/features/accounts/accounts.schema";
import { askForPasswordReset } from "~/features/accounts/sign-in.server";
import { clientOf } from "~/middleware/client.server";
import { answerForm } from "~/middleware/handlers.server";
import { Button, Field, Form, FormActions, Note, PageHeading, TextInput, TextLink } from "~/ui";
import type { Route } from "./+types/forgot-password";

export const meta = () => [{ title: "Forgotten password - Haleside" }];

export function action({ request, context }: Route.ActionArgs) {
  return answerForm(request, async (form) => {
    const { email } = forgotPasswordSchema.parse(formObject(form));
    await askForPasswordReset(clientOf(request, context), email);
    return { sentTo: email };
  });
}

export default function ForgotPassword({ actionData }: Route.ComponentProps) {
  if (actionData && "sentTo" in actionData)
    return (
      <>
        <PageHeading>Look in your e-mail</PageHeading>
        <Note kind="info" role="status">
          If {actionData.sentTo} has an account, a link to choose a new password is on its way. It works for
          one hour. Nothing there? Look among unwanted mail, or check the address and ask again.
        </Note>
        <TextLink to="/sign-in">Back to sign-in</TextLink>
      </>
    );
  return (
    <>
      <PageHeading below="We send a link with which you choose a new one.">Forgotten password</PageHeading>
      <Form {...(actionData ?? {})} summaryTitle="The link is not sent yet">
        <Field name="email" label="E-mail address" help="The one you sign in with.">
          <TextInput type="email" autoComplete="username" inputMode="email" autoCapitalize="none" />
        </Field>
        <FormActions>
          <Button look="primary">Send the link</Button>
        </FormActions>
      </Form>
    </>
  );
}
