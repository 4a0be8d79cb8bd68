import { randomUUID } from "node:crypto";
import { may } from "~/features/accounts/permissions";
import type { MemberScope } from "~/features/accounts/scope.server";
import { listChanges, reasonOf, stateOfDay } from "~/features/availability/availability.server";
import { certaintyWords, pathologyWords } from "~/features/vocabulary";
import { proposeWarmedUp } from "~/features/warm-ups/warm-up-part.server";
import { audit } from "~/platform/audit.server";
import { dayIn, timeIn } from "~/platform/clock";
import { type Sealer, sealer } from "~/platform/crypto/keys.server";
import { formatDay } from "~/platform/days";
import { forbidden, notFound } from "~/platform/errors";
import type { FormValues } from "~/ui";
import { type Tx, write } from "~db/client.server";
import type { certainties, pathologies } from "~db/schema/codes";
import { cautionsFor, safeDefaultReasons, signGroups, suggestUrgency } from "./cautions";
import { readFurther } from "./diagnoses.server";
import { editDraft, readDraft } from "./drafts.server";
import { relateToEarlier } from "./earlier.server";
import { diffRevisions } from "./history";
import { findInjuryRow, findNotes, findRevisions, findSessionsOf } from "./injuries.queries.server";
import { openRevision, overviewsOf } from "./overview.server";
import { summariseInjury } from "./summary";

/** When something was entered, in the organisation's calendar and clock. */
const stamp = (timeZone: string, at: Date) => ({ day: dayIn(timeZone, at), time: timeIn(timeZone, at) });

async function takeOverview(tx: Tx, id: string) {
  const row = await findInjuryRow(tx, id);
  if (!row) throw notFound("That injury");
  const [overview] = await overviewsOf(tx, [row]);
  if (!overview) throw notFound("That injury");
  return overview;
}

type Further = Awaited<ReturnType<typeof readFurther>>[number];

const furtherWords = (row: Further) =>
  [
    pathologyWords[row.pathology as (typeof pathologies)[number]],
    row.diagnosis,
    certaintyWords[row.certainty as (typeof certainties)[number]],
  ]
    .filter(Boolean)
    .join(", ");

/** The revisions of an injury, newest first: who, when, and what each changed. */
async function readHistory(tx: Tx, seals: Sealer, id: string, further: readonly Further[]) {
  const { timeZone } = tx.scope;
  const revisions = await findRevisions(tx, id);
  const readable = revisions.map(({ revision }) => ({
    ...revision,
    ...openRevision(seals, revision),
    session: revision.sessionId ? "chosen" : null,
    further: further
      .filter(({ version }) => version === revision.version)
      .map(furtherWords)
      .join("; "),
  }));
  return revisions
    .map(({ revision, by }, index) => {
      const before = readable[index - 1];
      const after = readable[index];
      return {
        version: revision.version,
        by: by ?? "Haleside",
        ...stamp(timeZone, revision.recordedAt),
        reason: revision.changeReason,
        changes: before && after ? diffRevisions(before, after) : [],
      };
    })
    .reverse();
}

/** Everything the page of an injury shows. The read is audited in the same transaction. */
export function readInjury(scope: MemberScope, id: string) {
  if (!may(scope.roles, "injuries.read")) throw forbidden();
  return write(scope, async (tx) => {
    const { timeZone, today } = scope;
    const overview = await takeOverview(tx, id);
    const { revision, athlete, session } = overview;
    const seals = await sealer(tx);
    const texts = openRevision(seals, revision);
    const further = await readFurther(tx, seals, id);
    const { earlier, suggestion } = await relateToEarlier(tx, seals, overview);
    const reason = await reasonOf(tx, { injuryId: id });
    const changes = reason ? await listChanges(tx, [reason.id]) : [];
    const state = (await stateOfDay(tx, [overview.athleteId], today)).get(overview.athleteId);
    const notes = await findNotes(tx, [id]);
    await audit(tx, { action: "injury.read", subjectId: id, athleteId: overview.athleteId });
    const name = `${athlete.givenName} ${athlete.familyName}`;
    const { phoned: _phoned, diagnosis: _diagnosis, description: _description, ...clear } = revision;
    return {
      id,
      athleteId: overview.athleteId,
      name,
      summary: summariseInjury(name, {
        ...clear,
        onsetTime: clear.onsetTime?.slice(0, 5) ?? null,
        session,
        timeLoss: overview.timeLoss,
        state: overview.today.state,
      }),
      revision: {
        ...clear,
        recordedAt: undefined,
        onsetTime: clear.onsetTime?.slice(0, 5) ?? null,
        ...texts,
      },
      session,
      teams: overview.teams,
      further: further.filter(({ version }) => version === revision.version).map(furtherWords),
      timeLoss: overview.timeLoss,
      severity: overview.severity,
      gaps: overview.gaps,
      cautions: cautionsFor(revision),
      safeDefault: safeDefaultReasons(revision),
      urgency: suggestUrgency(revision),
      relation: { ...suggestion, hasEarlier: earlier.length > 0 },
      /** What this injury allows today, and what the athlete may do for all reasons together. */
      own: overview.today,
      whole: state?.state ?? "full",
      hasAvailability: overview.contributions.length > 0,
      course: overview.contributions.map(({ setAt, ...part }) => ({ ...part, ...stamp(timeZone, setAt) })),
      changes: changes.map(({ setAt, ...change }) => ({ ...change, ...stamp(timeZone, setAt) })).reverse(),
      notes: notes.map(({ id: noteId, text, writtenAt, by }) => ({
        id: noteId,
        by: by ?? "Haleside",
        text: seals.open({ table: "injury_notes", column: "text", row: noteId, version: 1 }, text) ?? "",
        ...stamp(timeZone, writtenAt),
      })),
      history: await readHistory(tx, seals, id, further),
      today,
      operation: randomUUID(),
    };
  });
}

const yesNo = (answer: boolean | null) => (answer === null ? "" : answer ? "yes" : "no");

/** The edit form's start: the record as answers, or the person's draft of it; with what can be chosen. */
export function openEditForm(scope: MemberScope, id: string) {
  if (!may(scope.roles, "injuries.write")) throw forbidden();
  return write(scope, async (tx) => {
    const overview = await takeOverview(tx, id);
    const { revision, athlete } = overview;
    const seals = await sealer(tx);
    const texts = openRevision(seals, revision);
    const further = (await readFurther(tx, seals, id)).filter(({ version }) => version === revision.version);
    const { earlier, suggestion } = await relateToEarlier(tx, seals, overview);
    const sessions = await findSessionsOf(tx, overview.athleteId, revision.onsetDay);
    const { session } = overview;
    const proposed =
      revision.warmedUp === null && session && revision.sessionId
        ? await proposeWarmedUp(
            tx,
            { id: revision.sessionId, startTime: session.startTime },
            { athleteId: overview.athleteId, onsetTime: revision.onsetTime },
          )
        : null;
    const draft = await readDraft(tx, scope.personId, editDraft(id));
    // A draft of an older revision would undo what was entered since.
    const usable = draft && draft.values.version === String(revision.version) ? draft : null;
    await audit(tx, { action: "injury.read", subjectId: id, athleteId: overview.athleteId });
    const among = (group: readonly string[]) => revision.signs.filter((sign) => group.includes(sign));
    const values: FormValues = {
      version: String(revision.version),
      day: formatDay(revision.onsetDay, "figures"),
      time: revision.onsetTime?.slice(0, 5) ?? "",
      session: revision.outsideSport ? "outside" : (revision.sessionId ?? ""),
      bodyArea: revision.bodyArea,
      side: revision.side,
      suspectedConcussion: yesNo(revision.suspectedConcussion),
      couldContinue: yesNo(revision.couldContinue),
      onset: revision.onset ?? "",
      contact: revision.contact ?? "",
      movement: revision.movement ?? "",
      minuteOfPlay: revision.minuteOfPlay === null ? "" : String(revision.minuteOfPlay),
      surface: revision.surface ?? overview.session?.surface ?? "",
      footwear: revision.footwear ?? "",
      warmedUp: yesNo(revision.warmedUp ?? proposed),
      signs: among(signGroups.joint),
      emergencySigns: among(signGroups.limb),
      headSigns: among(signGroups.head),
      swellingNoticed: revision.swellingNoticed ?? "",
      firstCare: revision.firstCare,
      referredTo: revision.referredTo,
      phoned: texts.phoned ?? "",
      diagnosisPair: revision.tissue && revision.pathology ? `${revision.tissue}:${revision.pathology}` : "",
      diagnosis: texts.diagnosis ?? "",
      certainty: revision.certainty ?? "",
      surgery: yesNo(revision.surgery),
      surgeryDay: revision.surgeryDay ? formatDay(revision.surgeryDay, "figures") : "",
      description: texts.description ?? "",
      subsequence: revision.subsequence ?? "",
      subsequentTo: revision.subsequentTo ?? suggestion.to ?? "",
      closedOn: revision.closedOn ? formatDay(revision.closedOn, "figures") : "",
    };
    for (const [index, row] of further.entries()) {
      values[`further${index + 1}`] = `${row.tissue}:${row.pathology}`;
      values[`further${index + 1}Words`] = row.diagnosis ?? "";
      values[`further${index + 1}Certainty`] = row.certainty;
    }
    return {
      id,
      athleteId: overview.athleteId,
      name: `${athlete.givenName} ${athlete.familyName}`,
      withdrawn: revision.withdrawn,
      gaps: overview.gaps,
      operation: typeof usable?.values.operation === "string" ? usable.values.operation : randomUUID(),
      draftForm: editDraft(id),
      draftSavedAt: usable ? timeIn(scope.timeZone, usable.savedAt) : null,
      values: usable?.values ?? values,
      sessions: sessions.map(({ id: sessionId, kind, startTime, teamName }) => ({
        id: sessionId,
        kind,
        teamName,
        startTime: startTime?.slice(0, 5) ?? null,
      })),
      sessionSurface: overview.session?.surface ?? null,
      /** What the session's record proposes, while nobody has confirmed it. */
      warmedUpProposed: proposed,
      relation: suggestion,
      earlier: earlier.map(({ id: earlierId, bodyArea, side, pathology, onsetDay, year }) => ({
        id: earlierId,
        bodyArea,
        side,
        pathology,
        onsetDay,
        year,
      })),
    };
  });
}
