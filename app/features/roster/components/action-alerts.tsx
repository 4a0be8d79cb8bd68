import { Button, Disclosure, Field, Form, type FormErrors, type FormValues, Note, TextInput } from "~/ui";

type Props = {
  alerts: { id: string; text: string; agreedWith: string | null }[];
  mayWrite: boolean;
  actionData: { errors: FormErrors; values: FormValues } | undefined;
};

/** What the family lets coaches see and act on, in words that can be acted on. */
export function ActionAlerts({ alerts, mayWrite, actionData }: Props) {
  const mine = actionData?.values.intent === "alert" ? actionData : undefined;
  return (
    <>
      {alerts.map(({ id, text, agreedWith }) => (
        <Note key={id} kind="attention" title={text}>
          <p className="text-soft">Agreed with {agreedWith ?? "the family"}, for coaches to see.</p>
          {mayWrite ? (
            <Form>
              <input type="hidden" name="alert" value={id} />
              <Button look="quiet" name="intent" value="end-alert">
                No longer needed
              </Button>
            </Form>
          ) : null}
        </Note>
      ))}
      {mayWrite ? (
        <Disclosure summary="Add an action alert for coaches" open={mine !== undefined}>
          <p className="mb-4 max-w-prose text-soft">
            Only what a coach must do, and only with the family&rsquo;s agreement. Coaches see these words
            beside the name.
          </p>
          <Form {...(mine ?? {})} idPrefix="alert">
            <Field
              name="text"
              label="What a coach must do"
              help="Such as: carries adrenaline, use it, call an ambulance."
            >
              <TextInput />
            </Field>
            <Field name="agreedWith" label="Who in the family agreed">
              <TextInput />
            </Field>
            <Button name="intent" value="alert">
              Add the alert
            </Button>
          </Form>
        </Disclosure>
      ) : null}
    </>
  );
}
