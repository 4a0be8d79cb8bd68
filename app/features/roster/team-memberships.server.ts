import { randomUUID } from "node:crypto";
import type { z } from "zod";
import { audit } from "~/platform/audit.server";
import { formatDay } from "~/platform/days";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { type Tx, write } from "~db/client.server";
import { may } from "../accounts/permissions";
import type { MemberScope } from "../accounts/scope.server";
import { closeEntry, findEntry, insertEntry, listEntries } from "./roster.queries.server";
import type { joinTeamSchema, leaveTeamSchema } from "./roster.schema";
import { requireAthlete } from "./roster.server";
import { coversTeam } from "./visibility.server";

type Stay = { id?: string; teamId: string; fromDay: string; toDay: string | null };

/** Says which days are there already. The database refuses overlaps as well, for two people at once. */
async function refuseOverlap(tx: Tx, athleteId: string, field: "fromDay" | "toDay", stay: Stay) {
  const clash = (await listEntries(tx, athleteId)).find(
    ({ id, teamId, fromDay, toDay }) =>
      id !== stay.id &&
      teamId === stay.teamId &&
      (!stay.toDay || fromDay <= stay.toDay) &&
      (!toDay || toDay >= stay.fromDay),
  );
  if (!clash) return;
  const until = clash.toDay ? `to ${formatDay(clash.toDay)}` : "on, without a last day";
  throw new DomainError("conflict", "", {
    fields: {
      [field]: [
        `On ${clash.team} already from ${formatDay(clash.fromDay)} ${until}. Enter days that do not overlap, or end that membership first.`,
      ],
    },
  });
}

/** Puts an athlete on a team from a day, or from a day to a day. Two teams at once are fine, one team twice is not. */
export function joinTeam(scope: MemberScope, athleteId: string, input: z.output<typeof joinTeamSchema>) {
  if (!may(scope.roles, "roster.write")) throw forbidden();
  if (!coversTeam(scope, input.team)) throw notFound("That team");
  return write(scope, async (tx) => {
    await requireAthlete(tx, athleteId);
    const { team: teamId, fromDay, toDay } = input;
    await refuseOverlap(tx, athleteId, "fromDay", { teamId, fromDay, toDay });
    await insertEntry(tx, { id: randomUUID(), athleteId, teamId, fromDay, toDay });
    await audit(tx, { action: "roster.join", subjectId: teamId, athleteId, fields: { fromDay } });
  });
}

/** Ends a membership of a team with its last day. The days before stay as they are. */
export function leaveTeam(scope: MemberScope, athleteId: string, input: z.output<typeof leaveTeamSchema>) {
  if (!may(scope.roles, "roster.write")) throw forbidden();
  return write(scope, async (tx) => {
    await requireAthlete(tx, athleteId);
    const entry = await findEntry(tx, athleteId, input.entry);
    if (!entry || !coversTeam(scope, entry.teamId)) throw notFound("That membership");
    if (input.toDay < entry.fromDay)
      throw new DomainError("invalid", "", {
        fields: { toDay: ["The last day lies before the first. Enter a later one."] },
      });
    await refuseOverlap(tx, athleteId, "toDay", { ...entry, toDay: input.toDay });
    await closeEntry(tx, entry.id, input.toDay);
    await audit(tx, {
      action: "roster.leave",
      subjectId: entry.teamId,
      athleteId,
      fields: { toDay: input.toDay },
    });
  });
}
