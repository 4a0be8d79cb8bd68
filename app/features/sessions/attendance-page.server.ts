import { randomUUID } from "node:crypto";
import { z } from "zod";
import { DomainError } from "~/platform/errors";
import type { FieldConflict, FieldValue } from "~/platform/merge-fields";
import type { FormErrors } from "~/ui";
import { read, type Scope, type Tx } from "~db/client.server";
import { partValue, proposePart } from "./attendance";
import {
  expectedAthletes,
  headcountFields,
  recordAttendance,
  recordHeadcount,
  searchGuests,
  showAthletes,
} from "./attendance.server";
import { readAttendanceForm } from "./attendance-form";
import { conflictsIn } from "./conflict";
import { fullTimeOf } from "./session-state";
import { headcountSchema, sessionMinutes } from "./sessions.schema";
import { getSession, needs } from "./sessions.server";

/** The attendance page: who is expected, what is entered, and guests found by name. */
export async function openAttendance(tx: Tx, scope: Scope, sessionId: string, guestName: string) {
  needs(scope, "attendance.write");
  const session = await getSession(tx, sessionId);
  const athletes = await expectedAthletes(tx, session);
  const fullTime = fullTimeOf(session);
  return {
    session,
    athletes: showAthletes(scope, athletes),
    base: Object.fromEntries(athletes.map(({ id, part }) => [id, partValue(part)])),
    headcountBase: headcountFields(session),
    fullTime,
    guestName,
    guests: await searchGuests(tx, guestName, athletes),
    operationIds: { attendance: randomUUID(), headcount: randomUUID(), guest: randomUUID() },
    open: session.day <= scope.today && session.state !== "cancelled",
  };
}

export type AttendanceAnswer =
  | { saved: true }
  | { errors: FormErrors; status: 400 }
  | { conflicts: FieldConflict[]; status: 409 };

const fieldValue: z.ZodType<FieldValue> = z.lazy(() =>
  z.union([z.null(), z.boolean(), z.number(), z.string(), z.record(z.string(), fieldValue)]),
);
const baseSchema = z.record(z.string(), fieldValue);
const operationId = z.uuid();

function readBase(form: FormData) {
  try {
    return baseSchema.parse(JSON.parse(String(form.get("base"))));
  } catch {
    throw new DomainError("invalid", "This form is not complete. Open the page again.");
  }
}

/** What the attendance page's forms send: `intent` save, everyone, headcount or guest. */
export async function submitAttendance(
  scope: Scope,
  sessionId: string,
  form: FormData,
): Promise<AttendanceAnswer> {
  const intent = form.get("intent");
  try {
    if (intent === "headcount") return await saveHeadcount(scope, sessionId, form);
    if (intent === "guest") return await saveGuest(scope, sessionId, form);
    return await saveAthletes(scope, sessionId, form, intent === "everyone");
  } catch (error) {
    const conflicts = conflictsIn(error);
    if (conflicts) return { conflicts, status: 409 };
    throw error;
  }
}

const peopleOf = (scope: Scope, sessionId: string) =>
  read(scope, async (tx) => {
    const session = await getSession(tx, sessionId);
    return { session, athletes: await expectedAthletes(tx, session) };
  });

async function saveAthletes(
  scope: Scope,
  sessionId: string,
  form: FormData,
  everyone: boolean,
): Promise<AttendanceAnswer> {
  const { athletes } = await peopleOf(scope, sessionId);
  const fullTime = sessionMinutes.safeParse(form.get("fullTime") ?? "");
  if (!fullTime.success)
    return { errors: { fields: { fullTime: [fullTime.error.issues[0]?.message ?? ""] } }, status: 400 };
  const answer = readAttendanceForm(athletes, {
    everyone,
    fullTime: fullTime.data,
    base: readBase(form),
    text: (name) => String(form.get(name) ?? ""),
  });
  if ("errors" in answer) return { errors: answer.errors, status: 400 };
  const id = operationId.parse(form.get("operationId"));
  await recordAttendance(scope, sessionId, id, answer.changes, fullTime.data);
  return { saved: true };
}

/** A guest is there for the whole session until somebody says otherwise. */
async function saveGuest(scope: Scope, sessionId: string, form: FormData): Promise<AttendanceAnswer> {
  const athleteId = z.uuid().parse(form.get("athlete"));
  const { session } = await peopleOf(scope, sessionId);
  const part = proposePart({ state: "full", minutesLimit: null }, fullTimeOf(session) ?? 0);
  if (!part)
    return {
      errors: {
        fields: {},
        form: ["Enter how long the session lasted and save it first, so that a guest's full time is known."],
      },
      status: 400,
    };
  await recordAttendance(scope, sessionId, operationId.parse(form.get("operationId")), {
    [`athlete:${athleteId}`]: { base: null, value: partValue(part) },
  });
  return { saved: true };
}

async function saveHeadcount(scope: Scope, sessionId: string, form: FormData): Promise<AttendanceAnswer> {
  const typed = headcountSchema.parse({ headcount: form.get("headcount"), minutes: form.get("minutes") });
  const base = readBase(form);
  await recordHeadcount(scope, sessionId, operationId.parse(form.get("operationId")), {
    headcount: { base: base.headcount ?? null, value: typed.headcount },
    minutes: { base: base.minutes ?? null, value: typed.minutes },
  });
  return { saved: true };
}
