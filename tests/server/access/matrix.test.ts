import { randomUUID } from "node:crypto";
import { beforeAll, describe, expect, it } from "vitest";
import { may, permissions } from "~/features/accounts/permissions";
import { routeAccess } from "~/features/accounts/route-access";
import { type Role, roles } from "~db/schema/codes";
import { maintenance, makeAccount, makeClub, makePerson } from "../../harness";
import { cookieOf, type Http, openServer, post } from "../../harness/http";
import { addresses } from "./addresses";
import { type Club, fill, type Parameters, recordNames, recordsOf } from "./records";

/** Every address of app/routes.ts, both methods, everybody: generated, so that a new route cannot be forgotten. */

let http: Http;
let club: Club;
let own: Parameters;
let theirs: Parameters;
/** Cookies of who belongs to the club, by role, and of those who do not. */
const members = new Map<Role, string>();
const strangers = new Map<string, string>();

beforeAll(async () => {
  http = await openServer();
  club = await makeClub();
  own = await recordsOf(club);
  const elsewhere = await makeClub();
  theirs = await recordsOf(elsewhere);
  for (const role of roles) members.set(role, await cookieOf(club.people[role]));
  const everything = await makePerson(elsewhere.organisation, { roles: [...roles] });
  const ended = await makePerson(club.organisation, { roles: [...roles] });
  await maintenance()`update memberships set ended_at = now() where person_id = ${ended.id}`;
  strangers.set("every role of another organisation", await cookieOf(everything));
  strangers.set("no organisation", await cookieOf(await makeAccount()));
  strangers.set("an ended membership", await cookieOf(ended));
});

type Method = "GET" | "POST";

async function send(method: Method, path: string, cookie = "") {
  const request = method === "GET" ? http.get(path).set("Cookie", cookie) : post(http, path, {}, cookie);
  const { status, headers, text } = await request.redirects(0);
  return { status, location: String(headers.location ?? ""), text };
}

type Answer = Awaited<ReturnType<typeof send>>;

const refusedToSignIn = ({ status, location }: Answer) =>
  status === 401 || (status === 302 && location.startsWith("/sign-in?next="));
/**
 * Met the route itself: not the guard, no missing page, no fault. An empty form may name nothing that the route does,
 * which it says in words of its own.
 */
function letIn(method: Method, { status, location, text }: Answer) {
  if (location.startsWith("/sign-in?next=") || status >= 500) return false;
  if (method === "POST" && status === 404) return !text.includes("That page was not found");
  return ![401, 403, 404, 405].includes(status);
}

const isApi = (pattern: string) => pattern.startsWith("/api/");
describe("the access table", () => {
  it("names the addresses of app/routes.ts and no others", () => {
    expect(Object.keys(routeAccess).sort()).toEqual(addresses.map(({ pattern }) => pattern).sort());
  });

  it("names a method exactly where the route answers it", () => {
    const found = addresses.map(({ pattern, loads, acts }) => ({ pattern, get: loads, post: acts }));
    const named = addresses.map(({ pattern }) => ({
      pattern,
      get: routeAccess[pattern]?.get !== undefined,
      post: routeAccess[pattern]?.post !== undefined,
    }));
    expect(named).toEqual(found);
  });

  it("has a permission that every address of an organisation asks for", () => {
    for (const [pattern, entry] of Object.entries(routeAccess))
      if (pattern.includes(":organisation") && !pattern.includes(":organisationId"))
        for (const access of Object.values(entry))
          expect([pattern, Object.keys(permissions)]).toEqual([pattern, expect.arrayContaining([access])]);
  });
});

describe.each(
  addresses.flatMap(({ pattern }) => [
    { pattern, method: "GET" as const, access: routeAccess[pattern]?.get },
    { pattern, method: "POST" as const, access: routeAccess[pattern]?.post },
  ]),
)("$method $pattern", ({ pattern, method, access }) => {
  if (access === "public") {
    it("answers everybody", async () => {
      for (const cookie of ["", ...members.values(), ...strangers.values()]) {
        const answer = await send(method, fill(pattern, own), cookie);
        // The webhook asks for a signature, a family's link for its own token, an invitation for its own address.
        if (pattern.startsWith("/webhooks/")) expect(answer.status).toBe(401);
        else if (pattern.startsWith("/families/")) expect([200, 400, 404, 410, 429]).toContain(answer.status);
        else if (pattern.startsWith("/invitations/") && cookie)
          expect([200, 400, 403]).toContain(answer.status);
        else expect(answer).toSatisfy((met: Answer) => letIn(method, met));
      }
    });
    return;
  }

  it("asks who is not signed in to sign in", async () => {
    const answer = await send(method, fill(pattern, own));
    expect(answer).toSatisfy(refusedToSignIn);
    const page = method === "GET" && !isApi(pattern);
    expect(answer.status).toBe(page ? 302 : 401);
    if (page) expect(answer.location).toBe(`/sign-in?next=${encodeURIComponent(fill(pattern, own))}`);
  });

  if (access === undefined) {
    it("is there for nobody", async () => {
      for (const cookie of [...members.values(), ...strangers.values()])
        expect((await send(method, fill(pattern, own), cookie)).status).toBe(404);
    });
    return;
  }

  if (access === "person") {
    it("answers everybody who is signed in", async () => {
      const people = [club.people.admin, club.people.coach];
      for (const person of people) {
        // A sign-in of its own, since this may be the address that ends it.
        const answer = await send(method, fill(pattern, own), await cookieOf(person));
        expect(answer).toSatisfy((met: Answer) => letIn(method, met));
      }
    });
    return;
  }

  it("answers the roles that have the permission and refuses the others", async () => {
    for (const [role, cookie] of members) {
      const answer = await send(method, fill(pattern, own), cookie);
      if (may([role], access))
        expect([role, answer.status]).toEqual([role, expect.toSatisfy(() => letIn(method, answer))]);
      else expect([role, answer.status]).toEqual([role, 403]);
    }
  });

  it("answers a foreign organisation like one that does not exist", async () => {
    for (const [who, cookie] of strangers) {
      const foreign = await send(method, fill(pattern, own), cookie);
      const absent = await send(method, fill(pattern, { ...own, organisation: "no-such-club" }), cookie);
      expect([who, foreign.status]).toEqual([who, 404]);
      expect(comparable(foreign.text, own)).toBe(
        comparable(absent.text, { ...own, organisation: "no-such-club" }),
      );
    }
    for (const [, cookie] of members)
      expect((await send(method, fill(pattern, theirs), cookie)).status).toBe(404);
  });

  const named = recordNames(pattern);
  if (named.length === 0) return;
  it("answers another organisation's record like one that does not exist", async () => {
    for (const [role, cookie] of members) {
      if (!may([role], access)) continue;
      for (const name of named) {
        const foreign = { ...own, [name]: theirs[name] ?? "" };
        const absent = { ...own, [name]: randomUUID() };
        const answers = [
          await send(method, fill(pattern, foreign), cookie),
          await send(method, fill(pattern, absent), cookie),
        ];
        const statuses = answers.map(({ status }) => status);
        // A form is read before its record is looked for, and an empty one may be refused for what it lacks.
        const refused = method === "POST" && statuses[0] === 400 ? 400 : 404;
        expect([role, name, ...statuses]).toEqual([role, name, refused, refused]);
        expect(comparable(answers[0]?.text ?? "", foreign)).toBe(comparable(answers[1]?.text ?? "", absent));
      }
    }
  });
});

/** An answer without what differs from request to request: the nonce, and the ids of the path itself. */
function comparable(text: string, parameters: Parameters) {
  let plain = text.replace(/nonce="[^"]*"/g, 'nonce=""');
  for (const [name, value] of Object.entries(parameters)) plain = plain.replaceAll(value, `:${name}`);
  return plain;
}
