import type { RouterContextProvider } from "react-router";
import { requestContext } from "./request-context";

/** What the sign-in use cases need of a request: its cookies and the client's address as the server saw it. */
export function clientOf(request: Request, context: Readonly<RouterContextProvider>) {
  return { request, clientAddress: context.get(requestContext).clientAddress };
}

const ours = "http://ours.example.org";

/**
 * A path of ours to go back to after signing in; anything else becomes the first page. Read as a browser reads it,
 * which drops tabs and line breaks: what then begins with two slashes names another site.
 */
export function safeNext(next: string | null | undefined) {
  if (!next?.startsWith("/") || !URL.canParse(next, ours)) return "/";
  const { origin, pathname, search } = new URL(next, ours);
  return origin === ours && !pathname.startsWith("//") ? pathname + search : "/";
}
