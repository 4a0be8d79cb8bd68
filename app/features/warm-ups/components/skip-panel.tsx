import { choicesOf, skipReasonWords } from "~/features/vocabulary";
import { Button, buttonClasses, ChoiceButtons, Field, TextInput } from "~/ui";

/** "Not done today", with the reason: opened in place, so that it works without script. */
export function SkipPanel({ error, open }: { error?: string[]; open: boolean }) {
  return (
    <details className="group open:col-span-2" open={open}>
      <summary className={`${buttonClasses({ size: "large", wide: true })} list-none`}>
        Not done today
      </summary>
      <div className="mt-3 border-0 border-l-[6px] border-ember bg-ember-wash px-4 pt-3 pb-4">
        <ChoiceButtons
          name="skipReason"
          legend="Why not?"
          size="large"
          choices={choicesOf(skipReasonWords)}
          {...(error ? { errors: error } : {})}
        />
        <Field name="skipNote" label="In words" optional>
          <TextInput size="large" maxLength={200} />
        </Field>
        <Button look="primary" size="large" wide name="intent" value="skip">
          Save: not done
        </Button>
      </div>
    </details>
  );
}
