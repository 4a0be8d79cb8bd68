import { createHash } from "node:crypto";
import { masterKey } from "~/platform/crypto/keys.server";
import { keyedHash } from "~/platform/crypto/sealing.server";

/**
 * Tokens of mailed links: 256 bits, derived from the record's id and the moment it expires, so that the outbox
 * composes the mail without ever storing the token. Stored is its hash.
 */
export function linkToken(purpose: "invitation" | "notice", id: string, expiresAt: Date): string {
  return keyedHash(masterKey(), `${purpose} link`, `${id} ${Math.floor(expiresAt.getTime() / 1000)}`);
}

export const hashToken = (token: string) => createHash("sha256").update(token).digest("base64url");

/** The moment a number of days from now, in whole seconds, since tokens are derived from it. */
export function expiryInDays(days: number, now = new Date()): Date {
  return new Date((Math.floor(now.getTime() / 1000) + days * 24 * 3600) * 1000);
}
