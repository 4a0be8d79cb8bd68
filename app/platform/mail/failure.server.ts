/**
 * What an unsuccessful send means for whoever called:
 * - `temporary`: the outcome is unknown or the service is down. Try again with the same idempotency key.
 * - `rate-limited`: the mail was not taken. Try again no sooner than `retryAfterSeconds`.
 * - `permanent`: this mail will never be taken as it stands. Trying again is useless.
 */
export type MailFailureKind = "temporary" | "permanent" | "rate-limited";

/**
 * The only error that a transport throws. It carries codes alone: what the mail service answers may repeat
 * an address, and addresses must not reach a log.
 */
export class MailFailure extends Error {
  readonly kind: MailFailureKind;
  /** The mail service's own code, or `timeout`, `unreachable`, `unreadable-answer`. */
  readonly code: string;
  /** HTTP status, or null when no answer came. */
  readonly status: number | null;
  /** Seconds to wait; always set for `rate-limited`, otherwise null. */
  readonly retryAfterSeconds: number | null;
  /** True when an operator has to mend a setting (key, sending domain, address of the service). */
  readonly needsOperator: boolean;

  constructor(details: {
    kind: MailFailureKind;
    code: string;
    status: number | null;
    retryAfterSeconds?: number | null;
    needsOperator?: boolean;
  }) {
    super(`The mail was not sent (${details.kind}): ${details.code}, status ${details.status ?? "none"}`);
    this.name = "MailFailure";
    this.kind = details.kind;
    this.code = details.code;
    this.status = details.status;
    this.retryAfterSeconds = details.retryAfterSeconds ?? null;
    this.needsOperator = details.needsOperator ?? false;
  }
}

/** Used when the service limits us without saying for how long: its limit is counted per second. */
const DEFAULT_RATE_PAUSE_SECONDS = 2;
/** Used when a daily or monthly quota is spent without a stated wait. */
const DEFAULT_QUOTA_PAUSE_SECONDS = 3600;

/**
 * Reads a wait in seconds from `Retry-After` (seconds or an HTTP date, RFC 9110 section 10.2.3), else from
 * `ratelimit-reset` (seconds). Null when neither can be read.
 */
export function readRetryAfterSeconds(
  headers: Readonly<Record<string, string>> | null,
  now: Date,
): number | null {
  for (const name of ["retry-after", "ratelimit-reset"]) {
    const value = headers?.[name]?.trim();
    if (!value) continue;
    if (/^\d+(\.\d+)?$/.test(value)) return Math.ceil(Number(value));
    const at = Date.parse(value);
    if (!Number.isNaN(at)) return Math.max(0, Math.ceil((at - now.getTime()) / 1000));
  }
  return null;
}

/**
 * Maps an answer of the mail service to a failure. Codes and statuses are those of the service's published
 * error reference.
 *
 * A refused key or an unverified sending domain is `temporary` with `needsOperator`: the mail itself is good
 * and must go out once the setting is mended.
 */
export function toMailFailure(
  answer: { code: string; status: number | null; headers: Readonly<Record<string, string>> | null },
  now: Date,
) {
  const { code, status } = answer;
  if (status === 429) {
    const fallback = code.endsWith("quota_exceeded")
      ? DEFAULT_QUOTA_PAUSE_SECONDS
      : DEFAULT_RATE_PAUSE_SECONDS;
    const retryAfterSeconds = readRetryAfterSeconds(answer.headers, now) ?? fallback;
    return new MailFailure({ kind: "rate-limited", code, status, retryAfterSeconds });
  }
  if (code === "concurrent_idempotent_requests") return new MailFailure({ kind: "temporary", code, status });
  if (status === 401 || status === 403 || status === 404 || status === 405) {
    return new MailFailure({ kind: "temporary", code, status, needsOperator: true });
  }
  // 408 and 425 ask for another try; every other refusal by the service is about the mail itself.
  if (status !== null && status >= 400 && status < 500 && status !== 408 && status !== 425) {
    return new MailFailure({ kind: "permanent", code, status });
  }
  return new MailFailure({ kind: "temporary", code, status });
}
