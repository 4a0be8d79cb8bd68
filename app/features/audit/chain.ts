import { createHash } from "node:crypto";

/** What a link of the chain is made of: the whole event, in a fixed order. */
export type SealedEvent = {
  id: string;
  at: Date;
  personId: string | null;
  actingAs: string;
  action: string;
  subjectId: string | null;
  athleteId: string | null;
  requestId: string | null;
  fields: Record<string, unknown>;
};

/** JSON whose keys are in order at every depth, so that a stored object gives the same text again. */
function ordered(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(ordered);
  if (value === null || typeof value !== "object") return value;
  return Object.fromEntries(
    Object.entries(value)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([key, item]) => [key, ordered(item)]),
  );
}

/** The hash of a link: SHA-256 over the hash before and the event, so that a changed or missing event no longer fits. */
export function linkHash(previous: string, event: SealedEvent): string {
  const text = JSON.stringify([
    previous,
    event.id,
    event.at.toISOString(),
    event.personId,
    event.actingAs,
    event.action,
    event.subjectId,
    event.athleteId,
    event.requestId,
    ordered(event.fields),
  ]);
  return createHash("sha256").update(text).digest("base64url");
}

export type Link = { position: number; hash: string; event: SealedEvent | null };

/** The first position at which the chain is broken; null when every link fits. */
export function firstBroken(chain: readonly Link[]): number | null {
  let previous = "";
  for (const [index, { position, hash, event }] of chain.entries()) {
    if (position !== index + 1 || !event || linkHash(previous, event) !== hash) return index + 1;
    previous = hash;
  }
  return null;
}
