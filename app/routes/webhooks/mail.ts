import { stopMailOf } from "~/features/notices/composing.server";
import { noteMailNews } from "~/features/outbox/outbox.server";
import { env } from "~/platform/env.server";
import { MailWebhookRefusal, verifyMailWebhook } from "~/platform/mail/webhook.server";
import type { Route } from "./+types/mail";

/** News this fresh may overtake our own note of the message it is about: the mail service is asked to say it again. */
const mayOvertakeMs = 60_000;

/** News from the mail service, proven by its signature. A replay changes nothing: states only move forward. */
export async function action({ request }: Route.ActionArgs) {
  try {
    const event = verifyMailWebhook(await request.text(), request.headers, env().RESEND_WEBHOOK_SECRET);
    switch (event.type) {
      case "delivered":
      case "bounced":
      case "complained":
      case "failed": {
        const noted = await noteMailNews({ kind: event.type, providerId: event.emailId, at: event.at });
        if (!noted && Date.now() - event.at.getTime() < mayOvertakeMs)
          return new Response("not known yet", { status: 503 });
        const refused = event.type === "complained" || (event.type === "bounced" && event.hard);
        if (noted && refused) await stopMailOf(noted.scope, noted.delivery, event.at);
      }
    }
    return new Response(null, { status: 204 });
  } catch (error) {
    if (error instanceof MailWebhookRefusal) return new Response("refused", { status: 401 });
    throw error;
  }
}
