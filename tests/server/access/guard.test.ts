import { beforeAll, describe, expect, it } from "vitest";
import { endMember, removeRole } from "~/features/accounts/people.server";
import { routeAccess } from "~/features/accounts/route-access";
import { makeClub, makeInjury, makePerson, memberScope } from "../../harness";
import { cookieOf, type Http, openServer, post } from "../../harness/http";
import { type Club, fill, type Parameters, recordsOf } from "./records";

let http: Http;
let club: Club;
let own: Parameters;
let at: (path: string) => string;

beforeAll(async () => {
  http = await openServer();
  club = await makeClub();
  own = await recordsOf(club);
  at = (path) => `/${club.organisation.slug}/${path}`;
});

const get = (path: string, cookie = "") => http.get(path).set("Cookie", cookie).redirects(0);

describe("a request that does not come from our own pages", () => {
  const origin = process.env.APP_ORIGIN ?? "";
  const forged: [string, Record<string, string>][] = [
    ["says nothing of where it comes from", {}],
    ["comes from another site", { "Sec-Fetch-Site": "cross-site", Origin: "https://elsewhere.example.org" }],
    ["comes from another site without an origin", { "Sec-Fetch-Site": "cross-site" }],
    [
      "comes from a sibling address",
      { "Sec-Fetch-Site": "same-site", Origin: "http://other.localhost:3000" },
    ],
    ["was typed or bookmarked", { "Sec-Fetch-Site": "none" }],
    ["has another origin", { Origin: "https://elsewhere.example.org" }],
    ["has an origin of another port", { Origin: "http://localhost:3001" }],
    ["has no origin to speak of", { Origin: "null" }],
    ["contradicts itself", { "Sec-Fetch-Site": "same-origin", Origin: "https://elsewhere.example.org" }],
  ];
  const posts = Object.entries(routeAccess).filter(([, entry]) => entry.post);

  it.each(forged)("is refused everywhere when it %s", async (_what, headers) => {
    const cookie = await cookieOf(club.people.lead);
    for (const [pattern] of posts) {
      const answer = await http
        .post(fill(pattern, own))
        .set("Host", new URL(origin).host)
        .set("Cookie", cookie)
        .set(headers)
        .type("form")
        .send("");
      // The mail service's news proves itself by a signature, which this lacks.
      expect([pattern, answer.status]).toEqual([pattern, pattern === "/webhooks/mail" ? 401 : 403]);
    }
    // The session was not ended by any of them.
    expect((await get("/account", cookie)).status).toBe(200);
  });

  it.each(["put", "patch", "delete"] as const)("is refused with the method %s too", async (method) => {
    const cookie = await cookieOf(club.people.lead);
    const answer = await http[method](at("settings")).set("Cookie", cookie);
    expect(answer.status).toBe(403);
  });

  it("is let in with the origin alone, or with the fetch metadata alone", async () => {
    const cookie = await cookieOf(club.people.admin);
    for (const headers of [{ Origin: origin }, { "Sec-Fetch-Site": "same-origin", Origin: origin }]) {
      const answer = await http
        .post(at("settings"))
        .set("Host", new URL(origin).host)
        .set({ Cookie: cookie, ...headers })
        .type("form")
        .send("");
      expect(answer.status).toBe(400);
    }
  });
});

describe("what the framework fetches for a navigation", () => {
  it("is guarded like the page, also when it names the page's route alone", async () => {
    const coach = await cookieOf(club.people.coach);
    const route = encodeURIComponent("routes/injuries/injury");
    for (const path of [
      `${at(`injuries/${own.injury}`)}.data`,
      `${at(`injuries/${own.injury}`)}.data?_routes=${route}`,
    ]) {
      const refused = await get(path, coach);
      expect(refused.status).toBe(403);
      expect(refused.text).not.toContain("knee");
      const signedOut = await get(path);
      expect(signedOut.status).toBe(202);
      expect(signedOut.text).toContain("/sign-in");
      expect(signedOut.text).not.toContain("knee");
    }
  });
});

describe("what is kept of an answer", () => {
  it("is nothing, of a page, of what a navigation fetches and of the API, refused or not", async () => {
    const cookie = await cookieOf(club.people.trainer);
    const coach = await cookieOf(club.people.coach);
    const injury = at(`injuries/${own.injury}`);
    const asked: [string, string][] = [
      [injury, cookie],
      [`${injury}.data`, cookie],
      [`${injury}.data`, coach],
      [`/api/${club.organisation.slug}/athletes?q=a`, cookie],
      [`/api/${club.organisation.slug}/incidence`, coach],
      [at("injuries/export.csv"), cookie],
    ];
    for (const [path, who] of asked)
      expect([path, (await get(path, who)).headers["cache-control"]]).toEqual([path, "no-store"]);
  });
});

describe("an id in a form that is none", () => {
  it.each([
    ["roster/:athlete", { intent: "end-alert", alert: "nonsense" }],
    ["roster/:athlete/guardians", { intent: "end", guardian: "nonsense" }],
    ["settings/people", { intent: "revoke", invitation: "nonsense" }],
    ["settings/people", { intent: "end", person: "nonsense" }],
  ])("answers at %s like that of an absent record", async (pattern, form) => {
    const cookie = await cookieOf(club.people.admin);
    expect((await post(http, fill(at(pattern), own), form, cookie)).status).toBe(404);
  });
});

describe("a person's rights", () => {
  it("are gone with the next request after a role is removed", async () => {
    const person = await makePerson(club.organisation, { roles: ["coach", "trainer"] });
    const cookie = await cookieOf(person);
    const list = `/api/${club.organisation.slug}/incidence`;
    expect((await get(list, cookie)).status).not.toBe(403);
    await removeRole(club.scopes.admin, person.id, "trainer");
    expect((await get(list, cookie)).status).toBe(403);
    expect((await get(at("settings"), cookie)).status).toBe(403);
    expect((await get(at("sessions"), cookie)).status).toBe(200);
  });

  it("are gone with the next request after the membership has ended", async () => {
    const person = await makePerson(club.organisation, { roles: ["admin"] });
    const cookie = await cookieOf(person);
    expect((await get(at("settings"), cookie)).status).toBe(200);
    await endMember(club.scopes.admin, person.id);
    expect((await get(at("settings"), cookie)).status).toBe(404);
    expect((await get("/account", cookie)).status).toBe(200);
  });

  it("do not include a clinical role that no lead has confirmed", async () => {
    const person = await makePerson(club.organisation, { roles: ["trainer"], confirmed: false });
    const cookie = await cookieOf(person);
    expect((await get(at("today"), cookie)).status).toBe(200);
    for (const path of ["injuries", "roster", "sessions", "rates", "notices", "settings"])
      expect([path, (await get(at(path), cookie)).status]).toEqual([path, 403]);
    expect(await memberScope(person, club.organisation)).toMatchObject({
      roles: [],
      unconfirmed: ["trainer"],
    });
  });

  it("reach no further than their own teams", async () => {
    const { staff, otherTeam, otherAthlete, athlete } = club;
    const beyond = await recordsOf(club, otherTeam, otherAthlete);
    const trainer = await cookieOf(club.people.trainer);
    const coach = await cookieOf(club.people.coach);
    await makeInjury(staff, { athleteId: athlete.id });
    const found: [string, number][] = [];
    const paths = [
      [`roster/${beyond.athlete}`, [trainer, coach]],
      [`roster/${beyond.athlete}/edit`, [trainer]],
      [`roster/${beyond.athlete}/guardians`, [trainer]],
      [`roster/${beyond.athlete}/availability`, [trainer]],
      [`sessions/${beyond.session}`, [trainer, coach]],
      [`sessions/${beyond.session}/attendance`, [trainer, coach]],
      [`sessions/${beyond.session}/warm-up`, [trainer, coach]],
      [`injuries/${beyond.injury}`, [trainer]],
      [`injuries/${beyond.injury}/edit`, [trainer]],
      [`injuries/${beyond.injury}/notice`, [trainer]],
      [`coach-reports/${beyond.report}`, [trainer]],
      [`notices/${beyond.notice}`, [trainer]],
    ] as const;
    for (const [path, cookies] of paths)
      for (const cookie of cookies) {
        const answer = await get(at(path), cookie);
        if (answer.status !== 404) found.push([path, answer.status]);
        expect(answer.text).not.toContain(otherAthlete.familyName);
      }
    expect(found).toEqual([]);
  });
});

it("writes nothing for a person of another organisation whose form names ours", async () => {
  const elsewhere = await makeClub();
  const cookie = await cookieOf(elsewhere.people.admin);
  const answer = await post(http, at("settings/teams"), { intent: "add", name: "Taken over" }, cookie);
  expect(answer.status).toBe(404);
});
