import {
  Button,
  Checkbox,
  ChoiceButtons,
  DateInput,
  ErrorSummary,
  Field,
  Fieldset,
  FileInput,
  FormActions,
  NumberInput,
  Page,
  PageHeading,
  Select,
  TextArea,
  TextInput,
  TimeInput,
} from "~/ui";
import { FormContext } from "~/ui/form-context";
import { SearchSelect } from "~/ui/search-select";

const people = [
  { id: "a1", label: "Tova Inchmere", detail: "girls under 16" },
  { id: "a2", label: "Tova Larkfield", detail: "girls under 14" },
  { id: "a3", label: "Runa Penhallow", detail: "girls under 16" },
];
const findPeople = async (query: string) =>
  people.filter(({ label }) => label.toLowerCase().includes(query.toLowerCase()));

const errors = {
  form: ["Someone else changed this record at 17:40. Your entries are below."],
  fields: {
    name: ["Write the athlete's family name."],
    born: ["This could be two different days. Write the month as a word, like 27 Mar 2014."],
    side: ["Choose a side."],
    agree: ["Tick this to go on."],
  },
};

/** Every field, some with errors. */
export function Forms() {
  return (
    <Page width="form">
      <PageHeading below="Draft kept at 17:52">Log an injury</PageHeading>
      <form noValidate method="post">
        <ErrorSummary errors={errors} />
        <FormContext
          value={{ errors, values: { born: "03/04/2015", name: "", signs: ["pop"] }, idPrefix: "field" }}
        >
          <Field name="athlete" label="Athlete">
            <SearchSelect load={findPeople} />
          </Field>
          <Field name="name" label="Family name">
            <TextInput />
          </Field>
          <Field name="born" label="Date of birth" help="Day, month and year, for example 27 3 2014.">
            <DateInput />
          </Field>
          <Field name="at" label="Time">
            <TimeInput defaultValue="17:30" />
          </Field>
          <Field name="minutes" label="Minutes" optional>
            <NumberInput unit="minutes" />
          </Field>
          <Field name="team" label="Team">
            <Select placeholder="Choose a team" options={[{ value: "1", label: "Girls under 16" }]} />
          </Field>
          <ChoiceButtons
            name="when"
            legend="When"
            layout="segments"
            defaultValue="now"
            choices={[
              { value: "now", label: "This training" },
              { value: "earlier", label: "Earlier" },
              { value: "out", label: "Not at the club" },
            ]}
          />
          <ChoiceButtons
            name="side"
            legend="Side"
            layout="segments"
            choices={[
              { value: "l", label: "Left" },
              { value: "r", label: "Right" },
              { value: "b", label: "Both" },
            ]}
          />
          <ChoiceButtons
            name="signs"
            legend="Signs"
            mode="multiple"
            help="Choose all that apply."
            size="large"
            choices={[
              { value: "pop", label: "Pop felt or heard" },
              { value: "swelling", label: "Swelling already" },
              { value: "weight", label: "Cannot bear weight" },
              { value: "locked", label: "Locked", disabled: true },
            ]}
          />
          <Fieldset legend="What else" help="This can wait.">
            <Field name="words" label="In words" optional>
              <TextArea />
            </Field>
            <Field name="file" label="A document" help="PDF or photo, at most 10 MB.">
              <FileInput />
            </Field>
            <Checkbox
              name="agree"
              label="The guardian has been told by phone"
              help="Phone first; the notice confirms."
            />
          </Fieldset>
          <FormActions note="Five details can wait.">
            <Button look="primary" size="large">
              Save now, complete later
            </Button>
            <Button look="quiet">Leave it</Button>
          </FormActions>
        </FormContext>
      </form>
    </Page>
  );
}
