import { createHash } from "node:crypto";
import { log } from "~/platform/log.server";
import { mailTransport } from "~/platform/mail/configured.server";
import { composePasswordReset } from "./emails/password-reset-email";
import { composeVerification } from "./emails/verification-email";

/**
 * Mail about somebody's own sign-in. It belongs to no organisation and has no outbox: the person waits for it and
 * asks again. A failure is logged without the address and told to nobody, so that the answer stays the same
 * whether or not an address exists.
 */
export async function sendIdentityMail(
  kind: "verify-email" | "password-reset",
  person: { email: string },
  link: string,
) {
  try {
    const mail =
      kind === "verify-email"
        ? await composeVerification({
            language: "en",
            email: person.email,
            linkUrl: link,
            validMinutes: 24 * 60,
          })
        : await composePasswordReset({
            language: "en",
            email: person.email,
            linkUrl: link,
            validMinutes: 60,
          });
    await mailTransport().send(
      { to: person.email, ...mail },
      { idempotencyKey: `${kind}-${createHash("sha256").update(link).digest("base64url")}` },
    );
  } catch (error) {
    log.error({ kind, error: error instanceof Error ? error.name : "unknown" }, "identity mail not sent");
  }
}
