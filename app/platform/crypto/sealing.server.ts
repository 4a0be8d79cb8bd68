import { createCipheriv, createDecipheriv, createHmac, hkdfSync, randomBytes } from "node:crypto";

/**
 * AES-256-GCM as in NIST SP 800-38D: 12 random bytes of nonce, 16 bytes of tag. The associated data names what the
 * bytes belong to, so that sealed text moved to another row, column or organisation does not open.
 */
const format = 1;
const nonceLength = 12;
const tagLength = 16;

export type SealedPlace = {
  organisationId: string;
  table: string;
  column: string;
  row: string;
  version: number;
};

/** Data keys of an organisation by version; the highest seals. */
export type KeyRing = { newest: number; keys: ReadonlyMap<number, Buffer> };

const associatedData = (place: SealedPlace) =>
  Buffer.from(
    JSON.stringify([place.organisationId, place.table, place.column, place.row, place.version]),
    "utf8",
  );

function encrypt(key: Buffer, aad: Buffer, clear: Buffer) {
  const nonce = randomBytes(nonceLength);
  const cipher = createCipheriv("aes-256-gcm", key, nonce);
  cipher.setAAD(aad);
  const body = Buffer.concat([cipher.update(clear), cipher.final()]);
  return Buffer.concat([nonce, cipher.getAuthTag(), body]);
}

function decrypt(key: Buffer, aad: Buffer, bytes: Buffer) {
  const decipher = createDecipheriv("aes-256-gcm", key, bytes.subarray(0, nonceLength));
  decipher.setAAD(aad);
  decipher.setAuthTag(bytes.subarray(nonceLength, nonceLength + tagLength));
  return Buffer.concat([decipher.update(bytes.subarray(nonceLength + tagLength)), decipher.final()]);
}

/** Seals text for one place. Null and empty text stay null: there is nothing to keep. */
export function sealText(
  ring: KeyRing,
  place: SealedPlace,
  text: string | null | undefined,
): Uint8Array | null {
  if (text == null || text === "") return null;
  const key = ring.keys.get(ring.newest);
  if (!key) throw new Error("The organisation has no data key.");
  const head = Buffer.alloc(5);
  head.writeUInt8(format, 0);
  head.writeUInt32BE(ring.newest, 1);
  return Buffer.concat([head, encrypt(key, associatedData(place), Buffer.from(text, "utf8"))]);
}

/**
 * Opens sealed text.
 * @throws Error when the bytes were changed, moved to another place, or sealed by a key that is not in the ring.
 */
export function openText(ring: KeyRing, place: SealedPlace, bytes: Uint8Array | null): string | null {
  if (bytes == null) return null;
  const buffer = Buffer.from(bytes);
  if (buffer.readUInt8(0) !== format) throw new Error(`Sealed text of an unknown format in ${place.table}.`);
  const key = ring.keys.get(buffer.readUInt32BE(1));
  if (!key) throw new Error(`Sealed text in ${place.table} needs a data key that is not here.`);
  return decrypt(key, associatedData(place), buffer.subarray(5)).toString("utf8");
}

const wrapPlace = (organisationId: string, version: number) =>
  Buffer.from(JSON.stringify(["organisation_keys", organisationId, version]), "utf8");

/** A new data key of an organisation, wrapped by the master key. */
export function makeWrappedKey(masterKey: Buffer, organisationId: string, version: number): Uint8Array {
  return encrypt(masterKey, wrapPlace(organisationId, version), randomBytes(32));
}

export function unwrapKey(masterKey: Buffer, organisationId: string, version: number, wrapped: Uint8Array) {
  return decrypt(masterKey, wrapPlace(organisationId, version), Buffer.from(wrapped));
}

const checkPlace = Buffer.from("haleside key check", "utf8");

/** The value stored with a new database, by which a wrong master key is recognised. */
export const makeKeyCheck = (masterKey: Buffer) =>
  encrypt(masterKey, checkPlace, Buffer.from("this key opens")).toString("base64");

export function keyOpens(masterKey: Buffer, value: string) {
  try {
    return decrypt(masterKey, checkPlace, Buffer.from(value, "base64")).toString() === "this key opens";
  } catch {
    return false;
  }
}

/** A keyed hash for looking something up without keeping it (link answers), separate per purpose. */
export function keyedHash(masterKey: Buffer, purpose: string, text: string): string {
  const key = Buffer.from(hkdfSync("sha256", masterKey, "", `haleside ${purpose}`, 32));
  return createHmac("sha256", key).update(text).digest("base64url");
}
