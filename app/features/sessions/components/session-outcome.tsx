import type { ReactNode } from "react";
import {
  Button,
  Disclosure,
  Field,
  Form,
  type FormErrors,
  type FormValues,
  NumberInput,
  Region,
  TextInput,
} from "~/ui";
import { fullTimeOf } from "../session-state";
import type { ListedSession } from "../sessions.server";

type Refused = { errors?: FormErrors | null; values?: FormValues | null };
type Props = {
  session: ListedSession;
  dayHasCome: boolean;
  /** Errors and values of the form with this intent, when it was refused. */
  refused: (intent: string) => Refused;
};

function OutcomeForm({
  session,
  intent,
  label,
  refusal,
  danger = false,
  children,
}: {
  session: ListedSession;
  intent: string;
  label: string;
  refusal: Refused;
  danger?: boolean;
  children: ReactNode;
}) {
  return (
    <Form {...refusal} idPrefix={intent}>
      <input type="hidden" name="seen" value={session.state} />
      {children}
      <Button look={danger ? "danger" : "primary"} size="large" name="intent" value={intent}>
        {label}
      </Button>
    </Form>
  );
}

/** Whether the session took place: held, stopped early, or cancelled with a reason. */
export function SessionOutcome({ session, dayHasCome, refused }: Props) {
  const { state, status } = session;
  const asks = status === "unconfirmed";
  const failed = (intent: string) => refused(intent).errors !== undefined;
  return (
    <Region heading={asks ? "Was it held?" : "Whether it took place"}>
      {dayHasCome && (state === "planned" || state === "cancelled") ? (
        <OutcomeForm session={session} intent="hold" label="Confirm it was held" refusal={refused("hold")}>
          <Field name="actualMinutes" label="It lasted" optional>
            <NumberInput size="large" unit="minutes" defaultValue={fullTimeOf(session) ?? ""} />
          </Field>
        </OutcomeForm>
      ) : null}
      {state === "held" ? (
        <Disclosure summary="Change how long it lasted" open={failed("hold")}>
          <OutcomeForm session={session} intent="hold" label="Save the minutes" refusal={refused("hold")}>
            <Field name="actualMinutes" label="It lasted" optional>
              <NumberInput size="large" unit="minutes" defaultValue={fullTimeOf(session) ?? ""} />
            </Field>
          </OutcomeForm>
        </Disclosure>
      ) : null}
      {dayHasCome && state !== "cancelled" ? (
        <Disclosure
          summary={state === "abandoned" ? "Change when it stopped" : "It stopped early"}
          open={failed("abandon")}
        >
          <OutcomeForm
            session={session}
            intent="abandon"
            label="Save as abandoned"
            refusal={refused("abandon")}
          >
            <Field
              name="abandonedAfter"
              label="It stopped after"
              help="Athletes' own minutes are kept as entered."
            >
              <NumberInput size="large" unit="minutes" defaultValue={session.abandonedAfter ?? ""} />
            </Field>
          </OutcomeForm>
        </Disclosure>
      ) : null}
      {state === "abandoned" ? (
        <Disclosure summary="It was held to its end" open={failed("hold")}>
          <OutcomeForm session={session} intent="hold" label="Confirm it was held" refusal={refused("hold")}>
            <Field name="actualMinutes" label="It lasted" optional>
              <NumberInput
                size="large"
                unit="minutes"
                defaultValue={session.actualMinutes ?? session.plannedMinutes ?? ""}
              />
            </Field>
          </OutcomeForm>
        </Disclosure>
      ) : null}
      {state === "cancelled" ? null : (
        <Disclosure summary="It was cancelled" open={failed("cancel")}>
          <OutcomeForm
            session={session}
            intent="cancel"
            label="Cancel the session"
            refusal={refused("cancel")}
            danger
          >
            <Field
              name="cancelReason"
              label="Why it was cancelled"
              help="Such as weather, pitch closed, too few."
            >
              <TextInput size="large" maxLength={200} />
            </Field>
          </OutcomeForm>
        </Disclosure>
      )}
    </Region>
  );
}
