import { createHmac, randomUUID } from "node:crypto";
import { setTimeout as wait } from "node:timers/promises";
import { type FakeMail, readAddress } from "./inbox.server";

/** Milliseconds before each attempt; the real service waits from seconds to hours, a person here does not. */
const DEFAULT_ATTEMPT_DELAYS_MS = [0, 500, 2000, 5000];
const ATTEMPT_TIMEOUT_MS = 5000;

/**
 * Svix headers of one delivery attempt: HMAC-SHA-256 over `id.timestamp.body` with the decoded secret.
 * Written against node:crypto and not with the SDK's own signer, so that a test of verification has a
 * second opinion.
 */
export function signWebhook(body: string, secret: string, id: string, at: Date): Record<string, string> {
  const timestamp = String(Math.floor(at.getTime() / 1000));
  const key = Buffer.from(secret.replace(/^whsec_/, ""), "base64");
  const signature = createHmac("sha256", key).update(`${id}.${timestamp}.${body}`).digest("base64");
  return { "svix-id": id, "svix-timestamp": timestamp, "svix-signature": `v1,${signature}` };
}

export type WebhookTarget = { url: string; secret: string };

export type WebhookSender = ReturnType<typeof createWebhookSender>;

/**
 * Tells our application what became of each mail: sent, then delivered. An address beginning with `bounce`
 * bounces for good, `softbounce` for now; `complain` is delivered and then called junk.
 */
export function createWebhookSender(options: { target?: WebhookTarget; attemptDelaysMs?: number[] }) {
  const delays = options.attemptDelaysMs ?? DEFAULT_ATTEMPT_DELAYS_MS;
  const closing = new AbortController();
  let target = options.target;

  async function tell(mail: FakeMail, type: string, more: object = {}) {
    const event: FakeMail["events"][number] = { type, at: new Date(), webhook: target ? "waiting" : "none" };
    mail.events.push(event);
    if (!target) return;
    const data = {
      created_at: mail.createdAt.toISOString(),
      email_id: mail.id,
      message_id: `<${mail.id}@localhost>`,
      from: mail.from,
      to: mail.to,
      subject: mail.subject,
      ...more,
    };
    const body = JSON.stringify({ type, created_at: event.at.toISOString(), data });
    event.webhook = (await post(target, body)) ? "taken" : "given up";
  }

  /** Posts until the application takes it; the event's id stays, each attempt is signed anew. */
  async function post(to: WebhookTarget, body: string) {
    const id = `msg_${randomUUID().replaceAll("-", "")}`;
    for (const delay of delays) {
      await wait(delay, undefined, { signal: closing.signal });
      const headers = { "content-type": "application/json", ...signWebhook(body, to.secret, id, new Date()) };
      const signal = AbortSignal.any([closing.signal, AbortSignal.timeout(ATTEMPT_TIMEOUT_MS)]);
      const response = await fetch(to.url, { method: "POST", headers, body, signal }).catch(() => null);
      await response?.body?.cancel().catch(() => undefined);
      if (response?.ok) return true;
    }
    return false;
  }

  async function tellAll(mail: FakeMail) {
    await tell(mail, "email.sent");
    const [address = ""] = mail.to.map(readAddress);
    if (/^(soft)?bounce/.test(address)) {
      const type = address.startsWith("bounce") ? "Permanent" : "Transient";
      const message = "The recipient's mail server refused the mail.";
      return tell(mail, "email.bounced", { bounce: { type, subType: "General", message } });
    }
    await tell(mail, "email.delivered");
    if (address.startsWith("complain")) await tell(mail, "email.complained");
  }

  return {
    setTarget(value: WebhookTarget | undefined) {
      target = value;
    },
    /** Starts telling; nothing waits for it and closing ends it. */
    start(mail: FakeMail) {
      tellAll(mail).catch((error: unknown) => {
        if (!closing.signal.aborted) throw error;
      });
    },
    close() {
      closing.abort();
    },
  };
}
