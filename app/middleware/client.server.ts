import type { RouterContextProvider } from "react-router";
import { requestContext } from "./request-context";

/** What the sign-in use cases need of a request: its cookies and the client's address as the server saw it. */
export function clientOf(request: Request, context: Readonly<RouterContextProvider>) {
  return { request, clientAddress: context.get(requestContext).clientAddress };
}

/** A path of ours to go back to after signing in; anything else becomes the first page. */
export function safeNext(next: string | null | undefined) {
  return next?.startsWith("/") && !next.startsWith("//") && !next.includes("\\") ? next : "/";
}
