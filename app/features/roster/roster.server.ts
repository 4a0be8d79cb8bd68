import { randomUUID } from "node:crypto";
import type { z } from "zod";
import { audit } from "~/platform/audit.server";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { foldText } from "~/platform/fold-text";
import { once } from "~/platform/operations.server";
import { read, type Tx, write } from "~db/client.server";
import { may, type Permission } from "../accounts/permissions";
import type { MemberScope } from "../accounts/scope.server";
import { resolveViewing } from "../accounts/viewing.server";
import { stateOfDay } from "../availability/availability.server";
import { listGuardians } from "./guardians.queries.server";
import {
  endAlert,
  findAthlete,
  findAthleteByNumber,
  insertAlert,
  insertAthlete,
  insertEntry,
  listAlerts,
  listAthletes,
  listEntries,
  searchAthletes,
  sumExposure,
  updateAthlete,
} from "./roster.queries.server";
import type { alertSchema, athleteSchema, newAthleteSchema, rosterQuerySchema } from "./roster.schema";
import { coversTeam } from "./visibility.server";

export const rosterPageSize = 50;
const searchLimit = 20;

function need(scope: MemberScope, permission: Permission) {
  if (!may(scope.roles, permission)) throw forbidden();
}

const searchText = (scope: MemberScope, text: string) => ({
  words: foldText(text).split(" ").filter(Boolean),
  raw: text.trim(),
  numbers: may(scope.roles, "roster.contacts"),
});

/** Options of the athlete search: a name, with what tells two of one name apart. */
export function searchOptions(scope: MemberScope, text: string) {
  need(scope, "roster.read");
  const contacts = may(scope.roles, "roster.contacts");
  return read(scope, async (tx) => {
    const rows = await searchAthletes(tx, searchText(scope, text), searchLimit);
    return rows.map(({ id, givenName, familyName, number, visitor, teams }) => ({
      id,
      label: `${givenName} ${familyName}`,
      detail: [teams ?? (visitor ? "visitor" : "no team"), contacts ? number : null]
        .filter(Boolean)
        .join(", "),
    }));
  });
}

/** The roster of the season and team in the address. Coaches get names and teams, nothing of the family. */
export function listRoster(scope: MemberScope, url: URL, query: z.output<typeof rosterQuerySchema>) {
  need(scope, "roster.read");
  return read(scope, async (tx) => {
    const viewing = await resolveViewing(tx, url);
    const contacts = may(scope.roles, "roster.contacts");
    const filter = {
      ...searchText(scope, query.q),
      show: query.show,
      teamId: viewing.team?.id ?? null,
    };
    const { rows, total } = await listAthletes(tx, filter, query.page, rosterPageSize);
    return {
      rows: rows.map((row) => (contacts ? row : { ...row, number: null, dateOfBirth: null })),
      total,
      team: viewing.team,
      teams: viewing.teams,
      contacts,
    };
  });
}

/** An athlete the scope may see, or not_found. For the use cases of other features too. */
export async function requireAthlete(tx: Tx, id: string) {
  const athlete = await findAthlete(tx, id);
  if (!athlete) throw notFound("That athlete");
  return athlete;
}

/** The athlete's page. What a coach does not need is not read. */
export function readAthlete(scope: MemberScope, url: URL, id: string) {
  need(scope, "roster.read");
  const contacts = may(scope.roles, "roster.contacts");
  return read(scope, async (tx) => {
    const athlete = await requireAthlete(tx, id);
    const { season, teams } = await resolveViewing(tx, url);
    const until = season && season.endsOn < scope.today ? season.endsOn : scope.today;
    return {
      athlete: contacts
        ? athlete
        : { ...athlete, number: null, dateOfBirth: null, researchConsent: false, dominantLeg: "unknown" },
      entries: await listEntries(tx, id),
      alerts: (await listAlerts(tx, id)).map((alert) => ({
        id: alert.id,
        text: alert.text,
        agreedWith: contacts ? alert.agreedWith : null,
      })),
      guardians: contacts
        ? (await listGuardians(tx, id)).map(({ legalLimits, ...shown }) => ({
            ...shown,
            limited: legalLimits !== null,
          }))
        : [],
      exposure: contacts && season ? await sumExposure(tx, id, season.startsOn, until) : null,
      season,
      teams,
      state: (await stateOfDay(tx, [id], scope.today)).get(id) ?? null,
    };
  });
}

async function refuseTakenNumber(tx: Tx, number: string | null, ownId?: string) {
  if (!number) return;
  const holder = await findAthleteByNumber(tx, number);
  if (!holder || holder.id === ownId) return;
  throw new DomainError("conflict", "", {
    fields: {
      number: [
        `${holder.givenName} ${holder.familyName} has the number ${number} already. Give another, or open that athlete.`,
      ],
    },
  });
}

const nameKeyOf = (input: { givenName: string; familyName: string }) =>
  foldText(`${input.givenName} ${input.familyName}`);

/**
 * Adds an athlete, once per operation: a second one of the same name would share the first one's exposure and injuries.
 * @param operation the form's id
 * @returns the athlete's id, the same on a replay
 */
export function addAthlete(
  scope: MemberScope,
  input: z.output<typeof newAthleteSchema>,
  operation: string = randomUUID(),
): Promise<string> {
  need(scope, "roster.write");
  const { team, fromDay, ...person } = input;
  if (team && !coversTeam(scope, team)) throw notFound("That team");
  if (!team && scope.teams !== "all")
    throw new DomainError("invalid", "", {
      fields: { team: ["Choose one of your teams: you could not see a visitor without one afterwards."] },
    });
  return write(scope, (tx) =>
    once(tx, operation, { athlete: input }, async () => {
      await refuseTakenNumber(tx, person.number);
      const fresh = randomUUID();
      await insertAthlete(tx, { id: fresh, ...person, nameKey: nameKeyOf(person) });
      if (team && fromDay)
        await insertEntry(tx, { id: randomUUID(), athleteId: fresh, teamId: team, fromDay });
      await audit(tx, { action: "athlete.add", subjectId: fresh, athleteId: fresh });
      return { id: fresh };
    }),
  ).then(({ id }) => id);
}

const changedMeanwhile = () =>
  new DomainError(
    "conflict",
    "Somebody else changed this athlete while you were typing. What you typed is still here: compare it with the athlete's page and save again.",
  );

export function editAthlete(
  scope: MemberScope,
  id: string,
  version: number,
  input: z.output<typeof athleteSchema>,
) {
  need(scope, "roster.write");
  return write(scope, async (tx) => {
    const before = await requireAthlete(tx, id);
    await refuseTakenNumber(tx, input.number, id);
    if (!(await updateAthlete(tx, id, version, { ...input, nameKey: nameKeyOf(input) })))
      throw changedMeanwhile();
    const fields = (Object.keys(input) as (keyof typeof input)[]).filter((key) => input[key] !== before[key]);
    await audit(tx, { action: "athlete.edit", subjectId: id, athleteId: id, fields: { fields } });
  });
}

export function archiveAthlete(scope: MemberScope, id: string, archived: boolean) {
  need(scope, "roster.write");
  return write(scope, async (tx) => {
    const athlete = await requireAthlete(tx, id);
    if (!(await updateAthlete(tx, id, athlete.version, { archivedAt: archived ? new Date() : null })))
      throw changedMeanwhile();
    await audit(tx, {
      action: archived ? "athlete.archive" : "athlete.restore",
      subjectId: id,
      athleteId: id,
    });
  });
}

export function addAlert(scope: MemberScope, athleteId: string, input: z.output<typeof alertSchema>) {
  need(scope, "roster.write");
  return write(scope, async (tx) => {
    await requireAthlete(tx, athleteId);
    await insertAlert(tx, { id: randomUUID(), athleteId, ...input, setBy: scope.personId });
    await audit(tx, { action: "alert.add", athleteId });
  });
}

export function removeAlert(scope: MemberScope, athleteId: string, id: string) {
  need(scope, "roster.write");
  return write(scope, async (tx) => {
    await requireAthlete(tx, athleteId);
    await endAlert(tx, athleteId, id);
    await audit(tx, { action: "alert.end", subjectId: id, athleteId });
  });
}
