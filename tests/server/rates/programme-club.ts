import { randomUUID } from "node:crypto";
import { addDays } from "~/platform/clock";
import { type Scope, write } from "~db/client.server";
import { programmeAssignments, programmes, warmUpAthletes, warmUps } from "~db/schema";
import { warmUpBlocks } from "~db/schema/codes";
import { type Plan, type Random, randomOf } from "./generated-club";

/** Warm-ups for a generated club, with the corners that the programme's counting gets wrong. */

export type WarmUpPlan = {
  /** By session; a session that is not here has no record. */
  records: Map<
    string,
    { outcome: "full" | "part" | "skipped"; minutes: number | null; athleteIds: Set<string> }
  >;
  /** The day from which a team follows the programme; a team that is not here follows none. */
  starts: Map<string, string>;
};

const programmeId = "6f0c1de2-6a3f-4b5e-9d61-0a7a4c1f9b52";

/** Draws the records, and gives injuries a time and an answer of their own. Changes the plan's injuries. */
export function planWarmUps(seed: number, plan: Plan, today: string): WarmUpPlan {
  const random = randomOf(seed * 7919 + 1);
  const records: WarmUpPlan["records"] = new Map();
  for (const { id } of plan.sessions) {
    if (random.chance(0.2)) continue;
    const outcome = random.pick(["full", "full", "full", "part", "skipped"] as const);
    const there = plan.parts.filter(
      ({ sessionId, presence }) => sessionId === id && presence === "took_part",
    );
    // Late arrivals missed it; who left before the session has no minutes and may stand in the record all the same.
    const warmed = outcome === "skipped" ? [] : there.filter(() => random.chance(0.8));
    records.set(id, {
      outcome,
      minutes: outcome === "skipped" ? null : random.pick([12, 20, null]),
      athleteIds: new Set(warmed.map(({ athleteId }) => athleteId)),
    });
  }
  const [first, second, third] = plan.teams;
  const starts = new Map([
    [first?.id ?? "", addDays(plan.season.from, -200)],
    [second?.id ?? "", addDays(plan.season.from, 45)],
    [third?.id ?? "", plan.season.from],
  ]);
  for (let n = 0; n < 180; n++) hurtSomebody(plan, random, today);
  for (const injury of plan.injuries) {
    const session = plan.sessions.find(({ id }) => id === injury.sessionId);
    injury.onsetTime = session && random.chance(0.7) ? timeAfter(session, random.int(-5, 80)) : null;
    injury.warmedUp = random.pick([true, false, null, null, null]);
  }
  return { records, starts };
}

/** One more injury of somebody who was there, mostly of those that the warm-up is meant to prevent. */
function hurtSomebody(plan: Plan, random: Random, today: string) {
  const part = random.pick(plan.parts.filter(({ presence }) => presence === "took_part"));
  const session = plan.sessions.find(({ id }) => id === part.sessionId);
  if (!session || session.day > today) return;
  const [injuryId, reasonId] = [randomUUID(), randomUUID()];
  plan.injuries.push({
    ...{ injuryId, athleteId: part.athleteId, sessionId: session.id, version: 1 },
    onsetDay: session.day,
    bodyArea: random.pick(["knee", "knee", "ankle"]),
    side: "left",
    onset: "sudden",
    contact: random.pick(["non_contact", "indirect_athlete", "direct_object"]),
    subsequence: "index",
    ...{ signs: [], firstCare: [], referredTo: [], withdrawn: false, outsideSport: false },
  });
  if (random.chance(0.3)) return;
  const change = { reasonId, injuryId, athleteId: part.athleteId };
  plan.changes.push({ ...change, seq: 1, fromDay: session.day, state: "unavailable" });
  plan.changes.push({ ...change, seq: 2, fromDay: addDays(session.day, 9), state: "full" });
}

/** The clock some minutes after a session's start; the day stays the injury's own. */
function timeAfter({ startTime }: { startTime?: string | null }, minutes: number): string | null {
  if (!startTime) return null;
  const [hour = 0, minute = 0] = startTime.split(":").map(Number);
  const all = (hour * 60 + minute + minutes + 1440) % 1440;
  return `${String(Math.floor(all / 60)).padStart(2, "0")}:${String(all % 60).padStart(2, "0")}`;
}

export async function plantWarmUps(scope: Scope, { records, starts }: WarmUpPlan) {
  const { organisationId } = scope;
  await write(scope, async (tx) => {
    await tx.insert(programmes).values({ organisationId, id: programmeId, name: "Warm-up" });
    await tx.insert(programmeAssignments).values(
      [...starts].flatMap(([teamId, startsOn]) => [
        { organisationId, teamId, startsOn, programmeId, programmeVersion: 1 },
        // New targets later on are no new start.
        { organisationId, teamId, startsOn: addDays(startsOn, 30), programmeId, programmeVersion: 1 },
      ]),
    );
    await tx.insert(warmUps).values(
      [...records].map(([sessionId, { outcome, minutes }]) => ({
        ...{ organisationId, sessionId, outcome, minutes },
        blocks: outcome === "skipped" ? [] : outcome === "full" ? [...warmUpBlocks] : ["running"],
        skipReason: outcome === "skipped" ? "weather" : null,
      })),
    );
    const rows = [...records].flatMap(([sessionId, { athleteIds }]) =>
      [...athleteIds].map((athleteId) => ({ organisationId, sessionId, athleteId })),
    );
    for (let from = 0; from < rows.length; from += 500)
      await tx.insert(warmUpAthletes).values(rows.slice(from, from + 500));
  });
}
