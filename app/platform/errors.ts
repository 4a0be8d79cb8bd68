/** Domain errors are codes; this is the one place that maps them to HTTP. */
const statusOf = {
  invalid: 400,
  not_signed_in: 401,
  forbidden: 403,
  not_found: 404,
  conflict: 409,
  gone: 410,
  too_large: 413,
  unsupported: 415,
  operation_mismatch: 422,
  locked: 423,
  too_many: 429,
  unavailable: 503,
} as const;

export type ErrorCode = keyof typeof statusOf;

/** A refusal the person can understand: a code, a plain sentence, and for forms the fields concerned. */
export class DomainError extends Error {
  readonly code: ErrorCode;
  readonly fields: Record<string, string[]>;
  readonly details: Record<string, unknown>;

  constructor(
    code: ErrorCode,
    message: string,
    options: { fields?: Record<string, string[]>; details?: Record<string, unknown> } = {},
  ) {
    super(message);
    this.name = "DomainError";
    this.code = code;
    this.fields = options.fields ?? {};
    this.details = options.details ?? {};
  }

  get status() {
    return statusOf[this.code];
  }
}

export const notFound = (what = "That page") =>
  new DomainError(
    "not_found",
    `${what} was not found. It may have been removed, or the address may be wrong.`,
  );

export const forbidden = () =>
  new DomainError("forbidden", "Your role does not include this. Ask your administrator if you need it.");
