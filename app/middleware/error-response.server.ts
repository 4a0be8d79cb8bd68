import { data } from "react-router";
import { ZodError } from "zod";
import { DomainError, notFound } from "~/platform/errors";
import { describeFault } from "~/platform/fault.server";
import { log } from "~/platform/log.server";
import { sqlState } from "~db/client.server";

/** Database refusals that a person can do something about. Others stay 500 and never show their text. */
const databaseErrors: Record<string, DomainError> = {
  "23P01": new DomainError("conflict", "These days overlap with ones that are already there."),
  "23505": new DomainError(
    "conflict",
    "That already exists. Open the existing one, or change what makes them equal.",
  ),
  // An id that is none, from a form or an address: it answers like that of an absent record.
  "22P02": notFound("What this is about"),
  "40001": new DomainError("conflict", "Somebody else changed this at the same moment. Try again."),
  "40P01": new DomainError("conflict", "Somebody else changed this at the same moment. Try again."),
  "55P03": new DomainError(
    "unavailable",
    "This record is being changed by somebody else. Try again shortly.",
  ),
  "57014": new DomainError(
    "unavailable",
    "That took too long and was stopped. Nothing was changed. Try again.",
  ),
  "53300": new DomainError(
    "unavailable",
    "Too many people are using Haleside at this moment. Try again shortly.",
  ),
};

/** The domain's reading of an error; undefined for a fault of ours. */
export function asDomainError(error: unknown): DomainError | undefined {
  if (error instanceof DomainError) return error;
  const state = sqlState(error);
  return state ? databaseErrors[state] : undefined;
}

/** Problem details of RFC 9457, for the API. */
export function problem(error: unknown): Response {
  if (error instanceof Response) return error;
  const fault = asDomainError(error);
  const status = fault?.status ?? (error instanceof ZodError ? 400 : 500);
  if (status === 500) logFault(error);
  const body = {
    type: `urn:haleside:problem:${fault?.code ?? (status === 400 ? "invalid" : "fault")}`,
    title:
      fault?.message ?? (status === 400 ? "The request is not as described." : "Something went wrong here."),
    status,
    ...(fault && Object.keys(fault.fields).length > 0 ? { fields: fault.fields } : {}),
    ...(fault && Object.keys(fault.details).length > 0 ? { details: fault.details } : {}),
    ...(error instanceof ZodError
      ? { errors: error.issues.map(({ path, message }) => ({ field: path.join("."), message })) }
      : {}),
  };
  return Response.json(body, {
    status,
    headers: { "Content-Type": "application/problem+json", "Cache-Control": "no-store" },
  });
}

/** What to throw from a loader or the middleware: a status with code and plain words, or the fault itself. */
export function errorResponse(error: unknown, pattern = "") {
  if (error instanceof Response) return error;
  if (/^\/?api\//.test(pattern)) return problem(error);
  const fault = asDomainError(error);
  if (!fault) return error;
  return data({ code: fault.code, message: fault.message }, { status: fault.status });
}

export function logFault(error: unknown) {
  log.error(describeFault(error), "fault");
}
