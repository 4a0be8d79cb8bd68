import { randomUUID } from "node:crypto";
import { may } from "~/features/accounts/permissions";
import type { MemberScope } from "~/features/accounts/scope.server";
import { makeUnavailable, moveOnset, takeOverReport } from "~/features/availability/availability.server";
import { audit } from "~/platform/audit.server";
import { sealer } from "~/platform/crypto/keys.server";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { once } from "~/platform/operations.server";
import type { FormValues } from "~/ui";
import { read, type Tx, write } from "~db/client.server";
import { type SafeDefaultReason, safeDefaultReasons, signGroups } from "./cautions";
import { findReport, insertOutcome, type ReportRow, reportPlace } from "./coach-reports.queries.server";
import { dropDraft, logDraft, readDraft } from "./drafts.server";
import { findAthlete, findSessionsOf } from "./injuries.queries.server";
import type { LogInput } from "./injuries.schema";
import { resolveOnset } from "./onset.server";
import { revisionPlace } from "./overview.server";
import { insertInjury, insertRevision } from "./records.queries.server";
import { commonAreas } from "./seen";

/** What the log form starts from: a draft, a coach's report, or an athlete named in the address. */
export function openLogForm(scope: MemberScope, from: { athleteId: string | null; reportId: string | null }) {
  return read(scope, async (tx) => {
    const report = from.reportId ? await findReport(tx, from.reportId) : undefined;
    if (from.reportId && (!report || report.decidedAt)) throw notFound("That report");
    const draft = await readDraft(tx, scope.personId, logDraft(report?.id ?? null));
    const named = report?.athleteId ?? from.athleteId;
    // A draft about somebody else gives way to the athlete that was asked for.
    const usable = draft && (!named || draft.values.athlete === named) ? draft : null;
    const draftAthlete = usable?.values.athlete;
    const athleteId = named ?? (typeof draftAthlete === "string" && draftAthlete ? draftAthlete : null);
    const athlete =
      athleteId && /^[0-9a-f-]{36}$/.test(athleteId) ? await findAthlete(tx, athleteId) : undefined;
    const day = report?.onsetDay ?? scope.today;
    const sessions = athlete ? await findSessionsOf(tx, athlete.id, day) : [];
    const label = athlete ? `${athlete.givenName} ${athlete.familyName}` : null;
    const start: FormValues = athlete && label ? { athlete: athlete.id, "athlete-text": label } : {};
    return {
      operation: typeof usable?.values.operation === "string" ? usable.values.operation : randomUUID(),
      draftForm: logDraft(report?.id ?? null),
      draftSavedAt: usable?.savedAt ?? null,
      athlete: athlete && label ? { id: athlete.id, label } : null,
      sessions: sessions.map(({ id, kind, startTime, teamName }) => ({
        id,
        kind,
        teamName,
        startTime: startTime?.slice(0, 5) ?? null,
      })),
      day,
      reportId: report?.id ?? null,
      values: usable?.values ?? { ...start, ...(report ? valuesOfReport(report) : {}) },
    };
  });
}

/** A coach's report as answers of the log form. */
function valuesOfReport(report: ReportRow): FormValues {
  const yesNo = (answer: boolean | null) => (answer === null ? "" : answer ? "yes" : "no");
  const among = (group: readonly string[]) => report.signs.filter((sign) => group.includes(sign));
  const [year, month, day] = report.onsetDay.split("-").map(Number);
  return {
    when: report.sessionId ? `session:${report.sessionId}` : "earlier",
    day: `${day} ${month} ${year}`,
    time: report.onsetTime?.slice(0, 5) ?? "",
    ...(commonAreas.includes(report.bodyArea)
      ? { bodyArea: report.bodyArea }
      : { bodyArea: "another", otherArea: report.bodyArea }),
    side: report.side,
    suspectedConcussion: yesNo(report.suspectedConcussion),
    couldContinue: yesNo(report.couldContinue),
    signs: among(signGroups.joint),
    emergencySigns: among(signGroups.limb),
    headSigns: among(signGroups.head),
  };
}

/**
 * Logs an injury from the first group alone, once per operation. The safe default makes the athlete unavailable from the
 * day of the onset; a coach's report that it came from is settled with it.
 * @throws DomainError forbidden, not_found, invalid, operation_mismatch
 */
export function logInjury(scope: MemberScope, input: LogInput): Promise<{ id: string }> {
  if (!may(scope.roles, "injuries.write")) throw forbidden();
  return write(scope, (tx) =>
    once(tx, input.operation, { log: input }, async () => {
      const athlete = await findAthlete(tx, input.athlete);
      if (!athlete) throw notFound("That athlete");
      const report = input.reportId ? await takeReport(tx, input.reportId, athlete.id) : undefined;
      const onset = await resolveOnset(tx, athlete.id, input, report?.onsetDay);
      const id = randomUUID();
      const told = report ? await tellingsOf(tx, report, id) : { phoned: null, description: null };
      await insertInjury(tx, { id, athleteId: athlete.id });
      await insertRevision(tx, {
        injuryId: id,
        version: 1,
        changeReason: null,
        ...onset,
        ...firstGroup(input),
        ...unanswered,
        ...told,
      });
      const safeDefault = await setAvailability(
        tx,
        { id, athleteId: athlete.id, onsetDay: onset.onsetDay },
        input,
        report,
      );
      await dropDraft(tx, scope.personId, logDraft(input.reportId));
      await audit(tx, {
        action: "injury.create",
        subjectId: id,
        athleteId: athlete.id,
        fields: { safeDefault },
      });
      return { id };
    }),
  );
}

const firstGroup = ({ bodyArea, side, suspectedConcussion, couldContinue, movement, signs }: LogInput) => ({
  bodyArea,
  side,
  suspectedConcussion,
  couldContinue,
  movement,
  signs,
  // Whoever could not continue has stopped playing.
  firstCare: couldContinue === false ? (["stopped_play"] as const).slice() : [],
});

/** What can wait. */
const unanswered = {
  onset: null,
  contact: null,
  minuteOfPlay: null,
  surface: null,
  footwear: null,
  warmedUp: null,
  swellingNoticed: null,
  referredTo: [],
  tissue: null,
  pathology: null,
  diagnosis: null,
  certainty: null,
  surgery: null,
  surgeryDay: null,
  subsequence: null,
  subsequentTo: null,
  closedOn: null,
  withdrawn: false,
};

/** What the coach wrote, sealed anew where it now belongs. */
async function tellingsOf(tx: Tx, report: ReportRow, injuryId: string) {
  const seals = await sealer(tx);
  const phoned = seals.open(reportPlace("phoned", report.id), report.phoned);
  const note = seals.open(reportPlace("note", report.id), report.note);
  return {
    phoned: seals.seal(revisionPlace("phoned", injuryId, 1), phoned),
    description: seals.seal(revisionPlace("description", injuryId, 1), note),
  };
}

async function takeReport(tx: Tx, reportId: string, athleteId: string) {
  const report = await findReport(tx, reportId);
  if (!report) throw notFound("That report");
  if (report.decidedAt) throw new DomainError("conflict", "Somebody has already dealt with this report.");
  if (report.athleteId !== athleteId)
    throw new DomainError("invalid", "", {
      fields: {
        athlete: ["The report is about another athlete. Close it with a reason and log this injury anew."],
      },
    });
  return report;
}

/**
 * The safe default of a new injury. What a coach's report had set is taken over, and moved where the onset was another
 * day; signs that the report did not have make the athlete unavailable even if a clinical role had changed what it set.
 * @returns whether there is a reason for it
 */
async function setAvailability(
  tx: Tx,
  injury: { id: string; athleteId: string; onsetDay: string },
  input: LogInput,
  report: ReportRow | undefined,
) {
  const reasons = safeDefaultReasons(input);
  let settled: readonly SafeDefaultReason[] = [];
  if (report) {
    if (!(await insertOutcome(tx, { reportId: report.id, injuryId: injury.id, reason: null })))
      throw new DomainError("conflict", "Somebody has already dealt with this report.");
    const { athleteId, id: injuryId } = injury;
    if (await takeOverReport(tx, { reportId: report.id, injuryId, athleteId })) {
      await moveOnset(tx, injuryId, report.onsetDay, injury.onsetDay);
      settled = safeDefaultReasons(report);
    }
  }
  if (reasons.some((reason) => !settled.includes(reason))) await makeUnavailable(tx, injury);
  return reasons.length > 0;
}
