import { randomUUID } from "node:crypto";
import { beforeAll, describe, expect, it } from "vitest";
import { makeAthlete, makeClub, makeSession } from "../../harness";
import { cookieOf, type Http, openServer } from "../../harness/http";
import { type Club, type Parameters, recordsOf } from "../access/records";

/** The JSON API as a program meets it: what it answers, and problem details (RFC 9457) for what it refuses. */

let http: Http;
let club: Club;
let elsewhere: Club;
let own: Parameters;
let theirs: Parameters;
const cookies = new Map<string, string>();

beforeAll(async () => {
  http = await openServer();
  [club, elsewhere] = [await makeClub(), await makeClub()];
  [own, theirs] = [await recordsOf(club), await recordsOf(elsewhere)];
  for (const [role, person] of Object.entries(club.people)) cookies.set(role, await cookieOf(person));
});

type Who = "admin" | "lead" | "trainer" | "coach" | "nobody";
const at = (path: string) => `/api/${club.organisation.slug}${path}`;
const get = (who: Who, path: string) => http.get(at(path)).set("Cookie", cookies.get(who) ?? "");

function send(who: Who, body: string | object, headers: Record<string, string> = {}) {
  const origin = process.env.APP_ORIGIN ?? "";
  return http
    .post(at("/sessions/sync"))
    .set({ Host: new URL(origin).host, Origin: origin, "Content-Type": "application/json", ...headers })
    .set("Cookie", cookies.get(who) ?? "")
    .send(typeof body === "string" ? body : JSON.stringify(body));
}

/** Whether an answer is problem details of this status and code, with words for a person. */
function expectProblem(answer: Awaited<ReturnType<typeof get>>, status: number, code: string) {
  expect([answer.status, answer.headers["content-type"]]).toEqual([
    status,
    expect.stringContaining("application/problem+json"),
  ]);
  expect(answer.body).toMatchObject({ status, type: `urn:haleside:problem:${code}` });
  expect(answer.body.title).toMatch(/^[A-Z].*\.$/);
  expect(answer.text).not.toMatch(/\bat .*\.(js|ts):\d|select |insert |postgres/i);
}

describe("every address", () => {
  it.each(["/health", "/athletes", `/imports/${randomUUID()}/progress`, "/incidence"])(
    "asks who is not signed in to sign in: %s",
    async (path) => expectProblem(await get("nobody", path), 401, "not_signed_in"),
  );

  it("refuses a role that lacks the permission", async () => {
    expectProblem(await get("coach", "/incidence"), 403, "forbidden");
    expectProblem(await get("coach", `/imports/${own.import}/progress`), 403, "forbidden");
  });

  it("answers a foreign organisation like an absent one", async () => {
    for (const slug of [elsewhere.organisation.slug, "no-such-club"])
      expectProblem(
        await http.get(`/api/${slug}/athletes`).set("Cookie", cookies.get("lead") ?? ""),
        404,
        "not_found",
      );
  });

  it("keeps its answers out of caches", async () => {
    for (const path of ["/health", "/athletes?q=a", "/incidence"])
      expect((await get("lead", path)).headers["cache-control"]).toContain("no-store");
  });
});

it("says whether the parts work", async () => {
  const answer = await get("coach", "/health");
  expect([answer.status, answer.body.ok]).toEqual([answer.body.ok ? 200 : 503, expect.any(Boolean)]);
  expect(answer.headers["content-type"]).toContain("application/json");
});

describe("the athlete search", () => {
  it("answers options of the own teams, without what a coach may not know", async () => {
    await makeAthlete(club.staff, {
      teamId: club.team.id,
      givenName: "Perdita",
      familyName: "Quickly",
      nameKey: "perdita quickly",
      number: "88123",
    });
    const search = async (who: Who, text: string) =>
      (await get(who, `/athletes?q=${encodeURIComponent(text)}`)).body;
    expect(await search("trainer", "88123")).toMatchObject([
      { label: "Perdita Quickly", detail: expect.stringContaining("88123") },
    ]);
    expect(await search("coach", "88123")).toEqual([]);
    expect(await search("coach", "PÉRD")).toEqual([
      { id: expect.any(String), label: "Perdita Quickly", detail: club.team.name },
    ]);
    expect(await search("coach", club.otherAthlete.familyName)).toEqual([]);
  });

  it("refuses a text that is too long, naming the field", async () => {
    const answer = await get("trainer", `/athletes?q=${"x".repeat(101)}`);
    expectProblem(answer, 400, "invalid");
    expect(answer.body.errors).toEqual([{ field: "q", message: "Search with at most 100 characters." }]);
  });
});

describe("the progress of an import", () => {
  it("is told of the own one; another's and none answer alike", async () => {
    const answer = await get("trainer", `/imports/${own.import}/progress`);
    expect([answer.status, typeof answer.body.state]).toEqual([200, "string"]);
    const others = [];
    for (const id of [theirs.import, randomUUID(), "nonsense"]) {
      const other = await get("lead", `/imports/${id}/progress`);
      expectProblem(other, 404, "not_found");
      others.push(other.body.status);
    }
    expect(others).toEqual([404, 404, 404]);
  });
});

describe("incidence", () => {
  it("comes with its interval and its n", async () => {
    const answer = await get("lead", "/incidence?by=team&per=hours");
    expect(answer.status).toBe(200);
    expect(JSON.stringify(answer.body)).toMatch(/"lower":/);
  });

  it.each([
    ["/incidence?grouping=team", "grouping"],
    ["/incidence?by=coach", "by"],
    ["/incidence?by=team&by=team", "by"],
    ["/incidence?season=last", "season"],
  ])("refuses what it does not know: %s", async (path, field) => {
    const answer = await get("lead", path);
    expectProblem(answer, 400, "invalid");
    expect(Object.keys(answer.body.fields)).toEqual([field]);
  });

  it("is absent for another's team or season", async () => {
    for (const search of [`team=${elsewhere.team.id}`, `season=${elsewhere.season.id}`])
      expectProblem(await get("lead", `/incidence?${search}`), 404, "not_found");
    expectProblem(await get("trainer", `/incidence?team=${club.otherTeam.id}`), 404, "not_found");
  });
});

describe("the operations of phones", () => {
  const cancel = (sessionId: string, id = randomUUID()) => ({
    kind: "cancel",
    id,
    sessionId,
    fields: { cancelReason: { base: null, value: "Frozen pitch" } },
  });

  it("refuses what is not JSON, or not as described", async () => {
    expectProblem(await send("coach", "{not json"), 400, "invalid");
    expectProblem(await send("coach", ""), 400, "invalid");
    expectProblem(await send("coach", { operations: [] }), 400, "invalid");
    const unknown = await send("coach", { operations: [{ ...cancel(randomUUID()), kind: "erase" }] });
    expectProblem(unknown, 400, "invalid");
    expect(unknown.body.errors[0].field).toBe("operations.0.kind");
    const many = Array.from({ length: 201 }, () => cancel(randomUUID()));
    expectProblem(await send("coach", { operations: many }), 400, "invalid");
    expectProblem(await send("coach", `{"operations":"${"x".repeat(1_000_001)}"}`), 413, "too_large");
  });

  it("refuses another site's page, and who is not signed in", async () => {
    const body = { operations: [cancel(own.session ?? "")] };
    expect((await send("coach", body, { Origin: "https://elsewhere.example.org" })).status).toBe(403);
    expectProblem(await send("nobody", body), 401, "not_signed_in");
  });

  it("answers each operation, once, and foreign sessions like absent ones", async () => {
    const session = await makeSession(club.staff, {
      teamId: club.team.id,
      state: "planned",
      actualMinutes: null,
    });
    const operations = [cancel(session.id), cancel(theirs.session ?? ""), cancel(randomUUID())];
    const first = await send("coach", { operations });
    expect(first.status).toBe(200);
    const [done, foreign, absent] = first.body.answers;
    expect(done).toMatchObject({ id: operations[0]?.id, status: "applied" });
    expect(foreign).toMatchObject({ status: "refused", code: "not_found" });
    expect({ ...foreign, id: "" }).toEqual({ ...absent, id: "" });
    const again = await send("coach", { operations: operations.slice(0, 1) });
    expect(again.body.answers[0]).toMatchObject({ status: "replayed" });
    const changed = { ...cancel(session.id, operations[0]?.id), kind: "session" };
    const mismatch = await send("coach", { operations: [changed] });
    expect(mismatch.body.answers[0]).toMatchObject({ status: "refused", code: "operation_mismatch" });
  });

  it("is for POST alone", async () => {
    expectProblem(await get("coach", "/sessions/sync"), 404, "not_found");
  });
});
