import { describe, expect, it } from "vitest";
import { withdrawInjury } from "~/features/injuries/edit-injury.server";
import { composeFreshLinkDelivery, composeNoticeDelivery } from "~/features/notices/composing.server";
import { listNoticesNeedingAction, readNotice } from "~/features/notices/notices.server";
import { deliver, sweepOutbox } from "~/features/outbox/outbox.server";
import { addDays } from "~/platform/clock";
import { signWebhook } from "~/platform/mail/fake/webhooks.server";
import { action as webhook } from "~/routes/webhooks/mail";
import { read } from "~db/client.server";
import { maintenance, openMailbox, owner } from "../../harness";
import { deliveriesOf, type Family, makeFamily, send } from "./family";

const composers = {
  invitation: async () => ({ stopped: "not here" }),
  notice: composeNoticeDelivery,
  "fresh-link": composeFreshLinkDelivery,
};

/** What a worker does with each waiting delivery of a family; no worker runs beside it in this file. */
async function workAll(family: Family) {
  for (const { id } of await deliveriesOf(family)) await deliver(family.club.organisation.id, id, composers);
}
const statesOf = async (family: Family) => (await deliveriesOf(family)).map(({ state }) => state);
const inboxOf = async (email: string | null) => (await openMailbox()).inbox.list(email ?? "");

function news(
  type: string,
  emailId: string | null,
  given: { secret?: string; at?: Date; hard?: boolean } = {},
) {
  const body = JSON.stringify({
    type,
    created_at: (given.at ?? new Date()).toISOString(),
    data: {
      email_id: emailId,
      ...(given.hard === undefined ? {} : { bounce: { type: given.hard ? "Permanent" : "Transient" } }),
    },
  });
  const secret = given.secret ?? process.env.RESEND_WEBHOOK_SECRET ?? "";
  const headers = signWebhook(body, secret, `msg_${crypto.randomUUID()}`, new Date());
  return { body, headers };
}
async function tell({ body, headers }: ReturnType<typeof news>) {
  const request = new Request("http://localhost:3000/webhooks/mail", { method: "POST", body, headers });
  const answer = await webhook({ request } as unknown as Parameters<typeof webhook>[0]);
  return answer.status;
}

describe("the way of a mail", () => {
  it("waits while the mail service is down and goes once it is up", async () => {
    const { faults } = await openMailbox();
    const family = await makeFamily();
    await send(family);
    faults.setDown(true);
    await workAll(family);
    faults.setDown(false);
    const down = await deliveriesOf(family);
    expect(down.map(({ state, attempts }) => [state, attempts])).toEqual([
      ["waiting", 1],
      ["waiting", 1],
    ]);
    expect(await inboxOf(family.first.email)).toEqual([]);
    await workAll(family);
    expect(await statesOf(family)).toEqual(["sent", "sent"]);
    expect(await inboxOf(family.first.email)).toHaveLength(1);
  });

  it("sends one message when the same delivery is worked twice at once", async () => {
    await openMailbox();
    const family = await makeFamily();
    await send(family, { tell: [family.first.id] });
    await Promise.all([workAll(family), workAll(family), workAll(family)]);
    expect(await statesOf(family)).toEqual(["sent"]);
    expect(await inboxOf(family.first.email)).toHaveLength(1);
  });

  it("sends one message when the service took it and the answer was lost", async () => {
    const { faults } = await openMailbox();
    const family = await makeFamily();
    await send(family, { tell: [family.first.id] });
    faults.failNext({ fault: "lost-answer" });
    await workAll(family);
    expect(await statesOf(family)).toEqual(["waiting"]);
    await workAll(family);
    expect(await statesOf(family)).toEqual(["sent"]);
    const [mail, ...more] = await inboxOf(family.first.email);
    expect(more).toEqual([]);
    expect((await deliveriesOf(family))[0]?.provider_id).toBe(mail?.id);
  });

  it("is swept and sent once when a worker died between taking and sending", async () => {
    await openMailbox();
    const family = await makeFamily();
    await send(family, { tell: [family.first.id] });
    // What a worker leaves that is killed right after its first transaction; and its job gone with it.
    await maintenance()`update deliveries set state = 'sending', attempts = 1, next_attempt_at = now() + interval '2 minutes'
      where organisation_id = ${family.club.organisation.id}`;
    await owner()`delete from jobs.job`;
    expect(await statesOf(family)).toEqual(["sending"]);
    await maintenance()`update deliveries set next_attempt_at = now() - interval '2 minutes'
      where organisation_id = ${family.club.organisation.id}`;
    await sweepOutbox();
    const [delivery] = await deliveriesOf(family);
    const jobs = await owner()<{ data: object }[]>`select data from jobs.job where name = 'deliver'`;
    expect(jobs.map(({ data }) => data)).toContainEqual({
      organisationId: family.club.organisation.id,
      deliveryId: delivery?.id,
    });
    await Promise.all([workAll(family), workAll(family)]);
    expect(await statesOf(family)).toEqual(["sent"]);
    expect(await inboxOf(family.first.email)).toHaveLength(1);
  });

  it("gives up where trying cannot help, and asks for a call", async () => {
    const { faults } = await openMailbox();
    const family = await makeFamily();
    await send(family, { tell: [family.first.id] });
    faults.failNext({ fault: 422 });
    await workAll(family);
    expect(await statesOf(family)).toEqual(["failed"]);
    const [waiting] = await read(family.trainer, listNoticesNeedingAction);
    expect(waiting?.state).toMatchObject({ code: "failed", phoneTask: "The e-mail could not be sent." });
  });
});

describe("the news of the mail service", () => {
  async function sent() {
    await openMailbox();
    const family = await makeFamily();
    const { noticeIds } = await send(family, { tell: [family.first.id] });
    await workAll(family);
    const [delivery] = await deliveriesOf(family);
    return { family, noticeId: noticeIds[0] ?? "", mail: delivery?.provider_id ?? "" };
  }
  const stopped = async (family: Family) => {
    const [row] = await maintenance()<{ stopped: Date | null }[]>`
      select email_stopped_at as stopped from guardians where id = ${family.first.id}`;
    return row?.stopped ?? null;
  };

  it("shows delivered, and does not go back on a replay", async () => {
    const { family, noticeId, mail } = await sent();
    const delivered = news("email.delivered", mail);
    expect(await tell(delivered)).toBe(204);
    expect(await tell(delivered)).toBe(204);
    expect((await readNotice(family.trainer, noticeId)).line.state.code).toBe("delivered");
    await tell(news("email.bounced", mail, { hard: true }));
    await tell(delivered);
    expect((await readNotice(family.trainer, noticeId)).line.state.code).toBe("bounced");
  });

  it("stops mail to an address that bounced for good, and makes it a call", async () => {
    const { family, noticeId, mail } = await sent();
    await tell(news("email.bounced", mail, { hard: true }));
    expect(await stopped(family)).not.toBeNull();
    const page = await readNotice(family.trainer, noticeId);
    expect(page).toMatchObject({ mayResend: false, line: { state: { code: "bounced" } } });
    expect(page.whyNot).toContain("came back");
  });

  it("keeps writing to an address that bounced for now, and stops where mail is called junk", async () => {
    const soft = await sent();
    await tell(news("email.bounced", soft.mail, { hard: false }));
    expect(await stopped(soft.family)).toBeNull();
    const junk = await sent();
    await tell(news("email.complained", junk.mail));
    expect(await stopped(junk.family)).not.toBeNull();
  });

  it("refuses a forged or changed message", async () => {
    const { family, mail } = await sent();
    const forged = news("email.bounced", mail, {
      hard: true,
      secret: `whsec_${Buffer.alloc(24, 7).toString("base64")}`,
    });
    expect(await tell(forged)).toBe(401);
    const genuine = news("email.delivered", mail);
    expect(await tell({ ...genuine, body: genuine.body.replace("delivered", "complained") })).toBe(401);
    expect(await statesOf(family)).toEqual(["sent"]);
    expect(await stopped(family)).toBeNull();
  });

  it("asks to hear again what overtook its message, and not what is old", async () => {
    await openMailbox();
    expect(await tell(news("email.delivered", "unknown-yet"))).toBe(503);
    expect(await tell(news("email.delivered", "not-ours", { at: new Date(Date.now() - 120_000) }))).toBe(204);
  });
});

describe("what is read at the moment of sending", () => {
  async function sendAfter(change: (family: Family) => Promise<unknown>, dateOfBirth?: string) {
    await openMailbox();
    const family = await makeFamily(dateOfBirth ? { dateOfBirth } : {});
    await send(family, { tell: [family.first.id] });
    await change(family);
    await workAll(family);
    const [delivery] = await deliveriesOf(family);
    return { family, delivery, mails: await inboxOf(family.first.email) };
  }
  const setBond = (set: string) => (family: Family) =>
    maintenance().unsafe(`update guardianships set ${set} where guardian_id = '${family.first.id}'`);
  const setGuardian = (set: string) => (family: Family) =>
    maintenance().unsafe(`update guardians set ${set} where id = '${family.first.id}'`);

  it.each([
    [
      "on_hold",
      (family: Family) => maintenance()`insert into safeguarding_holds (organisation_id, id, athlete_id)
        values (${family.club.organisation.id}, ${crypto.randomUUID()}, ${family.athlete.id})`,
    ],
    [
      "withdrawn",
      ({ trainer, injury }: Family) =>
        withdrawInjury(trainer, injury.id, { version: 1, reason: "wrong_athlete" }),
    ],
    ["not_to_be_told", setBond("may_be_told = false")],
    ["limited", setBond("may_be_told = false, legal_limits = '\\x01'")],
    ["ended", setBond("ended_at = now()")],
    ["email_not_wanted", setGuardian("wants_email = false")],
    ["email_stopped", setGuardian("email_stopped_at = now()")],
    ["no_address", setGuardian("email = null")],
  ])("%s set between writing and sending stops it", async (code, change) => {
    const { delivery, mails } = await sendAfter(change);
    expect(delivery).toMatchObject({ state: "stopped", last_error: code });
    expect(mails).toEqual([]);
  });

  it("a hold that was lifted stops nothing", async () => {
    const { delivery } = await sendAfter(
      (family) => maintenance()`insert into safeguarding_holds (organisation_id, id, athlete_id, lifted_at)
        values (${family.club.organisation.id}, ${crypto.randomUUID()}, ${family.athlete.id}, now())`,
    );
    expect(delivery?.state).toBe("sent");
  });

  it("respects the eighteenth birthday, to the day", async () => {
    const { trainer } = await makeFamily();
    const years = (today: string, count: number) => `${Number(today.slice(0, 4)) - count}${today.slice(4)}`;
    const birthday = (family: Family, day: string) =>
      maintenance()`update athletes set date_of_birth = ${day} where id = ${family.athlete.id}`;
    const today = years(trainer.today, 18);
    const eve = await sendAfter((family) => birthday(family, addDays(today, 1)));
    expect(eve.delivery?.state).toBe("sent");
    const day = await sendAfter((family) => birthday(family, today));
    expect(day.delivery).toMatchObject({ state: "stopped", last_error: "of_age" });
  });

  it("is written to nobody in the first place under a hold, and says so to the clinical roles", async () => {
    const family = await makeFamily();
    const form = { tell: [family.first.id] };
    await maintenance()`insert into safeguarding_holds (organisation_id, id, athlete_id)
      values (${family.club.organisation.id}, ${crypto.randomUUID()}, ${family.athlete.id})`;
    await expect(send(family, form)).rejects.toMatchObject({
      fields: { tell: [expect.stringContaining("can not be told")] },
    });
    expect(await deliveriesOf(family)).toEqual([]);
  });
});
