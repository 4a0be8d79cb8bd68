import type { FieldChange, FieldValue } from "~/platform/merge-fields";
import type { FormErrors } from "~/ui";
import { type Part, partField, partValue, proposePart } from "./attendance";
import { participationSchema } from "./sessions.schema";

type Athlete = Parameters<typeof proposePart>[0] & { id: string };

/** The form's own names for one athlete. */
export const presenceName = (athleteId: string) => `presence-${athleteId}`;
export const minutesName = (athleteId: string) => `minutes-${athleteId}`;

export type AttendanceForm = {
  /** "everyone": who has nothing entered yet gets full time; the unavailable never do. */
  everyone: boolean;
  /** Full time of the session in minutes; null when nobody said. */
  fullTime: number | null;
  /** What the form was opened with, by athlete. */
  base: Readonly<Record<string, FieldValue>>;
  text: (name: string) => string;
};

const needsFullTime = "Enter how long the session lasted, so that full time is known.";

/**
 * What the attendance form changes, field by field against what it was opened with. Minutes left empty of somebody
 * who took part are full time.
 * @returns the changes, or what has to be put right
 */
export function readAttendanceForm(
  athletes: readonly Athlete[],
  form: AttendanceForm,
): { changes: Record<string, FieldChange> } | { errors: FormErrors } {
  const fields: Record<string, string[]> = {};
  const changes: Record<string, FieldChange> = {};
  if (form.everyone && form.fullTime === null) return { errors: { fields: { fullTime: [needsFullTime] } } };
  for (const athlete of athletes) {
    const read = readPart(athlete, form);
    if ("error" in read) {
      fields[minutesName(athlete.id)] = [read.error];
      continue;
    }
    const base = form.base[athlete.id] ?? null;
    const value = partValue(read.part);
    if (JSON.stringify(base) !== JSON.stringify(value)) changes[partField(athlete.id)] = { base, value };
  }
  return Object.keys(fields).length > 0 ? { errors: { fields } } : { changes };
}

function readPart(athlete: Athlete, form: AttendanceForm): { part: Part | null } | { error: string } {
  const presence = form.text(presenceName(athlete.id));
  if (presence === "") {
    if (!form.everyone || form.fullTime === null) return { part: null };
    return { part: proposePart(athlete, form.fullTime) };
  }
  const typed = form.text(minutesName(athlete.id)).trim().replace(",", ".");
  const minutes = typed === "" ? form.fullTime : Number(typed);
  if (presence === "took_part" && minutes === null) return { error: needsFullTime };
  const parsed = participationSchema.safeParse({ presence, minutes: presence === "took_part" ? minutes : 0 });
  if (parsed.success) return { part: parsed.data };
  return { error: parsed.error.issues.map(({ message }) => message).join(" ") };
}
