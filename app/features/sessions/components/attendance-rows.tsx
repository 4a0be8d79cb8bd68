import { useContext } from "react";
import { choicesOf, presenceWords } from "~/features/vocabulary";
import { joinClasses, Note, SpotMark } from "~/ui";
import { FieldError } from "~/ui/field";
import { FormContext, fieldId } from "~/ui/form-context";
import { inputClasses } from "~/ui/input-classes";
import { spotOf } from "../../availability/state-words";
import type { ShownAthlete } from "../attendance.server";
import { minutesName, presenceName } from "../attendance-form";

const sentText = (sent: string | string[] | undefined) => (Array.isArray(sent) ? sent[0] : sent);

/** A row begins anew when what is stored changes; what is typed in the others stays. */
const rowKey = ({ id, part }: ShownAthlete) => `${id} ${part ? `${part.presence} ${part.minutes}` : ""}`;

/** One athlete: the state of the day, their presence and minutes. */
function AttendanceRow({ athlete }: { athlete: ShownAthlete }) {
  const { errors, values, idPrefix } = useContext(FormContext);
  const { id, part } = athlete;
  const name = `${athlete.givenName} ${athlete.familyName}`;
  const messages = errors?.fields[minutesName(id)] ?? [];
  const errorId = `${fieldId(minutesName(id), idPrefix)}-error`;
  return (
    <li
      className={joinClasses(
        "grid grid-cols-[1fr_6rem] items-center gap-x-3 gap-y-2 border-0 border-b border-line py-3",
        "sm:grid-cols-[1fr_13rem_6rem]",
      )}
    >
      <div className="col-span-2 sm:col-span-1">
        <SpotMark spot={spotOf[athlete.state]} detail={athlete.words || undefined}>
          {name}
          {athlete.guest ? <span className="text-soft"> (guest)</span> : null}
        </SpotMark>
        {athlete.alerts.map((alert) => (
          <span key={alert} className="ml-7 block text-sm font-medium text-ember">
            {alert}
          </span>
        ))}
        <FieldError id={errorId} messages={messages} />
      </div>
      <select
        name={presenceName(id)}
        aria-label={`${name}: presence`}
        defaultValue={sentText(values?.[presenceName(id)]) ?? part?.presence ?? ""}
        className={joinClasses(inputClasses("full", "large"), "pr-8")}
      >
        <option value="">Nothing entered</option>
        {choicesOf(presenceWords).map(({ value, label }) => (
          <option key={value} value={value}>
            {label}
          </option>
        ))}
      </select>
      <input
        id={fieldId(minutesName(id), idPrefix)}
        name={minutesName(id)}
        aria-label={`${name}: minutes`}
        inputMode="decimal"
        autoComplete="off"
        placeholder="min"
        aria-invalid={messages.length > 0 || undefined}
        aria-describedby={messages.length > 0 ? errorId : undefined}
        defaultValue={
          sentText(values?.[minutesName(id)]) ?? (part?.presence === "took_part" ? String(part.minutes) : "")
        }
        className={joinClasses(inputClasses("full", "large"), "text-right tabular-nums")}
      />
    </li>
  );
}

/** The roster of the day and the guests. The unavailable stand last: they are never preselected. */
export function AttendanceRows({ athletes }: { athletes: readonly ShownAthlete[] }) {
  const expected = athletes.filter(({ state }) => state !== "unavailable");
  const unavailable = athletes.filter(({ state }) => state === "unavailable");
  return (
    <>
      <ul>
        {expected.map((athlete) => (
          <AttendanceRow key={rowKey(athlete)} athlete={athlete} />
        ))}
      </ul>
      {unavailable.length > 0 ? (
        <>
          <h2 className="mt-6 text-base font-medium">Unavailable</h2>
          {unavailable.some(({ part }) => part?.presence === "took_part") ? (
            <Note kind="attention">
              An unavailable athlete is entered as taking part. If that is right, tell the athletic trainer
              today.
            </Note>
          ) : null}
          <ul>
            {unavailable.map((athlete) => (
              <AttendanceRow key={rowKey(athlete)} athlete={athlete} />
            ))}
          </ul>
        </>
      ) : null}
    </>
  );
}
