import { beforeAll, beforeEach, describe, expect, it } from "vitest";
import { acceptInvitation, readInvitation } from "~/features/accounts/invitations.server";
import {
  confirmInvitation,
  confirmMember,
  invite,
  removeRole,
  resendInvitation,
} from "~/features/accounts/people.server";
import { expiryInDays, linkToken } from "~/features/accounts/tokens.server";
import { authDatabase, maintenance, makeAccount, makeClub, makeInvitation, memberScope } from "../../harness";
import { cookieOf, cookiesOf, type Http, openServer, post } from "../../harness/http";

let http: Http;
let club: Awaited<ReturnType<typeof makeClub>>;
let count = 0;
const address = () => {
  count += 1;
  return `invited-${count}@example.org`;
};

beforeAll(async () => {
  http = await openServer();
  club = await makeClub();
});
beforeEach(() => authDatabase()`delete from auth.attempt`);

const accept = (path: string, fields: Record<string, string>, cookie = "") =>
  post(http, path, fields, cookie).redirects(0);
const fields = { name: "Ines Test", password: "four unrelated test words" };

describe("an invitation", () => {
  it("makes the account and the membership, once, and signs in", async () => {
    const email = address();
    const { path } = await makeInvitation(club.organisation, {
      email,
      roles: ["coach"],
      teams: [club.team.id],
    });
    const page = await http.get(path).expect(200);
    expect(page.text).toContain(email);
    expect(page.text).toContain(club.team.name);
    const answer = await accept(path, fields);
    expect([answer.status, answer.headers.location]).toEqual([302, `/${club.organisation.slug}/today`]);
    const cookie = cookiesOf(answer.headers["set-cookie"] as unknown as string[]);
    const [row] = await authDatabase()<{ id: string }[]>`select id from auth.user where email = ${email}`;
    expect(await memberScope({ id: row?.id ?? "" }, club.organisation)).toMatchObject({
      roles: ["coach"],
      teams: [club.team.id],
    });
    const home = await http.get("/").set("Cookie", cookie).redirects(0);
    expect(home.headers.location).toBe(`/${club.organisation.slug}/today`);
    expect((await http.get(path)).status).toBe(410);
    expect((await accept(path, fields)).status).toBe(410);
  });

  it("refuses weak passwords and keeps what else was typed", async () => {
    const email = address();
    const { path } = await makeInvitation(club.organisation, { email, roles: ["coach"] });
    for (const password of ["short", "qwertyuiop12", "123123123123", email.split("@")[0] ?? ""]) {
      const answer = await accept(path, { ...fields, password });
      expect([password, answer.status]).toEqual([password, 400]);
      expect(answer.text).toContain("Ines Test");
      expect(answer.headers["set-cookie"]).toBeUndefined();
    }
    expect((await accept(path, fields)).status).toBe(302);
  });

  it("does not open when it has expired, was withdrawn, sent again, or its link is not whole", async () => {
    const { admin } = club.scopes;
    const expired = await makeInvitation(club.organisation, {
      email: address(),
      roles: ["coach"],
      expiresAt: new Date(Math.floor(Date.now() / 1000) * 1000 - 60_000),
    });
    expect((await accept(expired.path, fields)).status).toBe(410);
    const withdrawn = await makeInvitation(club.organisation, { email: address(), roles: ["coach"] });
    await maintenance()`update invitations set revoked_at = now() where id = ${withdrawn.id}`;
    expect((await accept(withdrawn.path, fields)).status).toBe(410);
    const again = await makeInvitation(club.organisation, {
      email: address(),
      roles: ["coach"],
      expiresAt: expiryInDays(6),
    });
    await resendInvitation(admin, again.id);
    expect((await http.get(again.path)).status).toBe(404);
    const cut = await makeInvitation(club.organisation, { email: address(), roles: ["coach"] });
    expect((await http.get(cut.path.slice(0, -1))).status).toBe(404);
  });

  it("opens in no other organisation and for no other purpose", async () => {
    const other = await makeClub();
    const { id, part } = await makeInvitation(club.organisation, { email: address(), roles: ["coach"] });
    await expect(readInvitation(other.organisation.id, part, "192.0.2.1")).rejects.toMatchObject({
      code: "not_found",
    });
    const expiresAt = new Date(Date.now() + 7 * 24 * 3600 * 1000);
    const borrowed = `${id}.${linkToken("notice", id, expiresAt)}`;
    await expect(readInvitation(club.organisation.id, borrowed, "192.0.2.1")).rejects.toMatchObject({
      code: "not_found",
    });
  });

  it("is for the invited address only, and a known person accepts with their own sign-in", async () => {
    const invited = await makeAccount();
    const another = await makeAccount();
    const { path, part } = await makeInvitation(club.organisation, {
      email: invited.email,
      roles: ["coach"],
    });
    expect((await accept(path, {}, await cookieOf(another))).status).toBe(403);
    await expect(acceptInvitation(club.organisation.id, part, another, "192.0.2.2")).rejects.toMatchObject({
      code: "forbidden",
    });
    // With a new password for an account that exists already, nobody takes it over.
    const taken = await accept(path, { ...fields, password: "an intruder's chosen words" });
    expect(taken.headers["set-cookie"]).toBeUndefined();
    expect(taken.status).not.toBe(302);
    expect((await accept(path, {}, await cookieOf(invited))).status).toBe(302);
    expect(await memberScope(invited, club.organisation)).toMatchObject({ roles: ["coach"] });
  });

  it("limits guesses of links", async () => {
    const path = `/invitations/${club.organisation.id}/${crypto.randomUUID()}.guess`;
    const statuses: number[] = [];
    for (let tries = 0; tries < 45; tries++) statuses.push((await http.get(path)).status);
    expect(new Set(statuses)).toEqual(new Set([404, 429]));
  });
});

describe("a clinical role", () => {
  it("waits for a lead, before or after the invitation is accepted", async () => {
    const { admin, lead } = club.scopes;
    for (const when of ["before", "after"] as const) {
      const person = await makeAccount();
      const { id } = await invite(admin, {
        email: person.email,
        name: person.name,
        roles: ["trainer"],
        reach: "all",
        teams: [],
      });
      const [row] = await maintenance()<
        { expires_at: Date }[]
      >`select expires_at from invitations where id = ${id}`;
      const part = `${id}.${linkToken("invitation", id, row?.expires_at ?? new Date())}`;
      // An administrator cannot confirm.
      expect(() => confirmInvitation(admin, id)).toThrow(expect.objectContaining({ code: "forbidden" }));
      if (when === "before") await confirmInvitation(lead, id);
      await acceptInvitation(club.organisation.id, part, person, "192.0.2.3");
      if (when === "after") {
        expect(await memberScope(person, club.organisation)).toMatchObject({
          roles: [],
          unconfirmed: ["trainer"],
        });
        await confirmMember(lead, person.id);
      }
      expect(await memberScope(person, club.organisation)).toMatchObject({
        roles: ["trainer"],
        unconfirmed: [],
      });
    }
  });

  it("is confirmed by nobody for themselves, and the last lead and administrator stay", async () => {
    const { admin, lead } = club.scopes;
    expect(() => confirmMember(lead, lead.personId)).toThrow(expect.objectContaining({ code: "forbidden" }));
    await expect(removeRole(admin, admin.personId, "admin")).rejects.toMatchObject({ code: "conflict" });
    await expect(removeRole(admin, lead.personId, "lead")).rejects.toMatchObject({ code: "conflict" });
  });
});
