import { eq } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { organisationKeys } from "~db/schema";
import { env } from "../env.server";
import { type KeyRing, openText, type SealedPlace, sealText, unwrapKey } from "./sealing.server";

export const masterKey = () => Buffer.from(env().HALESIDE_MASTER_KEY, "base64");

const rings = new Map<string, { ring: KeyRing; readAt: number }>();
const ringLifeMs = 60_000;

/** The key ring of the transaction's organisation, cached for a minute. */
async function keyRing(tx: Tx): Promise<KeyRing> {
  const { organisationId } = tx.scope;
  const known = rings.get(organisationId);
  if (known && Date.now() - known.readAt < ringLifeMs) return known.ring;
  const rows = await tx
    .select()
    .from(organisationKeys)
    .where(eq(organisationKeys.organisationId, organisationId));
  const keys = new Map(
    rows.map((row) => [
      row.keyVersion,
      unwrapKey(masterKey(), organisationId, row.keyVersion, row.wrappedKey),
    ]),
  );
  const ring = { newest: Math.max(...keys.keys()), keys };
  rings.set(organisationId, { ring, readAt: Date.now() });
  return ring;
}

type Place = Omit<SealedPlace, "organisationId">;

/**
 * Sealing in a scope: `seal` before a row write, `open` after a row read, with the place the bytes belong to.
 * Call it once at the start of a use case and pass it on.
 */
export async function sealer(tx: Tx) {
  const ring = await keyRing(tx);
  const { organisationId } = tx.scope;
  return {
    seal: (place: Place, text: string | null | undefined) =>
      sealText(ring, { organisationId, ...place }, text),
    /** For required columns. */
    sealRequired: (place: Place, text: string) => {
      const bytes = sealText(ring, { organisationId, ...place }, text);
      if (!bytes) throw new Error(`${place.table}.${place.column} must not be empty.`);
      return bytes;
    },
    open: (place: Place, bytes: Uint8Array | null) => openText(ring, { organisationId, ...place }, bytes),
  };
}

export type Sealer = Awaited<ReturnType<typeof sealer>>;
