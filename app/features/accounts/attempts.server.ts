import { RateLimiterDrizzle, RateLimiterRes } from "rate-limiter-flexible";
import { env } from "~/platform/env.server";
import { DomainError } from "~/platform/errors";
import { attempt } from "~db/schema/auth";
import { identity } from "./identity.server";

/**
 * Attempts are counted per account and per client address, in the database, so that every process knows them.
 * The address comes from the connection or a trusted proxy, never from a header a client can write.
 */
const limits = {
  "sign-in": { points: () => env().SIGN_IN_ATTEMPTS, perSeconds: 15 * 60, addressFactor: 5 },
  "password-reset": { points: () => 5, perSeconds: 60 * 60, addressFactor: 4 },
  "verify-email": { points: () => 5, perSeconds: 60 * 60, addressFactor: 4 },
  invitation: { points: () => 10, perSeconds: 60 * 60, addressFactor: 4 },
  "guardian-answer": { points: () => 30, perSeconds: 60 * 60, addressFactor: 2 },
} as const;

export type LimitName = keyof typeof limits;

const made = new Map<string, RateLimiterDrizzle>();

function limiter(name: LimitName, kind: "account" | "address") {
  const key = `${name}:${kind}`;
  const known = made.get(key);
  if (known) return known;
  const { points, perSeconds, addressFactor } = limits[name];
  const fresh = new RateLimiterDrizzle({
    storeClient: identity().db,
    schema: attempt,
    keyPrefix: key,
    points: kind === "account" ? points() : points() * addressFactor,
    duration: perSeconds,
    clearExpiredByTimeout: false,
  });
  made.set(key, fresh);
  return fresh;
}

/**
 * Counts one attempt against the account (an address, a token) and against the client address.
 * @throws DomainError too_many, saying how long to wait
 */
export async function countAttempt(name: LimitName, keys: { account?: string; clientAddress: string }) {
  const tries = [limiter(name, "address").consume(keys.clientAddress)];
  if (keys.account) tries.push(limiter(name, "account").consume(keys.account.trim().toLowerCase()));
  for (const result of await Promise.allSettled(tries)) {
    if (result.status === "fulfilled") continue;
    if (!(result.reason instanceof RateLimiterRes)) throw result.reason;
    const minutes = Math.max(1, Math.ceil(result.reason.msBeforeNext / 60_000));
    throw new DomainError(
      "too_many",
      `Too many attempts. Wait ${minutes} ${minutes === 1 ? "minute" : "minutes"} and try again.`,
    );
  }
}

/** Forgets the account's attempts after a success. */
export async function forgetAttempts(name: LimitName, account: string) {
  await limiter(name, "account").delete(account.trim().toLowerCase());
}
