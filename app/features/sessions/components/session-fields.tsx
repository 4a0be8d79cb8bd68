import { choicesOf, sessionKindWords, surfaceWords } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { ChoiceButtons, DateInput, Field, NumberInput, Select, TimeInput } from "~/ui";

type Props = {
  venues: readonly { id: string; name: string }[];
  values: {
    day: string;
    startTime: string | null;
    kind: string;
    plannedMinutes: number | null;
    surface: string | null;
    venueId: string | null;
  };
};

/** What is planned of a session; shared by adding and editing. */
export function SessionFields({ venues, values }: Props) {
  return (
    <>
      <ChoiceButtons
        name="kind"
        legend="Kind"
        size="large"
        choices={choicesOf(sessionKindWords)}
        defaultValue={values.kind}
      />
      <Field name="day" label="Day" help="Such as 27 3 2026 or 27 Mar 2026.">
        <DateInput size="large" defaultValue={formatDay(values.day, "figures")} />
      </Field>
      <Field name="startTime" label="Start" optional>
        <TimeInput size="large" defaultValue={values.startTime ?? ""} />
      </Field>
      <Field name="plannedMinutes" label="Planned minutes" optional>
        <NumberInput size="large" unit="minutes" defaultValue={values.plannedMinutes ?? ""} />
      </Field>
      <Field name="surface" label="Surface" optional>
        <Select
          size="large"
          width="medium"
          placeholder="Not stated"
          defaultValue={values.surface ?? ""}
          options={choicesOf(surfaceWords)}
        />
      </Field>
      <Field name="venueId" label="Venue" help="Its emergency card stands on the session's page." optional>
        <Select
          size="large"
          width="medium"
          placeholder="Not stated"
          defaultValue={values.venueId ?? ""}
          options={venues.map(({ id, name }) => ({ value: id, label: name }))}
        />
      </Field>
    </>
  );
}
