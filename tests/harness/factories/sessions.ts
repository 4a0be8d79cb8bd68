import { randomUUID } from "node:crypto";
import { type Scope, write } from "~db/client.server";
import {
  exercises,
  participations,
  programmeAssignments,
  programmes,
  sessions,
  warmUpAthletes,
  warmUps,
} from "~db/schema";
import { warmUpBlocks } from "~db/schema/codes";
import { counter, only } from "./rows";

type Row<T> = Partial<Omit<T, "organisationId">>;
const next = counter();

/** Left out: a held training of 90 minutes, today. `minutes` records who took part and for how long, by athlete id. */
export function makeSession(
  scope: Scope,
  {
    minutes = {},
    ...given
  }: Row<typeof sessions.$inferInsert> & { teamId: string; minutes?: Record<string, number> },
) {
  const { organisationId } = scope;
  const parts = Object.entries(minutes);
  const values = {
    organisationId,
    id: randomUUID(),
    day: scope.today,
    kind: "training",
    state: "held",
    plannedMinutes: 90,
    actualMinutes: 90,
    exposureGrade: parts.length > 0 ? "recorded" : "none",
    createdBy: scope.personId,
    ...given,
  };
  return write(scope, async (tx) => {
    const session = only(await tx.insert(sessions).values(values).returning());
    for (const [athleteId, taken] of parts)
      await tx.insert(participations).values({
        organisationId,
        sessionId: session.id,
        athleteId,
        presence: taken > 0 ? "took_part" : "absent",
        minutes: taken,
        recordedBy: scope.personId,
      });
    return session;
  });
}

/** Left out: all five blocks done. */
export function makeWarmUp(
  scope: Scope,
  {
    athleteIds = [],
    ...given
  }: Row<typeof warmUps.$inferInsert> & { sessionId: string; athleteIds?: readonly string[] },
) {
  const { organisationId } = scope;
  const values = {
    organisationId,
    outcome: "full",
    blocks: [...warmUpBlocks],
    minutes: 18,
    recordedBy: scope.personId,
    ...given,
  };
  return write(scope, async (tx) => {
    const warmUp = only(await tx.insert(warmUps).values(values).returning());
    for (const athleteId of athleteIds)
      await tx.insert(warmUpAthletes).values({ organisationId, sessionId: warmUp.sessionId, athleteId });
    return warmUp;
  });
}

/** A programme with one exercise per block, which the teams follow from `startsOn` (left out: today) on. */
export function makeProgramme(
  scope: Scope,
  { teamIds = [], startsOn = scope.today }: { teamIds?: readonly string[]; startsOn?: string } = {},
) {
  const { organisationId } = scope;
  return write(scope, async (tx) => {
    const programme = only(
      await tx
        .insert(programmes)
        .values({ organisationId, id: randomUUID(), name: `Programme ${next()}` })
        .returning(),
    );
    const of = { organisationId, programmeId: programme.id, programmeVersion: 1 };
    for (const [index, block] of warmUpBlocks.entries())
      await tx.insert(exercises).values({
        ...of,
        position: index + 1,
        block,
        name: `Exercise ${index + 1}`,
        dose: "2 x 8",
        cue: "Knees over toes",
        progressions: ["On one leg"],
      });
    for (const teamId of teamIds) await tx.insert(programmeAssignments).values({ ...of, teamId, startsOn });
    return programme;
  });
}
