import { randomUUID } from "node:crypto";
import { addDays } from "~/platform/clock";
import { foldText } from "~/platform/fold-text";
import { type Scope, write } from "~db/client.server";
import { athletes, guardians, guardianships, rosterEntries } from "~db/schema";
import { counter, only } from "./rows";

type Row<T> = Partial<Omit<T, "organisationId">>;
const next = counter();

/** Left out: a girl of fifteen. `teamId` puts her on that team's roster, from 120 days ago or `fromDay` on. */
export async function makeAthlete(
  scope: Scope,
  {
    teamId,
    fromDay,
    ...given
  }: Row<typeof athletes.$inferInsert> & { teamId?: string; fromDay?: string } = {},
) {
  const number = next();
  const givenName = given.givenName ?? "Ines";
  const familyName = given.familyName ?? `Test ${number}`;
  const values = {
    organisationId: scope.organisationId,
    id: randomUUID(),
    givenName,
    familyName,
    nameKey: foldText(`${givenName} ${familyName}`),
    number: `${1000 + number}`,
    dateOfBirth: addDays(scope.today, -15 * 365 - 100),
    sex: "female",
    ...given,
  };
  const athlete = await write(scope, async (tx) =>
    only(await tx.insert(athletes).values(values).returning()),
  );
  if (teamId)
    await makeRosterEntry(scope, { athleteId: athlete.id, teamId, ...(fromDay ? { fromDay } : {}) });
  return athlete;
}

export function makeRosterEntry(
  scope: Scope,
  given: Row<typeof rosterEntries.$inferInsert> & { athleteId: string; teamId: string },
) {
  const values = {
    organisationId: scope.organisationId,
    id: randomUUID(),
    fromDay: addDays(scope.today, -120),
    ...given,
  };
  return write(scope, async (tx) => only(await tx.insert(rosterEntries).values(values).returning()));
}

/** A guardian with e-mail who may be told and may decide, for the athletes named. */
export function makeGuardian(
  scope: Scope,
  {
    athleteIds,
    guardianship,
    ...given
  }: Row<typeof guardians.$inferInsert> & {
    athleteIds: readonly string[];
    guardianship?: Row<typeof guardianships.$inferInsert>;
  },
) {
  const number = next();
  const { organisationId } = scope;
  return write(scope, async (tx) => {
    const guardian = only(
      await tx
        .insert(guardians)
        .values({
          organisationId,
          id: randomUUID(),
          name: `Guardian ${number}`,
          email: `guardian-${number}@example.org`,
          phone: "+44 1632 960111",
          ...given,
        })
        .returning(),
    );
    for (const athleteId of athleteIds)
      await tx
        .insert(guardianships)
        .values({ organisationId, athleteId, guardianId: guardian.id, ...guardianship });
    return guardian;
  });
}
