import { noteMailNews } from "~/features/outbox/outbox.server";
import { env } from "~/platform/env.server";
import { MailWebhookRefusal, verifyMailWebhook } from "~/platform/mail/webhook.server";
import type { Route } from "./+types/mail";

/** News from the mail service, proven by its signature. A replay changes nothing: states only move forward. */
export async function action({ request }: Route.ActionArgs) {
  try {
    const event = verifyMailWebhook(await request.text(), request.headers, env().RESEND_WEBHOOK_SECRET);
    switch (event.type) {
      case "delivered":
      case "bounced":
      case "complained":
      case "failed":
        await noteMailNews({ kind: event.type, providerId: event.emailId, at: event.at });
    }
    return new Response(null, { status: 204 });
  } catch (error) {
    if (error instanceof MailWebhookRefusal) return new Response("refused", { status: 401 });
    throw error;
  }
}
