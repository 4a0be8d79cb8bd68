import { beforeAll, beforeEach, describe, expect, it } from "vitest";
import {
  authDatabase,
  join,
  makeAccount,
  makeClub,
  makePerson,
  openMailbox,
  type TestPerson,
} from "../../harness";
import { cookieOf, cookiesOf, type Http, openServer, post } from "../../harness/http";

let http: Http;
let person: TestPerson;

beforeAll(async () => {
  await openMailbox();
  http = await openServer();
});

beforeEach(async () => {
  await authDatabase()`delete from auth.attempt`;
  person = await makeAccount();
});

const signIn = (email: string, password: string) => post(http, "/sign-in", { email, password }).redirects(0);
const isSignedIn = async (cookie: string) =>
  (await http.get("/account").set("Cookie", cookie).redirects(0)).status === 200;

/** A page without what differs from request to request, and without what was typed. */
const comparable = (text: string, email: string) =>
  text
    .replace(/nonce="[^"]*"/g, "")
    .replaceAll(email, "")
    .replaceAll(encodeURIComponent(email), "");

/** The link of the newest mail to an address, once it has been sent. */
async function newestLink(email: string, path: string) {
  const { inbox } = await openMailbox();
  const mail = inbox.list(email).at(0);
  const link = new RegExp(`https?://[^\\s"<]*${path}[^\\s"<]*`).exec(mail?.text ?? "")?.[0];
  if (!link) throw new Error(`No mail with a link to ${path} was sent.`);
  return new URL(link);
}

describe("signing in", () => {
  it("opens a session whose cookie no script reads and no other site sends", async () => {
    const answer = await signIn(person.email, person.password).expect(302);
    expect(answer.headers.location).toBe("/");
    const [cookie = ""] = answer.headers["set-cookie"] ?? [];
    expect(cookie).toMatch(/HttpOnly/i);
    expect(cookie).toMatch(/SameSite=Lax/i);
    expect(await isSignedIn(cookiesOf([cookie]))).toBe(true);
  });

  it("takes the address in capitals and with spaces, and goes back only to a page of ours", async () => {
    await signIn(` ${person.email.toUpperCase()} `, person.password).expect(302);
    const to = async (next: string) =>
      (await post(http, "/sign-in", { email: person.email, password: person.password, next }).redirects(0))
        .headers.location;
    expect(await to("/club/today")).toBe("/club/today");
    for (const next of [
      "https://elsewhere.example.org/",
      "//elsewhere.example.org",
      "/\\elsewhere.example.org",
    ])
      expect(await to(next)).toBe("/");
  });

  it("answers an unknown address, a wrong password and an unconfirmed address in the same words", async () => {
    const waiting = await makeAccount();
    await authDatabase()`update auth.user set email_verified = false where id = ${waiting.id}`;
    const tries = [
      ["nobody@example.org", person.password],
      [person.email, "another wrong password"],
      [waiting.email, waiting.password],
    ] as const;
    const answers = [];
    for (const [email, password] of tries) {
      const answer = await signIn(email, password);
      expect(answer.headers["set-cookie"]).toBeUndefined();
      answers.push([answer.status, comparable(answer.text, email)]);
    }
    expect(answers[0]?.[0]).toBe(400);
    expect(answers[1]).toEqual(answers[0]);
    expect(answers[2]).toEqual(answers[0]);
  });

  it("gives back the address that was typed and never the password", async () => {
    const answer = await signIn(person.email, "a password with a typing error");
    expect(answer.text).toContain(person.email);
    expect(answer.text).not.toContain("a password with a typing error");
  });
});

describe("attempts", () => {
  const wrong = (headers: Record<string, string> = {}) =>
    post(http, "/sign-in", { email: person.email, password: "not the right one" }).set(headers).redirects(0);

  it("are limited for an account, after which even the right password waits", async () => {
    for (let count = 0; count < 10; count++) await wrong().expect(400);
    await wrong().expect(429);
    const answer = await signIn(person.email, person.password);
    expect(answer.status).toBe(429);
    expect(answer.text).toMatch(/Wait \d+ minutes? and try again/);
  });

  it("are counted for the connection whatever a forwarding header says", async () => {
    for (let count = 0; count < 10; count++)
      await wrong({
        "X-Forwarded-For": `203.0.113.${count}`,
        "X-Client-Address": `203.0.113.${count}`,
      }).expect(400);
    await wrong({ "X-Forwarded-For": "203.0.113.99" }).expect(429);
    const keys = (await authDatabase()<{ key: string }[]>`select key from auth.attempt`).map(
      ({ key }) => key,
    );
    expect(keys.filter((key) => key.includes("203.0.113"))).toEqual([]);
  });

  it("are limited for a client address over many accounts, without locking those accounts elsewhere", async () => {
    for (let count = 0; count < 50; count++) await signIn(`nobody-${count}@example.org`, "x").expect(400);
    await signIn(person.email, person.password).expect(429);
    // From another address the account still signs in: the use case is given what the server saw.
    await expect(cookieOf(person)).resolves.toContain("session_token");
  });

  it("begin anew after a success", async () => {
    for (let round = 0; round < 2; round++) {
      for (let count = 0; count < 9; count++) await wrong().expect(400);
      await signIn(person.email, person.password).expect(302);
    }
  });
});

describe("a forgotten password", () => {
  const ask = (email: string) => post(http, "/forgot-password", { email }).redirects(0);

  it("is answered the same whether or not the address exists", async () => {
    const known = await ask(person.email);
    const unknown = await ask("nobody@example.org");
    expect([unknown.status, unknown.headers.location]).toEqual([known.status, known.headers.location]);
    expect(comparable(unknown.text, "nobody@example.org")).toBe(comparable(known.text, person.email));
    const { inbox } = await openMailbox();
    expect(inbox.list("nobody@example.org")).toHaveLength(0);
  });

  it("is replaced by the mailed link once, and every session ends", async () => {
    const cookie = await cookieOf(person);
    expect(await isSignedIn(cookie)).toBe(true);
    await ask(person.email);
    const link = await newestLink(person.email, "/reset-password");
    const token = link.searchParams.get("token") ?? "";
    // A mail scanner opens the link: nothing is used up.
    await http.get(link.pathname + link.search).expect(200);
    const set = (password: string) => post(http, "/reset-password", { token, password }).redirects(0);
    for (const weak of ["short", "password1234", "aaaaaaaaaaaaaaaa"])
      expect((await set(weak)).status).toBe(400);
    expect((await set("a wholly new set of words")).status).toBe(302);
    expect(await isSignedIn(cookie)).toBe(false);
    expect((await set("yet another set of words")).status).toBe(410);
    await signIn(person.email, person.password).expect(400);
    await signIn(person.email, "a wholly new set of words").expect(302);
  });
});

describe("an address that is not confirmed", () => {
  it("gets a new link at sign-in, which a GET does not use up and a POST does", async () => {
    await authDatabase()`update auth.user set email_verified = false where id = ${person.id}`;
    await signIn(person.email, person.password).expect(400);
    const link = await newestLink(person.email, "/verify-email");
    const proof = link.searchParams.get("token") ?? "";
    await http.get(link.pathname + link.search).expect(200);
    await signIn(person.email, person.password).expect(400);
    await post(http, "/verify-email", { proof }).redirects(0).expect(302);
    await signIn(person.email, person.password).expect(302);
    await post(http, "/verify-email", { proof: `${proof}x` })
      .redirects(0)
      .expect(410);
  });
});

it("signs out of this session and leaves nothing to come back with", async () => {
  const cookie = await cookieOf(person);
  await post(http, "/sign-out", {}, cookie).redirects(0).expect(302);
  expect(await isSignedIn(cookie)).toBe(false);
});

it("shows a person of several organisations the choice, and each only its own records", async () => {
  const first = await makeClub({ name: "First Club" });
  const second = await makeClub({ name: "Second School", kind: "school" });
  const both = await makePerson(first.organisation, { roles: ["trainer"] });
  await join(both, second.organisation, { roles: ["coach"] });
  const cookie = await cookieOf(both);
  const get = (path: string) => http.get(path).set("Cookie", cookie).redirects(0);
  expect((await get("/")).headers.location).toBe("/organisations");
  const choice = (await get("/organisations")).text;
  expect(choice).toContain("First Club");
  expect(choice).toContain("Second School");
  expect((await get(`/${first.organisation.slug}/injuries`)).status).not.toBe(403);
  expect((await get(`/${second.organisation.slug}/injuries`)).status).toBe(403);
  const roster = (await get(`/${second.organisation.slug}/roster`)).text;
  expect(roster).toContain(second.athlete.familyName);
  expect(roster).not.toContain(first.athlete.familyName);
  const one = await cookieOf(first.people.coach);
  const home = await http.get("/").set("Cookie", one).redirects(0);
  expect(home.headers.location).toBe(`/${first.organisation.slug}/today`);
});
