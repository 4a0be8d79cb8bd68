import { randomUUID } from "node:crypto";
import type { z } from "zod";
import { audit } from "~/platform/audit.server";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { foldText } from "~/platform/fold-text";
import { read, type Tx, write } from "~db/client.server";
import { findOrganisation } from "./people.queries.server";
import { may, type Permission } from "./permissions";
import type { MemberScope } from "./scope.server";
import {
  insertSeason,
  insertTeam,
  insertVenue,
  listAllTeams,
  listSeasons,
  listVenues,
  updateOrganisation,
  updateSeason,
  updateTeam,
  updateVenue,
} from "./settings.queries.server";
import type { organisationSchema, seasonSchema, teamSchema, venueSchema } from "./settings.schema";

function need(scope: MemberScope, permission: Permission) {
  if (!may(scope.roles, permission)) throw forbidden();
}

const taken = (field: string, message: string) =>
  new DomainError("conflict", "", { fields: { [field]: [message] } });

export function readOrganisation(scope: MemberScope) {
  need(scope, "settings.read");
  return read(scope, async (tx) => {
    const organisation = await findOrganisation(tx);
    if (!organisation) throw notFound();
    return organisation;
  });
}

export function editOrganisation(
  scope: MemberScope,
  version: number,
  input: z.output<typeof organisationSchema>,
) {
  need(scope, "settings.write");
  return write(scope, async (tx) => {
    const [saved] = await updateOrganisation(tx, version, input);
    if (!saved)
      throw new DomainError(
        "conflict",
        "Somebody else changed the settings while you were typing. What you typed is still here: open the settings in another window to compare, then save again to replace theirs.",
      );
    await audit(tx, { action: "organisation.edit" });
  });
}

/** @param except the season being edited, which may overlap itself */
async function refuseSeasonClash(tx: Tx, input: z.output<typeof seasonSchema>, except?: string) {
  const others = (await listSeasons(tx)).filter(({ id }) => id !== except);
  if (others.some(({ name }) => name === input.name))
    throw taken("name", "There is a season of this name already.");
  const clash = others.find(({ startsOn, endsOn }) => startsOn <= input.endsOn && endsOn >= input.startsOn);
  if (clash)
    throw taken("startsOn", `These days overlap with the season ${clash.name}. A day belongs to one season.`);
}

export function readSeasons(scope: MemberScope) {
  need(scope, "settings.read");
  return read(scope, listSeasons);
}

export function saveSeason(scope: MemberScope, id: string | null, input: z.output<typeof seasonSchema>) {
  need(scope, "settings.write");
  return write(scope, async (tx) => {
    await refuseSeasonClash(tx, input, id ?? undefined);
    if (!id) await insertSeason(tx, { id: randomUUID(), ...input });
    else if ((await updateSeason(tx, id, input)).length === 0) throw notFound("That season");
    await audit(tx, { action: id ? "season.edit" : "season.add" });
  });
}

export function readTeams(scope: MemberScope) {
  need(scope, "settings.read");
  return read(scope, listAllTeams);
}

/** Adds or changes a team. Names differ by more than case, accents and spaces, so that imports find the right one. */
export async function insertOrUpdateTeam(tx: Tx, id: string | null, input: z.output<typeof teamSchema>) {
  const nameKey = foldText(input.name);
  const clash = (await listAllTeams(tx)).find((team) => team.nameKey === nameKey && team.id !== id);
  if (clash) throw taken("name", `There is a team called ${clash.name} already.`);
  if (id) {
    if ((await updateTeam(tx, id, { ...input, nameKey })).length === 0) throw notFound("That team");
    return id;
  }
  const fresh = randomUUID();
  await insertTeam(tx, { id: fresh, ...input, nameKey });
  return fresh;
}

export function saveTeam(scope: MemberScope, id: string | null, input: z.output<typeof teamSchema>) {
  need(scope, "settings.write");
  return write(scope, async (tx) => {
    const saved = await insertOrUpdateTeam(tx, id, input);
    await audit(tx, { action: id ? "team.edit" : "team.add", subjectId: saved });
    return saved;
  });
}

/** An archived team is offered nowhere; its past stays in every rate. */
export function archiveTeam(scope: MemberScope, id: string, archived: boolean) {
  need(scope, "settings.write");
  return write(scope, async (tx) => {
    if ((await updateTeam(tx, id, { archivedAt: archived ? new Date() : null })).length === 0)
      throw notFound("That team");
    await audit(tx, { action: archived ? "team.archive" : "team.restore", subjectId: id });
  });
}

export function readVenues(scope: MemberScope) {
  need(scope, "settings.read");
  return read(scope, listVenues);
}

export function saveVenue(scope: MemberScope, id: string | null, input: z.output<typeof venueSchema>) {
  need(scope, "settings.write");
  return write(scope, async (tx) => {
    const clash = (await listVenues(tx)).find((venue) => venue.name === input.name && venue.id !== id);
    if (clash) throw taken("name", "There is a venue of this name already.");
    if (!id) await insertVenue(tx, { id: randomUUID(), ...input });
    else if ((await updateVenue(tx, id, input)).length === 0) throw notFound("That venue");
    await audit(tx, { action: id ? "venue.edit" : "venue.add" });
  });
}
