import { randomUUID } from "node:crypto";
import { z } from "zod";
import { may } from "~/features/accounts/permissions";
import type { MemberScope } from "~/features/accounts/scope.server";
import {
  changeAvailability,
  fullFrom,
  openReason,
  reasonOf,
  stateOfDay,
  unavailableFrom,
} from "~/features/availability/availability.server";
import { audit } from "~/platform/audit.server";
import { timeIn } from "~/platform/clock";
import { sealer } from "~/platform/crypto/keys.server";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { once } from "~/platform/operations.server";
import { read, write } from "~db/client.server";
import {
  type CautionKind,
  cautionsFor,
  cautionsOfKinds,
  safeDefaultReasons,
  suggestUrgency,
} from "./cautions";
import {
  findReport,
  insertEncounter,
  insertOutcome,
  insertReport,
  reportPlace,
} from "./coach-reports.queries.server";
import { findResult } from "./drafts.queries.server";
import { findAthlete, findSessionsOf } from "./injuries.queries.server";
import type { EncounterInput, ReportInput } from "./injuries.schema";
import { listOpenCoachReports } from "./injuries.server";
import { resolveOnset } from "./onset.server";

/** What the coach's form starts from: an athlete named in the address, and that athlete's sessions of today. */
export function openReportForm(scope: MemberScope, athleteId: string | null) {
  return read(scope, async (tx) => {
    const athlete = athleteId ? await findAthlete(tx, athleteId) : undefined;
    const sessions = athlete ? await findSessionsOf(tx, athlete.id, scope.today) : [];
    return {
      operation: randomUUID(),
      athlete: athlete ? { id: athlete.id, label: `${athlete.givenName} ${athlete.familyName}` } : null,
      sessions: sessions.map(({ id, kind, startTime, teamName }) => ({
        id,
        kind,
        teamName,
        startTime: startTime?.slice(0, 5) ?? null,
      })),
    };
  });
}

/** What the coach is told after sending; nothing of it can be read again later. */
export type ReportReceipt = { cautions: CautionKind[]; unavailable: boolean };

/**
 * Takes a coach's report, once per operation: into the athletic trainer's queue, with the safe default. The report is
 * not readable by coaches afterwards; the receipt holds only what to do now.
 * @throws DomainError forbidden, not_found, invalid, operation_mismatch
 */
export function sendCoachReport(scope: MemberScope, input: ReportInput): Promise<ReportReceipt> {
  if (!may(scope.roles, "coach-reports.send")) throw forbidden();
  return write(scope, (tx) =>
    once(tx, input.operation, { report: input }, async () => {
      const athlete = await findAthlete(tx, input.athlete);
      if (!athlete) throw notFound("That athlete");
      const onset = await resolveOnset(tx, athlete.id, input);
      const seals = await sealer(tx);
      const id = randomUUID();
      await insertReport(tx, {
        id,
        athleteId: athlete.id,
        sessionId: onset.sessionId,
        onsetDay: onset.onsetDay,
        onsetTime: onset.onsetTime,
        bodyArea: input.bodyArea,
        side: input.side,
        suspectedConcussion: input.suspectedConcussion,
        couldContinue: input.couldContinue,
        signs: input.signs,
        phoned: seals.seal(reportPlace("phoned", id), input.phoned),
        note: seals.seal(reportPlace("note", id), input.note),
      });
      const reasons = safeDefaultReasons(input);
      if (reasons.length > 0)
        await openReason(tx, {
          athleteId: athlete.id,
          cause: "coach_report",
          reportId: id,
          change: unavailableFrom(onset.onsetDay),
        });
      await audit(tx, {
        action: "coach_report.send",
        subjectId: id,
        athleteId: athlete.id,
        fields: { safeDefault: reasons.length > 0 },
      });
      return { cautions: cautionsFor(input).map(({ kind }) => kind), unavailable: reasons.length > 0 };
    }),
  );
}

const receiptSchema = z.object({ cautions: z.array(z.string()), unavailable: z.boolean() });

/** The receipt of a report the person sent, by its operation; null for anything else. */
export function readReceipt(scope: MemberScope, operation: string) {
  return read(scope, async (tx) => {
    const result = receiptSchema.safeParse(await findResult(tx, operation));
    return result.success
      ? { cautions: cautionsOfKinds(result.data.cautions), unavailable: result.data.unavailable }
      : null;
  });
}

/** The queue: what coaches sent and nobody has dealt with yet. */
export function readQueue(scope: MemberScope) {
  if (!may(scope.roles, "coach-reports.read")) throw forbidden();
  return write(scope, async (tx) => {
    const reports = await listOpenCoachReports(tx);
    await audit(tx, { action: "coach_report.list", fields: { count: reports.length } });
    return reports.map(({ reportedAt, ...report }) => ({
      ...report,
      reportedAt: reportedAt.toISOString(),
      reportedTime: timeIn(scope.timeZone, reportedAt),
    }));
  });
}

/** One report in clear, with what holds for the athlete today. */
export function readReport(scope: MemberScope, id: string) {
  if (!may(scope.roles, "coach-reports.read")) throw forbidden();
  return write(scope, async (tx) => {
    const report = await findReport(tx, id);
    if (!report) throw notFound("That report");
    const seals = await sealer(tx);
    const state = (await stateOfDay(tx, [report.athleteId], scope.today)).get(report.athleteId);
    await audit(tx, { action: "coach_report.read", subjectId: id, athleteId: report.athleteId });
    const { phoned, note, closedReason, reportedAt, decidedAt, ...clear } = report;
    return {
      ...clear,
      onsetTime: clear.onsetTime?.slice(0, 5) ?? null,
      phoned: seals.open(reportPlace("phoned", id), phoned),
      note: seals.open(reportPlace("note", id), note),
      closedReason: seals.open(outcomePlace(id), closedReason),
      reportedAt: reportedAt.toISOString(),
      reportedTime: timeIn(scope.timeZone, reportedAt),
      decided: decidedAt !== null,
      cautions: cautionsFor(report),
      urgency: suggestUrgency(report),
      state: state?.state ?? "full",
    };
  });
}

const outcomePlace = (reportId: string) => ({
  table: "coach_report_outcomes",
  column: "reason",
  row: reportId,
  version: 1,
});

/** Closes a report that becomes no injury, with the reason, and lifts what it had set if that is said. */
export function closeReport(
  scope: MemberScope,
  id: string,
  { reason, availability }: { reason: string; availability: "full" | "keep" },
): Promise<void> {
  if (!may(scope.roles, "injuries.write")) throw forbidden();
  return write(scope, async (tx) => {
    const report = await findReport(tx, id);
    if (!report) throw notFound("That report");
    const seals = await sealer(tx);
    const sealed = seals.seal(outcomePlace(id), reason);
    if (!(await insertOutcome(tx, { reportId: id, injuryId: null, reason: sealed })))
      throw new DomainError("conflict", "Somebody has already dealt with this report.");
    const set = await reasonOf(tx, { reportId: id });
    if (set && availability === "full") await changeAvailability(tx, set.id, fullFrom(scope.today));
    await audit(tx, { action: "coach_report.close", subjectId: id, athleteId: report.athleteId });
  });
}

/** An athlete seen without a new injury, once per operation. */
export function addEncounter(scope: MemberScope, input: EncounterInput): Promise<{ id: string }> {
  if (!may(scope.roles, "injuries.write")) throw forbidden();
  return write(scope, (tx) =>
    once(tx, input.operation, { encounter: input }, async () => {
      const athlete = await findAthlete(tx, input.athlete);
      if (!athlete) throw notFound("That athlete");
      const id = randomUUID();
      const seals = await sealer(tx);
      await insertEncounter(tx, {
        id,
        athleteId: athlete.id,
        day: scope.today,
        kind: input.kind,
        minutes: input.minutes,
        note: seals.seal({ table: "encounters", column: "note", row: id, version: 1 }, input.note),
      });
      await audit(tx, { action: "encounter.create", subjectId: id, athleteId: athlete.id });
      return { id };
    }),
  );
}

/** An athlete named in an address, as a form's first choice; null for an absent or invisible one. */
export function findNamedAthlete(scope: MemberScope, id: string | null) {
  const parsed = z.uuid().safeParse(id);
  if (!parsed.success) return Promise.resolve(null);
  return read(scope, async (tx) => {
    const athlete = await findAthlete(tx, parsed.data);
    return athlete ? { id: athlete.id, label: `${athlete.givenName} ${athlete.familyName}` } : null;
  });
}

/** Puts the chosen athlete's name in place of what was searched for, so that a form sent back shows who is meant. */
export async function nameAthlete(scope: MemberScope, form: FormData) {
  const athlete = await findNamedAthlete(scope, String(form.get("athlete") ?? ""));
  if (athlete) form.set("athlete-text", athlete.label);
}
