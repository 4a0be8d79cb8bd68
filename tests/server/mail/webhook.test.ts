import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { signWebhook } from "~/platform/mail/fake/webhooks.server";
import { type FakeResend, startFakeResend } from "~/platform/mail/fake-resend.server";
import { createMailTransport } from "~/platform/mail/transport.server";
import { type MailEvent, MailWebhookRefusal, verifyMailWebhook } from "~/platform/mail/webhook.server";

const secret = `whsec_${Buffer.from("a shared secret of thirty-two by").toString("base64")}`;
const otherSecret = `whsec_${Buffer.from("another secret of thirty-two byt").toString("base64")}`;

const body = (type: string, data: object = { email_id: "mail-1" }) =>
  JSON.stringify({ type, created_at: "2026-10-06T12:00:00.000Z", data });

const signed = (raw: string, options: { secret?: string; at?: Date; id?: string } = {}) =>
  new Headers(signWebhook(raw, options.secret ?? secret, options.id ?? "msg_1", options.at ?? new Date()));

function catchRefusal(run: () => unknown) {
  try {
    run();
  } catch (error) {
    if (error instanceof MailWebhookRefusal) return error.code;
    throw error;
  }
  return "let in";
}

describe("a genuine webhook", () => {
  it.each([
    ["email.sent", "sent"],
    ["email.delivered", "delivered"],
    ["email.delivery_delayed", "delayed"],
    ["email.complained", "complained"],
    ["email.opened", "opened"],
    ["email.failed", "failed"],
    ["email.suppressed", "suppressed"],
  ])("%s becomes %s, with the mail and the instant", (wire, type) => {
    const raw = body(wire);
    expect(verifyMailWebhook(raw, signed(raw), secret)).toEqual({
      eventId: "msg_1",
      type,
      emailId: "mail-1",
      at: new Date("2026-10-06T12:00:00Z"),
    });
  });

  it.each([
    ["Permanent", true],
    ["Transient", false],
    [undefined, true],
  ])("a bounce of kind %s stops sending: %s", (kind, hard) => {
    const bounce = kind ? { bounce: { type: kind, subType: "General", message: "refused" } } : {};
    const raw = body("email.bounced", { email_id: "mail-1", ...bounce });
    expect(verifyMailWebhook(raw, signed(raw), secret)).toMatchObject({ type: "bounced", hard });
  });

  it("about something else is let in and ignored", () => {
    const raw = body("domain.updated", {});
    expect(verifyMailWebhook(raw, signed(raw), secret)).toEqual({
      eventId: "msg_1",
      type: "ignored",
      name: "domain.updated",
    });
  });

  it("may carry several signatures, as while a secret is changed", () => {
    const raw = body("email.sent");
    const headers = signed(raw);
    const old = signed(raw, { secret: otherSecret }).get("svix-signature");
    headers.set("svix-signature", `${old} ${headers.get("svix-signature")}`);
    expect(verifyMailWebhook(raw, headers, secret)).toMatchObject({ type: "sent" });
  });

  it("sent again keeps its event id, by which the receiver skips it", () => {
    const raw = body("email.delivered");
    const first = verifyMailWebhook(raw, signed(raw), secret);
    const again = verifyMailWebhook(raw, signed(raw, { at: new Date(Date.now() + 2000) }), secret);
    expect(again.eventId).toBe(first.eventId);
  });
});

describe("a webhook that is not genuine", () => {
  const raw = body("email.delivered");

  it("is refused when signed with another secret", () => {
    expect(catchRefusal(() => verifyMailWebhook(raw, signed(raw, { secret: otherSecret }), secret))).toBe(
      "bad-signature",
    );
  });

  it("is refused when one character of the body, the id or the time was changed", () => {
    const changedBody = raw.replace("mail-1", "mail-2");
    expect(catchRefusal(() => verifyMailWebhook(changedBody, signed(raw), secret))).toBe("bad-signature");
    for (const [name, value] of [
      ["svix-id", "msg_2"],
      ["svix-timestamp", String(Math.floor(Date.now() / 1000) - 1)],
      ["svix-signature", "v1,"],
      ["svix-signature", "none"],
    ] as const) {
      const headers = signed(raw);
      headers.set(name, value);
      expect(
        catchRefusal(() => verifyMailWebhook(raw, headers, secret)),
        name,
      ).toBe("bad-signature");
    }
  });

  it.each([-6, 6])("is refused %i minutes from now, though rightly signed", (minutes) => {
    const at = new Date(Date.now() + minutes * 60_000);
    expect(catchRefusal(() => verifyMailWebhook(raw, signed(raw, { at }), secret))).toBe("bad-signature");
  });

  it.each(["svix-id", "svix-timestamp", "svix-signature"])("is refused without %s", (name) => {
    const headers = signed(raw);
    headers.delete(name);
    expect(catchRefusal(() => verifyMailWebhook(raw, headers, secret))).toBe("missing-headers");
  });

  it.each(["{", '"text"', "{}", body("email.delivered", {})])("is refused as malformed: %s", (odd) => {
    expect(catchRefusal(() => verifyMailWebhook(odd, signed(odd), secret))).toBe("malformed");
  });

  it("is told from a secret that is itself wrong, which is a setting to mend", () => {
    for (const bad of ["", "whsec_", "secret", "whsec_not base64 at all"]) {
      expect(() => verifyMailWebhook(raw, signed(raw), bad)).toThrow(/webhook secret must be/);
    }
  });
});

describe("the webhooks of the local stand-in", () => {
  const events: MailEvent[] = [];
  let refusals = 0;
  let refuseFirst = 0;
  const receiver = createServer(async (request, response) => {
    const chunks: Buffer[] = [];
    for await (const chunk of request) chunks.push(chunk);
    if (refuseFirst > 0) {
      refuseFirst -= 1;
      refusals += 1;
      response.writeHead(503).end();
      return;
    }
    const headers = new Headers();
    for (const [name, value] of Object.entries(request.headers)) headers.set(name, String(value));
    events.push(verifyMailWebhook(Buffer.concat(chunks).toString("utf8"), headers, secret));
    response.writeHead(204).end();
  });
  let fake: FakeResend;

  beforeEach(async () => {
    events.length = 0;
    refusals = 0;
    await new Promise<void>((resolve) => receiver.listen(0, "127.0.0.1", resolve));
    const { port } = receiver.address() as AddressInfo;
    fake = await startFakeResend({
      port: 0,
      apiKey: "re_test",
      webhookUrl: `http://127.0.0.1:${port}/webhooks/mail`,
      webhookSecret: secret,
      webhookDelaysMs: [0, 5, 5, 5],
    });
  });
  afterEach(async () => {
    await fake.close();
    receiver.closeAllConnections();
    await new Promise<void>((resolve) => receiver.close(() => resolve()));
  });

  const send = (to: string) =>
    createMailTransport({ apiKey: "re_test", from: "notices@example.org", baseUrl: fake.url }).send(
      { to, subject: "News", html: "<p>News</p>", text: "News" },
      { idempotencyKey: to },
    );

  it.each([
    ["guardian@example.org", ["sent", "delivered"]],
    ["bounce.harbour@example.org", ["sent", "bounced"]],
    ["complain@example.org", ["sent", "delivered", "complained"]],
  ])("to %s tell %j, signed, of the id that the send returned", async (to, types) => {
    const { id } = await send(to);
    await vi.waitFor(() => expect(events.map((event) => event.type)).toEqual(types));
    expect(events.every((event) => event.type !== "ignored" && event.emailId === id)).toBe(true);
  });

  it("are sent once for a mail that was sent twice", async () => {
    await send("guardian@example.org");
    await send("guardian@example.org");
    await vi.waitFor(() =>
      expect(fake.inbox.list()[0]?.events.map((event) => event.webhook)).toEqual(["taken", "taken"]),
    );
    expect(events).toHaveLength(2);
  });

  it("are tried again until they are taken", async () => {
    refuseFirst = 2;
    await send("guardian@example.org");
    await vi.waitFor(() => expect(events.map((event) => event.type)).toEqual(["sent", "delivered"]));
    expect(refusals).toBe(2);
  });

  it("are given up after the last attempt, and the inbox says so", async () => {
    refuseFirst = 4;
    await send("guardian@example.org");
    await vi.waitFor(() => expect(events.map((event) => event.type)).toEqual(["delivered"]));
    expect(fake.inbox.list()[0]?.events[0]).toMatchObject({ type: "email.sent", webhook: "given up" });
  });
});
