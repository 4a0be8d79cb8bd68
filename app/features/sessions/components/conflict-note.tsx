import { presenceWords } from "~/features/vocabulary";
import type { FieldConflict, FieldValue } from "~/platform/merge-fields";
import { Note } from "~/ui";
import type { Presence } from "~db/schema/codes";
import type { ShownAthlete } from "../attendance.server";

function valueWords(value: FieldValue): string {
  if (value === null) return "nothing entered";
  if (typeof value !== "object") return String(value);
  const presence = presenceWords[value.presence as Presence] ?? "";
  return value.presence === "took_part" ? `${presence}, ${value.minutes} min` : presence;
}

const fieldWords: Record<string, string> = { headcount: "Number of athletes", minutes: "Minutes" };

/** Both values of each field that two people entered differently. Nothing was changed. */
export function AttendanceConflict({
  conflicts,
  athletes,
}: {
  conflicts: readonly FieldConflict[];
  athletes: readonly ShownAthlete[];
}) {
  const nameOf = (field: string) => {
    const athlete = athletes.find(({ id }) => field === `athlete:${id}`);
    return athlete ? `${athlete.givenName} ${athlete.familyName}` : (fieldWords[field] ?? field);
  };
  return (
    <Note kind="attention" role="alert" title="Somebody else entered something different meanwhile">
      <p>Nothing was changed. Your entries are still in the form; save again to replace theirs with yours.</p>
      <ul>
        {conflicts.map(({ field, stored, value }) => (
          <li key={field}>
            <strong className="font-medium">{nameOf(field)}</strong>: stored now {valueWords(stored)}; yours{" "}
            {valueWords(value)}
          </li>
        ))}
      </ul>
    </Note>
  );
}
