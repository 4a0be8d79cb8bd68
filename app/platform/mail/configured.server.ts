import { env } from "../env.server";
import { createMailTransport, type MailTransport } from "./transport.server";

let transport: MailTransport | undefined;

/** The transport the environment names: the mail service itself, or the local one that speaks its protocol. */
export function mailTransport(): MailTransport {
  const { RESEND_API_KEY, RESEND_BASE_URL, MAIL_FROM } = env();
  transport ??= createMailTransport({
    apiKey: RESEND_API_KEY,
    from: MAIL_FROM,
    ...(RESEND_BASE_URL ? { baseUrl: RESEND_BASE_URL } : {}),
  });
  return transport;
}
