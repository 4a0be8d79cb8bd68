import { env } from "~/platform/env.server";
import { schedule, stopQueue, work } from "~/platform/jobs/queue.server";
import { log } from "~/platform/log.server";
import { type FakeResend, startFakeResend } from "~/platform/mail/fake-resend.server";
import { composeInvitationDelivery } from "./accounts/invitations.server";
import { sealAllAudits } from "./audit/audit.server";
import { runImportJob } from "./imports/imports.server";
import { composeFreshLinkDelivery, composeNoticeDelivery } from "./notices/composing.server";
import { type Composer, deliver, sweepOutbox, type Template } from "./outbox/outbox.server";
import { rollUpMarked } from "./rates/rollups/rollups.server";

const composers: Record<Template, Composer> = {
  invitation: async (tx, scope, { invitationId }) =>
    (invitationId ? await composeInvitationDelivery(tx, scope, invitationId) : undefined) ?? {
      stopped: "invitation no longer open",
    },
  notice: composeNoticeDelivery,
  "fresh-link": composeFreshLinkDelivery,
};

let fake: FakeResend | undefined;

/** Starts what runs beside the requests: the local mail service where configured, and the workers of the queues. */
export async function startWorkers() {
  const { MAIL_FAKE_PORT, RESEND_API_KEY, RESEND_WEBHOOK_SECRET, APP_ORIGIN } = env();
  if (MAIL_FAKE_PORT)
    fake = await startFakeResend({
      port: MAIL_FAKE_PORT,
      apiKey: RESEND_API_KEY,
      webhookUrl: `${APP_ORIGIN}/webhooks/mail`,
      webhookSecret: RESEND_WEBHOOK_SECRET,
    });
  await work("deliver", async ({ organisationId, deliveryId }) => {
    if (organisationId && deliveryId) await deliver(organisationId, deliveryId, composers);
  });
  await work("import", runImportJob);
  await work("sweep", sweepOutbox);
  await schedule("sweep", "* * * * *");
  await work("seal", sealAllAudits);
  await schedule("seal", "*/5 * * * *");
  await work("rollup", rollUpMarked);
  await schedule("rollup", "* * * * *");
  // What was left waiting while no process ran goes out now, not with the next minute.
  await sweepOutbox().catch((error: unknown) =>
    log.error({ error: error instanceof Error ? error.name : "unknown" }, "first sweep"),
  );
}

export async function stopWorkers() {
  await stopQueue();
  await fake?.close();
}
