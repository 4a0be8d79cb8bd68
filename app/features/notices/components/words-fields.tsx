import { Field, Fieldset, TextArea, TextInput } from "~/ui";
import type { PlainWords } from "../notice-content";

type Props = { words: PlainWords; call: { name: string; phone: string } };

/** The parts that the athletic trainer may rewrite, drafted from the injury in plain words. */
export function WordsFields({ words, call }: Props) {
  return (
    <Fieldset
      legend="What the family will read"
      help="Short sentences, words of every day. Change whatever is not right. A line that begins with a dash becomes a point of a list."
    >
      <Field name="happened" label="What happened">
        <TextArea rows={5} className="field-sizing-content min-h-20" defaultValue={words.happened} />
      </Field>
      <Field name="done" label="What we did">
        <TextArea rows={3} className="field-sizing-content min-h-20" defaultValue={words.done} />
      </Field>
      <Field name="doNow" label="What to do now">
        <TextArea rows={5} className="field-sizing-content min-h-20" defaultValue={words.doNow} />
      </Field>
      <Field name="watchFor" label="What to watch for">
        <TextArea rows={3} className="field-sizing-content min-h-20" defaultValue={words.watchFor} />
      </Field>
      <Field name="emergency" label="When to call the emergency services">
        <TextArea rows={9} className="field-sizing-content min-h-20" defaultValue={words.emergency} />
      </Field>
      <Field name="callName" label="Whom to ask for" help="Also stands in the e-mail.">
        <TextInput defaultValue={call.name} autoComplete="off" />
      </Field>
      <Field name="callPhone" label="Phone number to call" help="Also stands in the e-mail.">
        <TextInput type="tel" defaultValue={call.phone} autoComplete="off" width="medium" />
      </Field>
    </Fieldset>
  );
}
