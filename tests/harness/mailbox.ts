import { type FakeResend, startFakeResend } from "~/platform/mail/fake-resend.server";
import { atEnd } from "./closing";

let started: Promise<FakeResend> | undefined;

/**
 * The file's own mail service, at the address the environment names. Open it before the first mail goes out; what was
 * sent is read with `(await openMailbox()).inbox`.
 */
export function openMailbox() {
  started ??= startFakeResend({
    port: Number(new URL(process.env.RESEND_BASE_URL ?? "").port),
    apiKey: process.env.RESEND_API_KEY ?? "",
  }).then((fake) => {
    atEnd(() => fake.close());
    return fake;
  });
  return started;
}
