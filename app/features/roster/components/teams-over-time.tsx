import { formatDay } from "~/platform/days";
import { Button, DateInput, Disclosure, Field, Form, type FormErrors, type FormValues, Select } from "~/ui";

type Props = {
  entries: { id: string; teamId: string; team: string; fromDay: string; toDay: string | null }[];
  teams: { id: string; name: string }[];
  today: string;
  mayWrite: boolean;
  actionData: { errors: FormErrors; values: FormValues } | undefined;
};

/** The athlete's memberships of teams, each from a day to a day; leaving and joining with dates. */
export function TeamsOverTime({ entries, teams, today, mayWrite, actionData }: Props) {
  const own = new Set(teams.map(({ id }) => id));
  const joining = actionData?.values.intent === "join" ? actionData : undefined;
  return (
    <>
      {entries.length === 0 ? <p className="text-soft">No team yet.</p> : null}
      <ul className="border-0">
        {entries.map((entry) => {
          const leaving = actionData?.values.entry === entry.id ? actionData : undefined;
          const open = !entry.toDay || entry.toDay >= today;
          return (
            <li key={entry.id} className="border-0 border-b border-line py-2.5">
              <span className="font-medium">{entry.team}</span>
              <span className="text-soft">
                , from {formatDay(entry.fromDay)}
                {entry.toDay ? ` to ${formatDay(entry.toDay)}` : ""}
              </span>
              {mayWrite && open && own.has(entry.teamId) ? (
                <Disclosure summary={`Leaves ${entry.team}`} open={leaving !== undefined}>
                  <Form {...(leaving ?? {})} idPrefix={`leave-${entry.id}`}>
                    <input type="hidden" name="entry" value={entry.id} />
                    <Field
                      name="toDay"
                      label="Last day on this team"
                      help="Days before stay counted for this team."
                    >
                      <DateInput defaultValue={formatDay(today, "figures")} />
                    </Field>
                    <Button name="intent" value="leave">
                      Save the last day
                    </Button>
                  </Form>
                </Disclosure>
              ) : null}
            </li>
          );
        })}
      </ul>
      {mayWrite ? (
        <Disclosure summary="Joins a team" open={joining !== undefined}>
          <Form {...(joining ?? {})} idPrefix="join">
            <Field name="team" label="Team">
              <Select
                placeholder="Choose a team"
                options={teams.map(({ id, name }) => ({ value: id, label: name }))}
              />
            </Field>
            <Field name="fromDay" label="First day">
              <DateInput defaultValue={formatDay(today, "figures")} />
            </Field>
            <Field name="toDay" label="Last day" optional help="Leave empty while it goes on.">
              <DateInput />
            </Field>
            <Button name="intent" value="join">
              Put on the team
            </Button>
          </Form>
        </Disclosure>
      ) : null}
    </>
  );
}
