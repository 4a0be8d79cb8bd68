import { sqlState } from "~db/client.server";

/** What a log line or a job may say of an error. */
export type Fault = { sqlState: string } | { error: string };

/**
 * An error without its message: messages of the database layer hold the query's values, names and addresses among
 * them. A database error is told by its code, any other by its kind and the place in the source where it arose.
 */
export function describeFault(error: unknown): Fault {
  const state = sqlState(error);
  if (state) return { sqlState: state };
  if (!(error instanceof Error)) return { error: "unknown" };
  return { error: `${error.name}: ${placeOf(error)}` };
}

/** The first frame of the stack. A message of several lines stands before it and is left out whole. */
function placeOf({ stack = "", message }: Error) {
  const at = stack.indexOf(message);
  const frames = at < 0 ? "" : stack.slice(at + message.length);
  return frames.split("\n")[1]?.trim() ?? "";
}
