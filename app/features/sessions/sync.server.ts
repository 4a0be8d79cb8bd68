import { ZodError } from "zod";
import { mergeWarmUp } from "~/features/warm-ups/warm-ups.server";
import { DomainError } from "~/platform/errors";
import { type FieldChange, mergeFields } from "~/platform/merge-fields";
import { once } from "~/platform/operations.server";
import { type Scope, sqlState, type Tx, write } from "~db/client.server";
import { mergeAttendance, mergeHeadcount } from "./attendance.server";
import { conflictOf, conflictsIn } from "./conflict";
import {
  abandonSchema,
  cancelSchema,
  headcountSchema,
  holdSchema,
  newSessionSchema,
} from "./sessions.schema";
import {
  holdSession,
  insertNewSession,
  type ListedSession,
  type Outcome,
  settleSession,
} from "./sessions.server";
import type { OperationAnswer } from "./sync";
import type { Operation } from "./sync.schema";

const uniqueViolation = "23505";

type Fields = Readonly<Record<string, FieldChange>>;
type Result = Record<string, unknown> & { agreed: string[] };

/**
 * Takes a phone's operations in their order, each in a transaction of its own: one that is refused stops no other.
 * A replay answers with the first result and changes nothing.
 */
export async function syncOperations(
  scope: Scope,
  operations: readonly Operation[],
): Promise<OperationAnswer[]> {
  const answers: OperationAnswer[] = [];
  for (const operation of operations) answers.push(await syncOne(scope, operation));
  return answers;
}

async function syncOne(scope: Scope, operation: Operation): Promise<OperationAnswer> {
  const { id, ...body } = operation;
  let fresh = false;
  try {
    const result = await write(scope, (tx) =>
      once(tx, id, body, () => {
        fresh = true;
        return apply(tx, operation);
      }),
    );
    const agreed = Array.isArray(result.agreed) && result.agreed.length > 0;
    return { id, status: fresh ? (agreed ? "merged" : "applied") : "replayed", result };
  } catch (error) {
    return refusal(id, error);
  }
}

/** Refusals a person can understand; a fault of ours goes on to the caller, and the phone keeps the operation. */
function refusal(id: string, error: unknown): OperationAnswer {
  const conflicts = conflictsIn(error);
  if (conflicts) return { id, status: "conflict", conflicts, message: (error as DomainError).message };
  if (error instanceof ZodError)
    return {
      id,
      status: "refused",
      code: "invalid",
      message: [...new Set(error.issues.map(({ message }) => message))].join(" "),
    };
  if (sqlState(error) === uniqueViolation)
    return { id, status: "refused", code: "conflict", message: "A session with this id exists already." };
  if (!(error instanceof DomainError)) throw error;
  if (error.code === "unavailable") throw error;
  const { existing } = error.details;
  if (error.code === "conflict" && typeof existing === "string")
    return { id, status: "conflict", existing, message: error.message };
  return { id, status: "refused", code: error.code, message: error.message };
}

function apply(tx: Tx, { kind, sessionId, fields }: Operation): Promise<Result> {
  switch (kind) {
    case "add-session":
      return applyNew(tx, sessionId, fields);
    case "session":
      return applyOutcome(tx, sessionId, fields, ["state", "actualMinutes", "abandonedAfter"]);
    case "cancel":
      return applyOutcome(tx, sessionId, fields, ["cancelReason"]);
    case "attendance":
      return applyAttendance(tx, sessionId, fields);
    case "headcount":
      return applyHeadcount(tx, sessionId, fields);
    case "warm-up":
      return mergeWarmUp(tx, sessionId, fields);
  }
}

function only(fields: Fields, names: readonly string[]) {
  const strange = Object.keys(fields).find((name) => !names.includes(name));
  if (strange) throw new DomainError("invalid", `"${strange}" is not a field of this operation.`);
}

const valuesOf = (fields: Fields) =>
  Object.fromEntries(Object.entries(fields).map(([name, { value }]) => [name, value]));

const newFields = [
  "teamId",
  "day",
  "startTime",
  "kind",
  "plannedMinutes",
  "surface",
  "venueId",
  "another",
] as const;

async function applyNew(tx: Tx, sessionId: string, fields: Fields): Promise<Result> {
  only(fields, newFields);
  const { another, ...values } = valuesOf(fields);
  const input = newSessionSchema.parse(values);
  const session = await insertNewSession(tx, sessionId, input, { another: another === true });
  return { agreed: [], sessionId: session.id };
}

async function applyOutcome(
  tx: Tx,
  sessionId: string,
  fields: Fields,
  names: readonly (keyof ListedSession)[],
): Promise<Result> {
  only(fields, names);
  const session = await holdSession(tx, sessionId);
  const stored = Object.fromEntries(names.map((name) => [name, scalar(session[name])]));
  const merge = mergeFields(stored, fields);
  if (merge.conflicts.length > 0) throw conflictOf(merge.conflicts);
  if (Object.keys(merge.write).length > 0)
    await settleSession(tx, session, outcomeFrom({ ...stored, ...valuesOf(fields) }, names));
  return { agreed: merge.agreed, sessionId };
}

const scalar = (value: ListedSession[keyof ListedSession]) =>
  typeof value === "string" || typeof value === "number" ? value : null;

function outcomeFrom(values: Record<string, unknown>, names: readonly string[]): Outcome {
  if (names.includes("cancelReason")) return { state: "cancelled", ...cancelSchema.parse(values) };
  if (values.state === "held") return { state: "held", ...holdSchema.parse(values) };
  if (values.state === "abandoned") return { state: "abandoned", ...abandonSchema.parse(values) };
  throw new DomainError(
    "invalid",
    'Say "held" or "abandoned"; a session that did not take place is cancelled.',
  );
}

const partName = /^athlete:[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;

async function applyAttendance(tx: Tx, sessionId: string, fields: Fields): Promise<Result> {
  const strange = Object.keys(fields).find((name) => !partName.test(name));
  if (strange) throw new DomainError("invalid", `"${strange}" is not an athlete's field.`);
  return mergeAttendance(tx, sessionId, fields);
}

async function applyHeadcount(tx: Tx, sessionId: string, fields: Fields): Promise<Result> {
  only(fields, ["headcount", "minutes"]);
  headcountSchema.parse(valuesOf(fields));
  const { headcount, minutes } = fields;
  if (!headcount || !minutes)
    throw new DomainError("invalid", "A headcount needs the number and the minutes.");
  return mergeHeadcount(tx, sessionId, { headcount, minutes });
}
