import { Resend } from "resend";
import { z } from "zod";

/** What the mail service tells of one mail. `ignored` is a genuine event that is not about delivery. */
export type MailEvent =
  | {
      /** Same id on every delivery of this event: keep it, and skip an event already seen. */
      eventId: string;
      type: "sent" | "delivered" | "delayed" | "opened" | "clicked" | "complained" | "failed" | "suppressed";
      emailId: string;
      at: Date;
    }
  | {
      eventId: string;
      type: "bounced";
      emailId: string;
      at: Date;
      /** True when the address will never take mail: stop sending to it. */
      hard: boolean;
    }
  | { eventId: string; type: "ignored"; name: string };

/** Refused webhook. Answer 401 to `bad-signature`, 400 to the others; never act on the body. */
export class MailWebhookRefusal extends Error {
  readonly code: "missing-headers" | "bad-signature" | "malformed";

  constructor(code: MailWebhookRefusal["code"]) {
    super(`The mail webhook was refused: ${code}`);
    this.name = "MailWebhookRefusal";
    this.code = code;
  }
}

const EVENT_TYPES = {
  "email.sent": "sent",
  "email.delivered": "delivered",
  "email.delivery_delayed": "delayed",
  "email.opened": "opened",
  "email.clicked": "clicked",
  "email.bounced": "bounced",
  "email.complained": "complained",
  "email.failed": "failed",
  "email.suppressed": "suppressed",
} as const;

const envelopeSchema = z.object({ type: z.string().min(1) });
const emailEventSchema = z.object({
  type: z.enum(Object.keys(EVENT_TYPES) as [keyof typeof EVENT_TYPES]),
  created_at: z.string().transform((value, context) => {
    const at = new Date(value);
    if (!Number.isNaN(at.getTime())) return at;
    context.addIssue({ code: "custom", message: "not an instant" });
    return z.NEVER;
  }),
  data: z.object({
    email_id: z.string().min(1),
    bounce: z.object({ type: z.string() }).optional(),
  }),
});

// Verifying needs no key, but the SDK cannot be constructed without one.
const verifier = new Resend("unused-by-webhook-verification").webhooks;

/**
 * Checks the signature of a webhook (Svix format: HMAC-SHA-256 over id, timestamp and body, at most five
 * minutes old) and returns the event. Pass the body exactly as received: a parsed and re-written body no
 * longer matches.
 *
 * @param headers `svix-id`, `svix-timestamp` and `svix-signature` of the request.
 * @param secret the endpoint's secret, `whsec_` and base64.
 * @throws {MailWebhookRefusal} when the request is forged, too old or not readable.
 * @throws {Error} when the secret itself is not of that form: a setting to mend, not a bad request.
 */
export function verifyMailWebhook(rawBody: string, headers: Headers, secret: string): MailEvent {
  if (!/^whsec_[A-Za-z0-9+/]{16,}={0,2}$/.test(secret)) {
    throw new Error(
      "The mail webhook secret must be `whsec_` followed by base64, as the mail service shows it",
    );
  }
  const id = headers.get("svix-id");
  const timestamp = headers.get("svix-timestamp");
  const signature = headers.get("svix-signature");
  if (!id || !timestamp || !signature) throw new MailWebhookRefusal("missing-headers");

  const body = readSignedBody(rawBody, { id, timestamp, signature }, secret);
  const envelope = envelopeSchema.safeParse(body);
  if (!envelope.success) throw new MailWebhookRefusal("malformed");
  if (!(envelope.data.type in EVENT_TYPES)) return { eventId: id, type: "ignored", name: envelope.data.type };

  const event = emailEventSchema.safeParse(body);
  if (!event.success) throw new MailWebhookRefusal("malformed");
  const { data, created_at: at } = event.data;
  const type = EVENT_TYPES[event.data.type];
  if (type !== "bounced") return { eventId: id, type, emailId: data.email_id, at };
  // A bounce without its kind counts as hard: the guardian is then phoned, which is the safe error.
  const hard = data.bounce ? data.bounce.type.toLowerCase() === "permanent" : true;
  return { eventId: id, type, emailId: data.email_id, at, hard };
}

function readSignedBody(
  rawBody: string,
  headers: { id: string; timestamp: string; signature: string },
  secret: string,
): unknown {
  try {
    return verifier.verify({ payload: rawBody, headers, webhookSecret: secret });
  } catch (error) {
    // The signature is checked before the body is parsed, so a SyntaxError comes from a genuine sender.
    throw new MailWebhookRefusal(error instanceof SyntaxError ? "malformed" : "bad-signature");
  }
}
