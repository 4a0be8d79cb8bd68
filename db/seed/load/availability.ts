import { availabilityChanges, availabilityReasons } from "~db/schema";
import { addDays } from "../scenario/days";
import type { Availability } from "../scenario/types";
import { writtenAt } from "./injuries";
import { byKey, find, groupBy, insertRows, type Loading } from "./loading";

type Change = Pick<Availability, "state" | "restrictions" | "minutesLimit"> | { state: "full" };

/** Contributions of one reason as dated changes: each holds until the next, and what ends is full again the day after. */
export function changesOf(parts: readonly Availability[]): (Change & { from: string })[] {
  const sorted = [...parts].sort((a, b) => (a.from < b.from ? -1 : 1));
  return sorted.flatMap((part, index) => {
    const next = sorted[index + 1];
    const change = {
      from: part.from,
      state: part.state,
      restrictions: part.restrictions,
      minutesLimit: part.minutesLimit,
    };
    const dayAfter = part.to === null ? null : addDays(part.to, 1);
    if (dayAfter === null || dayAfter === next?.from) return [change];
    return [change, { from: dayAfter, state: "full" as const }];
  });
}

type Reason = {
  key: string;
  athlete: string;
  cause: Availability["reason"];
  injury: string | null;
  parts: Availability[];
};

/** An injury is one reason. Of the others each run of days without a gap is one. */
export function reasonsOf(rows: readonly Availability[]): Reason[] {
  const ofInjuries = groupBy(
    rows.filter(({ injury }) => injury !== null),
    ({ injury }) => injury ?? "",
  );
  const reasons: Reason[] = [...ofInjuries].map(([injury, parts]) => ({
    key: injury,
    athlete: parts[0]?.athlete ?? "",
    cause: "injury",
    injury,
    parts,
  }));
  const others = groupBy(
    rows.filter(({ injury }) => injury === null),
    ({ athlete, reason }) => `${athlete} ${reason}`,
  );
  for (const parts of others.values()) {
    let open: Reason | undefined;
    for (const part of parts.sort((a, b) => (a.from < b.from ? -1 : 1))) {
      const end = open?.parts.at(-1)?.to;
      if (open && end && addDays(end, 1) === part.from) {
        open.parts.push(part);
        continue;
      }
      const { athlete, reason, from } = part;
      open = { key: `${athlete} ${reason} ${from}`, athlete, cause: reason, injury: null, parts: [part] };
      reasons.push(open);
    }
  }
  return reasons;
}

/** Why athletes were not fully available, and the dated changes of each reason, set by the athletic trainer. */
export async function loadAvailability({ tx, own, organisationId, id, person, at, on }: Loading) {
  const injuries = byKey(own.injuries);
  const trainer = own.memberships.find(({ role }) => role === "trainer")?.person ?? "";
  const reasons = reasonsOf(own.availability).map((reason) => {
    const injury = reason.injury === null ? undefined : find(injuries, reason.injury);
    const changes = changesOf(reason.parts);
    const begun = on(changes[0]?.from ?? own.today, "08:00");
    const written = injury ? at(writtenAt(injury)) : begun;
    return { ...reason, changes, written, by: person(injury?.loggedBy ?? trainer) };
  });
  await insertRows(
    tx,
    availabilityReasons,
    reasons.map(({ key, athlete, cause, injury, by, written }) => ({
      organisationId,
      id: id("availability reason", key),
      athleteId: id("athlete", athlete),
      cause,
      injuryId: injury && id("injury", injury),
      recordedBy: by,
      recordedAt: written,
    })),
  );
  await insertRows(
    tx,
    availabilityChanges,
    reasons.flatMap(({ key, athlete, by, changes, written }) =>
      changes.map((change, index) => ({
        organisationId,
        id: id("availability change", `${key} ${index + 1}`),
        reasonId: id("availability reason", key),
        athleteId: id("athlete", athlete),
        fromDay: change.from,
        state: change.state,
        restrictions: change.state === "full" ? [] : change.restrictions,
        minutesLimit: change.state === "full" ? null : change.minutesLimit,
        setBy: by,
        setAt: index === 0 ? written : on(change.from, "08:00"),
        seq: index + 1,
      })),
    ),
  );
}
