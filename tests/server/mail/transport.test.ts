import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { MailFailure, readRetryAfterSeconds, toMailFailure } from "~/platform/mail/failure.server";
import { type FakeResend, startFakeResend } from "~/platform/mail/fake-resend.server";
import { createMailTransport } from "~/platform/mail/transport.server";

const apiKey = "re_test_4f1c";
const from = "Marram Bay Athletic <notices@haleside.example.org>";
const message = {
  to: "guardian@example.org",
  subject: "News for you",
  html: "<p>Read it.</p>",
  text: "Read it: https://haleside.example.org/n/1.",
};

let fake: FakeResend;
beforeEach(async () => {
  fake = await startFakeResend({ port: 0, apiKey });
});
afterEach(() => fake.close());

const connect = (more: { apiKey?: string; timeoutMs?: number; baseUrl?: string } = {}) =>
  createMailTransport({ apiKey, from, baseUrl: fake.url, ...more });

/** The failure of a send that must fail. */
async function catchFailure(sending: Promise<unknown>) {
  const caught = await sending.then(
    () => undefined,
    (error: unknown) => error,
  );
  expect(caught).toBeInstanceOf(MailFailure);
  return caught as MailFailure;
}

describe("a mail that is taken", () => {
  it("arrives whole, once, under the id that was returned", async () => {
    const { id } = await connect().send(
      { ...message, replyTo: "office@example.org", headers: { "X-Notice": "7" } },
      { idempotencyKey: "delivery-1" },
    );
    expect(fake.inbox.list()).toHaveLength(1);
    expect(fake.inbox.find(id)).toMatchObject({
      from,
      to: [message.to],
      subject: message.subject,
      html: message.html,
      text: message.text,
      replyTo: ["office@example.org"],
      headers: { "X-Notice": "7" },
    });
  });

  it("keeps a trailing slash of the configured address from breaking the path", async () => {
    await connect({ baseUrl: `${fake.url}/` }).send(message, { idempotencyKey: "delivery-1" });
    expect(fake.inbox.list()).toHaveLength(1);
  });
});

describe("the same key", () => {
  it("with the same mail gives the same id and no second mail, even at once", async () => {
    const transport = connect();
    const sends = Array.from({ length: 8 }, () => transport.send(message, { idempotencyKey: "delivery-1" }));
    const ids = new Set((await Promise.all(sends)).map(({ id }) => id));
    expect(ids.size).toBe(1);
    expect(fake.inbox.list()).toHaveLength(1);
  });

  it("with another mail is refused for good", async () => {
    const transport = connect();
    await transport.send(message, { idempotencyKey: "delivery-1" });
    const failure = await catchFailure(
      transport.send({ ...message, subject: "Other" }, { idempotencyKey: "delivery-1" }),
    );
    expect(failure).toMatchObject({ kind: "permanent", code: "invalid_idempotent_request", status: 409 });
    expect(fake.inbox.list()).toHaveLength(1);
  });

  it("makes a lost answer harmless: the retry returns the mail that had been taken", async () => {
    const transport = connect();
    fake.faults.failNext({ fault: "lost-answer" });
    const failure = await catchFailure(transport.send(message, { idempotencyKey: "delivery-1" }));
    expect(failure).toMatchObject({ kind: "temporary", code: "unreachable", status: null });
    expect(fake.inbox.list()).toHaveLength(1);

    const { id } = await transport.send(message, { idempotencyKey: "delivery-1" });
    expect(fake.inbox.list().map((mail) => mail.id)).toEqual([id]);
  });
});

describe("a mail that is not taken", () => {
  it.each([
    [500, { kind: "temporary", code: "internal_server_error", status: 500, needsOperator: false }],
    [503, { kind: "temporary", code: "application_error", status: 503, needsOperator: false }],
    [422, { kind: "permanent", code: "validation_error", status: 422, needsOperator: false }],
    [403, { kind: "temporary", code: "invalid_api_key", status: 403, needsOperator: true }],
  ] as const)("fails by status %i as it should", async (fault, expected) => {
    fake.faults.failNext({ fault });
    const failure = await catchFailure(connect().send(message, { idempotencyKey: "delivery-1" }));
    expect(failure).toMatchObject({ ...expected, retryAfterSeconds: null });
    expect(fake.inbox.list()).toEqual([]);
  });

  it("is told how long to wait when the service limits the rate, and goes through after", async () => {
    fake.faults.failNext({ fault: 429, count: 2, retryAfterSeconds: 17 });
    const transport = connect();
    for (let attempt = 0; attempt < 2; attempt += 1) {
      const failure = await catchFailure(transport.send(message, { idempotencyKey: "delivery-1" }));
      expect(failure).toMatchObject({
        kind: "rate-limited",
        code: "rate_limit_exceeded",
        retryAfterSeconds: 17,
      });
    }
    await transport.send(message, { idempotencyKey: "delivery-1" });
    expect(fake.inbox.list()).toHaveLength(1);
  });

  it("fails as unreachable while the service is down, and as timeout when it does not answer", async () => {
    fake.faults.setDown(true);
    const down = await catchFailure(connect().send(message, { idempotencyKey: "delivery-1" }));
    expect(down).toMatchObject({ kind: "temporary", code: "unreachable" });

    fake.faults.setDown(false);
    fake.faults.failNext({ fault: "no-answer" });
    const silent = await catchFailure(
      connect({ timeoutMs: 60 }).send(message, { idempotencyKey: "delivery-1" }),
    );
    expect(silent).toMatchObject({ kind: "temporary", code: "timeout", status: null });
  });

  it("says that an operator must mend a wrong key", async () => {
    const failure = await catchFailure(
      connect({ apiKey: "re_wrong" }).send(message, { idempotencyKey: "delivery-1" }),
    );
    expect(failure).toMatchObject({ kind: "temporary", code: "invalid_api_key", needsOperator: true });
  });

  it.each([{ to: "not an address" }, { from: "nobody" }, { subject: "" }, { html: "", text: "" }])(
    "is permanent for a mail the service refuses: %j",
    async (bad) => {
      const failure = await catchFailure(
        connect().send({ ...message, ...bad }, { idempotencyKey: "delivery-1" }),
      );
      expect(failure).toMatchObject({ kind: "permanent", status: 422 });
    },
  );

  it("is permanent for a key that is too long", async () => {
    const failure = await catchFailure(connect().send(message, { idempotencyKey: "k".repeat(257) }));
    expect(failure).toMatchObject({ kind: "permanent", code: "invalid_idempotency_key", status: 400 });
  });

  it("names no address in its error", async () => {
    const failure = await catchFailure(
      connect().send({ ...message, to: "guardian at example.org" }, { idempotencyKey: "delivery-1" }),
    );
    expect(String(failure)).not.toContain("example.org");
    expect(String(failure)).not.toContain("guardian");
  });
});

describe("the mapping of answers", () => {
  const now = new Date("2026-10-06T12:00:00Z");
  const map = (code: string, status: number | null, headers: Record<string, string> | null = null) =>
    toMailFailure({ code, status, headers }, now);

  it("tells the two conflicts of a key apart", () => {
    expect(map("concurrent_idempotent_requests", 409).kind).toBe("temporary");
    expect(map("invalid_idempotent_request", 409).kind).toBe("permanent");
  });

  it("waits for a quota much longer than for a rate", () => {
    expect(map("rate_limit_exceeded", 429).retryAfterSeconds).toBe(2);
    expect(map("daily_quota_exceeded", 429).retryAfterSeconds).toBe(3600);
  });

  it("takes 408 for another try and 451 for a refusal", () => {
    expect(map("application_error", 408).kind).toBe("temporary");
    expect(map("security_error", 451).kind).toBe("permanent");
  });

  it.each([
    [{ "retry-after": "3" }, 3],
    [{ "retry-after": "0.4" }, 1],
    [{ "retry-after": "Tue, 06 Oct 2026 12:00:30 GMT" }, 30],
    [{ "retry-after": "Tue, 06 Oct 2026 11:00:00 GMT" }, 0],
    [{ "retry-after": "soon", "ratelimit-reset": "5" }, 5],
    [{}, null],
  ])("reads the wait from %j", (headers, seconds) => {
    expect(readRetryAfterSeconds(headers as Record<string, string>, now)).toBe(seconds);
  });
});
