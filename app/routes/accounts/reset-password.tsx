import { redirect, useSearchParams } from "react-router";
import { formObject, resetPasswordSchema } from "~/features/accounts/accounts.schema";
import { resetPassword } from "~/features/accounts/sign-in.server";
import { clientOf } from "~/middleware/client.server";
import { answerForm } from "~/middleware/handlers.server";
import { Button, Field, Form, FormActions, PageHeading, TextInput, TextLink } from "~/ui";
import type { Route } from "./+types/reset-password";

export const meta = () => [{ title: "New password - Haleside" }];

export function action({ request, context }: Route.ActionArgs) {
  return answerForm(request, async (form) => {
    const input = resetPasswordSchema.parse(formObject(form));
    await resetPassword(clientOf(request, context), input);
    return redirect("/sign-in?done=password-set");
  });
}

export default function ResetPassword({ actionData }: Route.ComponentProps) {
  const [params] = useSearchParams();
  return (
    <>
      <PageHeading below="You are signed out everywhere once it is saved.">Choose a new password</PageHeading>
      <Form {...(actionData ?? {})}>
        <input type="hidden" name="token" value={params.get("token") ?? ""} />
        <Field
          name="password"
          label="New password"
          help="At least 12 characters. Three or four unrelated words work well."
        >
          <TextInput type="password" autoComplete="new-password" />
        </Field>
        <FormActions>
          <Button look="primary">Save the password</Button>
          <TextLink to="/forgot-password">Ask for a new link</TextLink>
        </FormActions>
      </Form>
    </>
  );
}
