import { z } from "zod";
import { may } from "~/features/accounts/permissions";
import { DomainError } from "~/platform/errors";
import type { Scope, Tx } from "~db/client.server";
import type { ExpectedAthlete } from "./attendance";
import { expectedAthletes, showAthletes } from "./attendance.server";
import { exposureOfSession, ruleFor } from "./exposure";
import { findSportRules } from "./sessions.queries.server";
import { abandonSchema, cancelSchema, editSessionSchema, holdSchema } from "./sessions.schema";
import {
  editBaseOf,
  editSession,
  emergencyCardOf,
  getSession,
  type ListedSession,
  listVenues,
  settle,
} from "./sessions.server";

/** The exposure of one session, reckoned from its own records. */
export async function exposureOf(tx: Tx, session: ListedSession, athletes: readonly ExpectedAthlete[]) {
  const roster = athletes.filter(({ guest }) => !guest);
  return exposureOfSession(session, {
    participations: athletes.flatMap(({ id, part }) => (part ? [{ athleteId: id, ...part }] : [])),
    roster: roster.map(({ id }) => id),
    unavailable: new Set(roster.filter(({ state }) => state === "unavailable").map(({ id }) => id)),
    rule: ruleFor(await findSportRules(tx, session.sport), session.underAge),
  });
}

/** The page of one session. Injuries are not on it: coaches read it. */
export async function openSession(tx: Tx, scope: Scope, sessionId: string) {
  const session = await getSession(tx, sessionId);
  const athletes = await expectedAthletes(tx, session);
  const { aes, hours, grade, unknown } = await exposureOf(tx, session, athletes);
  return {
    session,
    athletes: showAthletes(scope, athletes),
    exposure: { aes, hours, grade, unknown },
    card: await emergencyCardOf(tx, session),
    venues: await listVenues(tx),
    editBase: editBaseOf(session),
    mayEdit: may(scope.roles, "sessions.write"),
    mayRecord: may(scope.roles, "attendance.write"),
    mayWarmUp: may(scope.roles, "warm-ups.read"),
    dayHasCome: session.day <= scope.today,
  };
}

const baseSchema = z.record(z.string(), z.union([z.string(), z.number(), z.null()]));
const seenSchema = z.object({ seen: z.string() });

function readBase(text: unknown) {
  try {
    return baseSchema.parse(JSON.parse(String(text)));
  } catch {
    throw new DomainError("invalid", "This form is not complete. Open the page again.");
  }
}

/** What the session page's forms send: `intent` edit, hold, abandon or cancel. */
export async function submitSession(scope: Scope, sessionId: string, form: Record<string, unknown>) {
  if (form.intent === "edit") {
    await editSession(scope, sessionId, editSessionSchema.parse(form), readBase(form.base));
    return;
  }
  const { seen } = seenSchema.parse(form);
  if (form.intent === "hold")
    await settle(scope, sessionId, { state: "held", ...holdSchema.parse(form) }, seen);
  else if (form.intent === "abandon")
    await settle(scope, sessionId, { state: "abandoned", ...abandonSchema.parse(form) }, seen);
  else if (form.intent === "cancel")
    await settle(scope, sessionId, { state: "cancelled", ...cancelSchema.parse(form) }, seen);
  else throw new DomainError("invalid", "Choose what to save.");
}
