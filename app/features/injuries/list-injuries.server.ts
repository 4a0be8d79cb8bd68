import { may } from "~/features/accounts/permissions";
import type { MemberScope } from "~/features/accounts/scope.server";
import { lastListedDay, resolveViewing, type Viewing } from "~/features/accounts/viewing.server";
import {
  availabilityWords,
  bodyAreaWords,
  certaintyWords,
  contactWords,
  movementWords,
  onsetWords,
  pathologyWords,
  sessionKindWords,
  sexWords,
  sideWords,
  subsequenceWords,
  tissueWords,
} from "~/features/vocabulary";
import { audit } from "~/platform/audit.server";
import { sealer } from "~/platform/crypto/keys.server";
import { writeCsv } from "~/platform/csv";
import { forbidden, notFound } from "~/platform/errors";
import { foldText } from "~/platform/fold-text";
import { ageOn } from "~/statistics";
import { type Tx, write } from "~db/client.server";
import { findAthlete, findInjuryRows } from "./injuries.queries.server";
import { type ListFilter, listFilterSchema } from "./injuries.schema";
import { type InjuryOverview, openRevision, overviewsOf } from "./overview.server";
import { siteWords } from "./summary";

/** The filters of an address; unknown ones are ignored. */
export const listFilterOf = (url: URL): ListFilter =>
  listFilterSchema.parse(Object.fromEntries(url.searchParams));

type Line = InjuryOverview & { diagnosis: string | null };

/** Whether every word typed is found in the athlete's name and number, the site, the type or the diagnosis. */
function hasWords({ athlete, revision, diagnosis, teams }: Line, words: readonly string[]) {
  const text = foldText(
    [
      athlete.givenName,
      athlete.familyName,
      athlete.number,
      siteWords(revision.bodyArea, revision.side),
      revision.pathology && pathologyWords[revision.pathology],
      diagnosis,
      ...teams,
    ]
      .filter(Boolean)
      .join(" "),
  );
  return words.every((word) => text.includes(word));
}

/** The injuries that a list is of: one athlete's, or those of the viewing's season and team. */
async function findListed(tx: Tx, viewing: Viewing, athleteId: string) {
  if (athleteId) {
    const athlete = await findAthlete(tx, athleteId);
    if (!athlete) throw notFound("That athlete");
    return { athlete, rows: await findInjuryRows(tx, { athleteId }) };
  }
  const { season, team } = viewing;
  const to = lastListedDay(viewing);
  const rows = await findInjuryRows(tx, {
    ...(season ? { from: season.startsOn } : {}),
    ...(to ? { to } : {}),
    ...(team ? { teamIds: [team.id] } : {}),
  });
  return { athlete: null, rows };
}

/** The lines of a list under the filter of its address. */
async function findLines(tx: Tx, url: URL) {
  const viewing = await resolveViewing(tx, url);
  const filter = listFilterOf(url);
  const { athlete, rows } = await findListed(tx, viewing, filter.athlete);
  const seals = await sealer(tx);
  const words = foldText(filter.q).split(" ").filter(Boolean);
  const all = (await overviewsOf(tx, rows)).map(
    (row): Line => ({ ...row, diagnosis: openRevision(seals, row.revision).diagnosis }),
  );
  const lines = all.filter(
    (row) =>
      (filter.state === "all" || (filter.state === "open") === row.open) &&
      (filter.area === "" || row.revision.bodyArea === filter.area) &&
      (filter.severity === "" || row.severity === filter.severity) &&
      hasWords(row, words),
  );
  return { viewing, athlete, filter, all, lines };
}

/** The list of injuries: lines, and the counts of its sentence. */
export function listInjuries(scope: MemberScope, url: URL) {
  if (!may(scope.roles, "injuries.read")) throw forbidden();
  return write(scope, async (tx) => {
    const { viewing, athlete, filter, all, lines } = await findLines(tx, url);
    await audit(tx, { action: "injury.list", fields: { count: lines.length } });
    return {
      filter,
      /** Whose injuries they are, where the list is of one athlete; then of every season and team. */
      athlete: athlete && `${athlete.givenName} ${athlete.familyName}`,
      season: athlete ? null : (viewing.season?.name ?? null),
      team: athlete ? null : (viewing.team?.name ?? null),
      total: all.length,
      open: lines.filter(({ open }) => open).length,
      limiting: lines.filter(({ today }) => today.state !== "full").length,
      lines: lines.map((row) => ({
        id: row.id,
        athleteId: row.athleteId,
        name: `${row.athlete.givenName} ${row.athlete.familyName}`,
        sortName: `${row.athlete.familyName} ${row.athlete.givenName}`,
        teams: row.teams.join(", "),
        onsetDay: row.revision.onsetDay,
        site: siteWords(row.revision.bodyArea, row.revision.side),
        what: row.diagnosis ?? (row.revision.pathology ? pathologyWords[row.revision.pathology] : null),
        days: row.timeLoss.days,
        ongoing: row.timeLoss.ongoing,
        severity: row.severity,
        state: row.today.state,
        open: row.open,
        gaps: row.gaps.length,
      })),
    };
  });
}

const csvHead = [
  "athlete",
  "number",
  "sex",
  "age at onset",
  "team",
  "day of onset",
  "time",
  "session",
  "body area",
  "side",
  "onset",
  "contact",
  "movement",
  "suspected concussion",
  "could continue",
  "tissue",
  "pathology",
  "diagnosis",
  "certainty",
  "relation to earlier injuries",
  "time loss days",
  "time loss ongoing",
  "severity",
  "availability today",
  "closed on",
  "still missing",
];

const yesNo = (answer: boolean | null) => (answer === null ? "" : answer ? "yes" : "no");

function csvLine({ athlete, revision, session, ...row }: Line) {
  return [
    `${athlete.givenName} ${athlete.familyName}`,
    athlete.number,
    sexWords[athlete.sex as keyof typeof sexWords],
    athlete.dateOfBirth && athlete.dateOfBirth <= revision.onsetDay
      ? ageOn(athlete.dateOfBirth, revision.onsetDay)
      : "",
    row.teams.join(", "),
    revision.onsetDay,
    revision.onsetTime?.slice(0, 5),
    revision.outsideSport ? "outside organised sport" : session ? sessionKindWords[session.kind] : "",
    bodyAreaWords[revision.bodyArea],
    sideWords[revision.side],
    revision.onset && onsetWords[revision.onset],
    revision.contact && contactWords[revision.contact],
    revision.movement && movementWords[revision.movement],
    yesNo(revision.suspectedConcussion),
    yesNo(revision.couldContinue),
    revision.tissue && tissueWords[revision.tissue],
    revision.pathology && pathologyWords[revision.pathology],
    row.diagnosis,
    revision.certainty && certaintyWords[revision.certainty],
    revision.subsequence && subsequenceWords[revision.subsequence],
    row.timeLoss.days,
    yesNo(row.timeLoss.ongoing),
    row.severity,
    availabilityWords[row.today.state],
    revision.closedOn,
    row.gaps.map(({ label }) => label).join("; "),
  ];
}

/** The list under its filter as CSV, with every field a clinician may take away; the taking is audited. */
export function exportInjuries(scope: MemberScope, url: URL): Promise<string> {
  if (!may(scope.roles, "injuries.read")) throw forbidden();
  return write(scope, async (tx) => {
    const { lines } = await findLines(tx, url);
    await audit(tx, { action: "injury.export", fields: { count: lines.length } });
    return writeCsv([csvHead, ...lines.map(csvLine)], { bom: true });
  });
}
