import { Resend } from "resend";
import { z } from "zod";
import { MailFailure, toMailFailure } from "./failure.server";

/** One mail to one address: two guardians never share a message, so neither learns of the other. */
export type MailMessage = {
  to: string;
  subject: string;
  html: string;
  text: string;
  /** `Name <address>`; the transport's own sender when left out. */
  from?: string;
  replyTo?: string;
  headers?: Record<string, string>;
};

export type MailTransport = {
  /**
   * Hands one mail to the mail service and returns the service's id of it, by which its webhooks name it.
   * The same key with the same message returns the same id and sends nothing twice; the service forgets
   * keys after 24 hours, so stop trying before that.
   *
   * @throws {MailFailure} and nothing else.
   */
  send(message: MailMessage, options: { idempotencyKey: string }): Promise<{ id: string }>;
};

export type MailTransportOptions = {
  apiKey: string;
  /** Sender of every mail that names none, as `Name <address>`. */
  from: string;
  /** Where the mail service listens; left out, the SDK's own default (or RESEND_BASE_URL). */
  baseUrl?: string;
  /** Milliseconds until an unanswered send counts as failed. */
  timeoutMs?: number;
};

const DEFAULT_TIMEOUT_MS = 10_000;

// The SDK passes on whatever JSON a failing server (or a proxy before it) answered, so its type is not proof.
const refusalSchema = z.object({
  name: z.string().max(80),
  statusCode: z.number().int().nullish(),
});
const acceptedSchema = z.object({ id: z.string().min(1) });

/** The transport over Resend's SDK. In development and tests `baseUrl` points at the local fake. */
export function createMailTransport(options: MailTransportOptions): MailTransport {
  const client = new Resend(options.apiKey, { baseUrl: options.baseUrl?.replace(/\/+$/, "") });
  const timeoutMs = options.timeoutMs ?? DEFAULT_TIMEOUT_MS;

  return {
    async send(message, { idempotencyKey }) {
      const signal = AbortSignal.timeout(timeoutMs);
      const { from = options.from, to, subject, html, text, replyTo, headers } = message;
      const answer = await client.emails.send(
        { from, to, subject, html, text, replyTo, headers },
        { idempotencyKey, signal },
      );
      if (answer.error) throw explainRefusal(answer.error, answer.headers, signal.aborted);

      const accepted = acceptedSchema.safeParse(answer.data);
      if (accepted.success) return { id: accepted.data.id };
      throw new MailFailure({ kind: "temporary", code: "unreadable-answer", status: null });
    },
  };
}

function explainRefusal(error: unknown, headers: Record<string, string> | null, timedOut: boolean) {
  const parsed = refusalSchema.safeParse(error);
  if (!parsed.success) return new MailFailure({ kind: "temporary", code: "unreadable-answer", status: null });
  const status = parsed.data.statusCode ?? null;
  if (status === null && headers === null) {
    const code = timedOut ? "timeout" : "unreachable";
    return new MailFailure({ kind: "temporary", code, status });
  }
  return toMailFailure({ code: parsed.data.name, status, headers }, new Date());
}
