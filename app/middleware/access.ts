import { createContext, type MiddlewareFunction, type RouterContextProvider, redirect } from "react-router";
import { currentPerson, type Person } from "~/features/accounts/identity.server";
import { may } from "~/features/accounts/permissions";
import { type Access, accessOf } from "~/features/accounts/route-access";
import { type MemberScope, resolveMemberScope } from "~/features/accounts/scope.server";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { errorResponse } from "./error-response.server";
import { requestContext } from "./request-context";

export const personContext = createContext<Person | undefined>(undefined);
const scopeContext = createContext<MemberScope | undefined>(undefined);

/** The member's scope of this request. The access table guarantees it on every address of an organisation. */
export function memberOf(context: Readonly<RouterContextProvider>): MemberScope {
  const scope = context.get(scopeContext);
  if (!scope) throw new DomainError("not_signed_in", "Sign in to open this page.");
  return scope;
}

/** The signed-in person of this request. */
export function personOf(context: Readonly<RouterContextProvider>): Person {
  const person = context.get(personContext);
  if (!person) throw new DomainError("not_signed_in", "Sign in to open this page.");
  return person;
}

/**
 * The guard of every address, before any loader or action: layout loaders may be skipped by a client navigation,
 * middleware is not. What the access table does not name is refused. A foreign organisation answers like an absent one.
 */
export const guardAccess: MiddlewareFunction<Response> = async (args, next) => {
  const { request, params, context, pattern } = args;
  const { id, notePattern } = context.get(requestContext);
  notePattern(pattern);
  const access = accessOf(pattern, request.method);
  if (access === "public") return next();
  try {
    const person = await currentPerson(request);
    context.set(personContext, person);
    await admit(access, person, params.organisation, id, (scope) => context.set(scopeContext, scope));
  } catch (error) {
    if (error instanceof DomainError && error.code === "not_signed_in" && isPage(request, pattern)) {
      const { pathname, search } = new URL(request.url);
      throw redirect(`/sign-in?next=${encodeURIComponent(pathname.replace(/\.data$/, "") + search)}`);
    }
    throw errorResponse(error, pattern);
  }
  return next();
};

const isPage = (request: Request, pattern: string) => request.method === "GET" && !/^\/?api\//.test(pattern);

async function admit(
  access: Exclude<Access, "public"> | undefined,
  person: Person | undefined,
  slug: string | undefined,
  requestId: string,
  keep: (scope: MemberScope) => void,
) {
  if (!person) throw new DomainError("not_signed_in", "Sign in to open this page.");
  if (!access) throw notFound();
  if (access === "person") return;
  const scope = slug ? await resolveMemberScope(person.id, slug, requestId) : undefined;
  if (!scope) throw notFound();
  // A member whose clinical role waits for a lead's confirmation has no role yet, but may see the page that says so.
  const waiting = access === "member" && scope.unconfirmed.length > 0;
  if (!waiting && !may(scope.roles, access)) throw forbidden();
  keep(scope);
}
