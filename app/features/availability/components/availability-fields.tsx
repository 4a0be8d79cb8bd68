import { choicesOf, restrictionWords } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { ChoiceButtons, DateInput, Field, NumberInput } from "~/ui";

const restrictionChoices = choicesOf(restrictionWords).filter(({ value }) => value !== "minutes_limit");

type Props = { today: string; state?: "full" | "modified" | "unavailable" };

/** The fields of a dated change. What belongs to "modified" alone appears with it, script or not. */
export function AvailabilityFields({ today, state }: Props) {
  return (
    <div className="group/state">
      <ChoiceButtons
        name="state"
        legend="What they may do"
        layout="segments"
        defaultValue={state}
        choices={[
          { value: "full", label: "Full" },
          { value: "modified", label: "Modified" },
          { value: "unavailable", label: "Unavailable" },
        ]}
      />
      <div className="hidden group-has-[[value=modified]:checked]/state:block">
        <ChoiceButtons
          name="restrictions"
          legend="What to leave out"
          help="The coach reads these words, and no reason."
          mode="multiple"
          choices={restrictionChoices}
        />
        <Field name="minutesLimit" label="At most" optional>
          <NumberInput width="short" unit="minutes" />
        </Field>
      </div>
      <Field name="fromDay" label="From" help="Holds from this day until the next change.">
        <DateInput defaultValue={formatDay(today, "figures")} />
      </Field>
      <div className="group-has-[[value=full]:checked]/state:hidden">
        <Field name="expectedOn" label="Full availability expected on" optional>
          <DateInput />
        </Field>
      </div>
    </div>
  );
}
