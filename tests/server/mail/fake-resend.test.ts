import request from "supertest";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { createFakeInbox } from "~/platform/mail/fake/inbox.server";
import { type FakeResend, startFakeResend } from "~/platform/mail/fake-resend.server";

const apiKey = "re_test_4f1c";
const mail = {
  from: "Marram Bay Athletic <notices@example.org>",
  to: "Guardian@example.org",
  subject: "News & <b>more</b>",
  html: '<p>News</p><script>alert("1")</script>',
  text: "News: https://haleside.example.org/n/1/abc. Stop: https://haleside.example.org/n/1/stop",
};

let fake: FakeResend;
beforeEach(async () => {
  fake = await startFakeResend({ port: 0, apiKey, limit: 3 });
});
afterEach(() => fake.close());

const send = (body: object | string, headers: Record<string, string> = {}) =>
  request(fake.url)
    .post("/emails")
    .set({ authorization: `Bearer ${apiKey}`, "content-type": "application/json", ...headers })
    .send(body);

describe("the interface of the mail service", () => {
  it("lets no one in without the key", async () => {
    const without = await request(fake.url).post("/emails").send(mail);
    expect(without.status).toBe(401);
    expect(without.body).toMatchObject({ statusCode: 401, name: "missing_api_key" });
    const wrong = await send(mail, { authorization: "Bearer re_other" });
    expect(wrong.body).toMatchObject({ statusCode: 403, name: "invalid_api_key" });
    expect(fake.inbox.list()).toEqual([]);
  });

  it.each([
    [{ ...mail, to: undefined }, "missing_required_field"],
    [{ ...mail, html: undefined, text: undefined }, "missing_required_field"],
    [{ ...mail, to: [] }, "validation_error"],
    [{ ...mail, to: "a@b" }, "validation_error"],
    [{ ...mail, headers: { a: 1 } }, "validation_error"],
  ])("refuses an unfit mail (%#) by name", async (body, name) => {
    const response = await send(body);
    expect(response.status).toBe(422);
    expect(response.body.name).toBe(name);
    expect(fake.inbox.list()).toEqual([]);
  });

  it("answers a body that is no JSON in the same shape", async () => {
    const response = await send("{");
    expect(response.status).toBe(400);
    expect(response.body.name).toBe("validation_error");
  });

  it("returns a mail by its id with its last event", async () => {
    const { body } = await send(mail);
    const found = await request(fake.url).get(`/emails/${body.id}`).set("authorization", `Bearer ${apiKey}`);
    expect(found.body).toMatchObject({
      object: "email",
      id: body.id,
      to: [mail.to],
      last_event: "delivered",
    });
    const absent = await request(fake.url).get("/emails/none").set("authorization", `Bearer ${apiKey}`);
    expect(absent.status).toBe(404);
  });

  it("is served to this machine's own names alone", async () => {
    const response = await request(fake.url).get("/inbox.json").set("host", "attacker.example.org");
    expect(response.status).toBe(403);
  });
});

describe("the inbox", () => {
  it("lists for a test what one address got, whatever the case, with the links", async () => {
    await send(mail);
    await send({ ...mail, to: "Other Guardian <other@example.org>" });
    const mine = await request(fake.url).get("/inbox.json").query({ to: "guardian@EXAMPLE.org" });
    expect(mine.body.mails).toHaveLength(1);
    expect(mine.body.mails[0].links).toEqual([
      "https://haleside.example.org/n/1/abc",
      "https://haleside.example.org/n/1/stop",
    ]);
    const other = await request(fake.url).get("/inbox.json").query({ to: "other@example.org" });
    expect(other.body.mails).toHaveLength(1);
    const all = await request(fake.url).get("/inbox.json");
    expect(all.body.mails).toHaveLength(2);
  });

  it("keeps the newest mails only", async () => {
    for (const subject of ["1", "2", "3", "4", "5"]) await send({ ...mail, subject });
    expect(fake.inbox.list().map((one) => one.subject)).toEqual(["5", "4", "3"]);
  });

  it("shows mails as text, and the HTML part in a frame that can run and fetch nothing", async () => {
    const { body } = await send(mail);
    const list = await request(fake.url).get("/");
    expect(list.text).toContain("News &amp; &lt;b&gt;more&lt;/b&gt;");
    const page = await request(fake.url).get(`/mails/${body.id}`);
    expect(page.text).toContain('href="https://haleside.example.org/n/1/abc"');
    expect(page.text).not.toContain("<script");
    expect(page.text).toMatch(/<iframe[^>]+sandbox="allow-popups/);
    const part = await request(fake.url).get(`/mails/${body.id}/html`);
    expect(part.headers["content-security-policy"]).toMatch(/default-src 'none'.*sandbox/);
    expect((await request(fake.url).get("/mails/none")).status).toBe(404);
  });

  it("says that it is empty", async () => {
    expect((await request(fake.url).get("/")).text).toContain("No mail yet");
  });

  it("forgets a key after a day, as the real service does", () => {
    let now = new Date("2026-10-06T12:00:00Z");
    const inbox = createFakeInbox({ limit: 10, now: () => now });
    const draft = {
      from: "a@example.org",
      to: ["b@example.org"],
      subject: "s",
      html: null,
      text: "t",
      replyTo: [],
      headers: {},
    };
    const first = inbox.accept(draft, "key");
    now = new Date("2026-10-07T11:59:59Z");
    expect(inbox.accept(draft, "key")).toEqual({ outcome: "repeated", id: "id" in first ? first.id : "" });
    now = new Date("2026-10-07T12:00:00Z");
    expect(inbox.accept(draft, "key").outcome).toBe("taken");
  });
});

describe("the controls", () => {
  it("fail the next sends, then let go", async () => {
    await request(fake.url)
      .post("/control/fail")
      .send({ count: 2, fault: 429, retryAfterSeconds: 9 })
      .expect(204);
    const limited = await send(mail);
    expect([limited.status, limited.headers["retry-after"]]).toEqual([429, "9"]);
    expect((await send(mail)).status).toBe(429);
    expect((await send(mail)).status).toBe(200);
  });

  it("take the service down and up, with the inbox still to be read", async () => {
    await request(fake.url).post("/control/down").send({ down: true }).expect(204);
    await expect(send(mail)).rejects.toThrow();
    await request(fake.url).get("/inbox.json").expect(200);
    await request(fake.url).post("/control/down").send({ down: false }).expect(204);
    expect((await send(mail)).status).toBe(200);
  });

  it("clear everything", async () => {
    await send(mail, { "idempotency-key": "k" });
    await request(fake.url).post("/control/fail").send({ fault: 500 }).expect(204);
    await request(fake.url).post("/control/clear").expect(204);
    expect(fake.inbox.list()).toEqual([]);
    expect((await send({ ...mail, subject: "New" }, { "idempotency-key": "k" })).status).toBe(200);
  });

  it("refuse what they do not know", async () => {
    await request(fake.url).post("/control/fail").send({ fault: 418 }).expect(400);
    await request(fake.url).post("/control/down").send({ down: "yes" }).expect(400);
  });
});

describe("starting", () => {
  it("names a port that is taken", async () => {
    const port = Number(new URL(fake.url).port);
    await expect(startFakeResend({ port, apiKey })).rejects.toThrow(/EADDRINUSE/);
  });

  it("asks for the secret that webhooks need", async () => {
    await expect(startFakeResend({ port: 0, apiKey, webhookUrl: "http://127.0.0.1:9/w" })).rejects.toThrow(
      /whsec_/,
    );
  });
});
