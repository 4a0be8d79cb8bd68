import { redirect, useSearchParams } from "react-router";
import { verifyEmail } from "~/features/accounts/sign-in.server";
import { answerForm } from "~/middleware/handlers.server";
import { Button, Form, FormActions, PageHeading, TextLink } from "~/ui";
import type { Route } from "./+types/verify-email";

export const meta = () => [{ title: "Confirm your address - Haleside" }];

/** The button posts: mail scanners open links, and a GET must not use up the token. */
export function action({ request }: Route.ActionArgs) {
  return answerForm(request, async (form) => {
    await verifyEmail(String(form.get("proof") ?? ""));
    return redirect("/sign-in?done=verified");
  });
}

export default function VerifyEmail({ actionData }: Route.ComponentProps) {
  const [params] = useSearchParams();
  return (
    <>
      <PageHeading below="So that we know that messages for you reach you.">
        Confirm your e-mail address
      </PageHeading>
      <Form {...(actionData ?? {})} summaryTitle="Your address is not confirmed yet">
        <input type="hidden" name="proof" value={params.get("token") ?? ""} />
        <FormActions>
          <Button look="primary">Confirm my address</Button>
          <TextLink to="/sign-in">To sign-in</TextLink>
        </FormActions>
      </Form>
    </>
  );
}
