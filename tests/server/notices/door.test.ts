import { beforeAll, describe, expect, it } from "vitest";
import { withdrawInjury } from "~/features/injuries/edit-injury.server";
import { composeFreshLinkDelivery, composeNoticeDelivery } from "~/features/notices/composing.server";
import { readNotice } from "~/features/notices/notices.server";
import { deliver } from "~/features/outbox/outbox.server";
import { maintenance, openMailbox } from "../../harness";
import { browserAt, deliveriesOf, type Family, mailTo, makeFamily, pageAt, send } from "./family";

const composers = {
  invitation: async () => ({ stopped: "not here" }),
  notice: composeNoticeDelivery,
  "fresh-link": composeFreshLinkDelivery,
};
async function workAll(family: Family) {
  for (const { id } of await deliveriesOf(family)) await deliver(family.club.organisation.id, id, composers);
}

/** A family whose first guardian has the mail, and a browser at its link. */
async function atTheDoor() {
  const family = await makeFamily();
  const { noticeIds } = await send(family, { tell: [family.first.id] });
  await workAll(family);
  const path = (await mailTo(family.first.email))?.path ?? "";
  return { family, noticeId: noticeIds[0] ?? "", path, browser: browserAt(path) };
}
const eventsOf = async (noticeId: string) => {
  const rows = await maintenance()<
    { kind: string }[]
  >`select kind from notice_events where notice_id = ${noticeId} order by at`;
  return rows.map(({ kind }) => kind);
};
const expire = (noticeId: string) =>
  maintenance()`update notice_links set expires_at = now() - interval '1 minute' where notice_id = ${noticeId}`;

describe("the family's door", () => {
  beforeAll(async () => {
    await openMailbox();
  });

  it("changes nothing on a GET, however often a scanner asks", async () => {
    const { browser, noticeId } = await atTheDoor();
    const snapshot = () => maintenance()`select n.*, l.* from notices n join notice_links l
      on l.organisation_id = n.organisation_id and l.notice_id = n.id where n.id = ${noticeId}`;
    const before = await snapshot();
    for (let count = 0; count < 8; count += 1)
      expect(await browser.get()).toMatchObject({ state: "question", triesLeft: 5 });
    expect(await snapshot()).toEqual(before);
    expect(await eventsOf(noticeId)).toEqual(["written"]);
    const page = await browser.get();
    expect(JSON.stringify(page)).not.toMatch(/Quillon|knee|Zarathorn/);
  });

  it("opens by the date of birth as people write it, again and again until it expires", async () => {
    const { browser, family, noticeId } = await atTheDoor();
    const [year = "", month = "", day = ""] = family.dateOfBirth.split("-");
    for (const typed of [
      `${Number(day)} ${Number(month)} ${year}`,
      `${day}/${month}/${year}`,
      family.dateOfBirth,
    ]) {
      browser.giveCookie("");
      expect((await browser.get()).state).toBe("question");
      expect((await browser.answer(typed)).status).toBe(302);
      expect((await browser.get()).state).toBe("open");
    }
    await expire(noticeId);
    expect((await browser.get()).state).toBe("shut");
  });

  it("locks at the fifth wrong answer for good, and takes no try for what is no day", async () => {
    const { browser, family, noticeId } = await atTheDoor();
    expect((await browser.answer("my birthday")).errors?.fields.answer?.[0]).toContain("not a day");
    for (const left of [4, 3, 2, 1]) {
      const { status, errors } = await browser.answer("1 1 2001");
      expect(status).toBe(400);
      expect(errors?.fields.answer?.[0]).toContain(`${left} more`);
    }
    expect((await browser.answer("1 1 2001")).status).toBe(423);
    expect((await browser.answer(family.dateOfBirth)).status).toBe(423);
    expect(await browser.get()).toMatchObject({ state: "shut", phone: "+44 1632 960100" });
    expect(await eventsOf(noticeId)).toEqual(["written", "locked"]);
    const { way } = await readNotice(family.trainer, noticeId);
    expect(way.at(-1)?.words).toBe("Link locked after 5 wrong answers");
  });

  it("counts five in all when twenty guess at the same moment", async () => {
    const { path, noticeId, family } = await atTheDoor();
    const answers = await Promise.all(Array.from({ length: 20 }, () => browserAt(path).answer("2 2 2002")));
    expect(answers.filter(({ status }) => status === 400)).toHaveLength(4);
    expect(answers.filter(({ status }) => status === 423)).toHaveLength(16);
    const [link] = await maintenance()<
      { tries: number }[]
    >`select tries from notice_links where notice_id = ${noticeId}`;
    expect(link?.tries).toBe(5);
    expect((await browserAt(path).answer(family.dateOfBirth)).status).toBe(423);
    expect((await eventsOf(noticeId)).filter((kind) => kind === "locked")).toHaveLength(1);
  });

  it("closes an opening after half an hour, and says so when a button is pressed late", async () => {
    const { browser, family, noticeId } = await atTheDoor();
    await browser.answer(family.dateOfBirth);
    await maintenance()`update notice_links set open_until = now() - interval '1 second' where notice_id = ${noticeId}`;
    expect((await browser.get()).state).toBe("question");
    const late = await browser.post({ intent: "acknowledge" });
    expect(late.errors?.form?.[0]).toContain("30 minutes");
    expect(await eventsOf(noticeId)).toEqual(["written", "opened"]);
  });

  it("does nothing without the cookie, or with another notice's", async () => {
    const one = await atTheDoor();
    const other = await atTheDoor();
    await one.browser.answer(one.family.dateOfBirth);
    for (const cookie of ["", one.browser.takeCookie(), "haleside_notice=rubbish"]) {
      other.browser.giveCookie(cookie);
      expect((await other.browser.get()).state).toBe("question");
      expect((await other.browser.post({ intent: "acknowledge" })).status).toBe(409);
    }
    expect(await eventsOf(other.noticeId)).toEqual(["written"]);
  });

  it("opens no notice with another one's token, nor in another organisation", async () => {
    const one = await atTheDoor();
    const other = await atTheDoor();
    const secret = one.browser.part.split(".")[1] ?? "";
    const here = one.family.club.organisation.id;
    const elsewhere = other.family.club.organisation.id;
    expect((await pageAt(here, one.browser.part)).state).toBe("question");
    for (const [organisation, part] of [
      [elsewhere, one.browser.part],
      [elsewhere, `${other.noticeId}.${secret}`],
      [here, `${other.noticeId}.${secret}`],
      [here, `${one.noticeId}.${"A".repeat(43)}`],
      [here, one.noticeId],
      [here, "x.y"],
      ["no-organisation", one.browser.part],
      [crypto.randomUUID(), one.browser.part],
    ] as const)
      await expect(pageAt(organisation, part), part).rejects.toMatchObject({ code: "not_found" });
  });

  it("keeps another notice of the same athlete closed to the first one's token", async () => {
    const family = await makeFamily();
    const { noticeIds } = await send(family);
    await workAll(family);
    const path = (await mailTo(family.first.email))?.path ?? "";
    const [own = "", secret = ""] = path.split("/")[3]?.split(".") ?? [];
    const sibling = noticeIds.find((id) => id !== own) ?? "";
    await expect(pageAt(family.club.organisation.id, `${sibling}.${secret}`)).rejects.toMatchObject({
      code: "not_found",
    });
  });

  it("sends a fresh link to the address on file when expired, with the same answer whatever", async () => {
    const { browser, family, noticeId, path } = await atTheDoor();
    await expire(noticeId);
    expect(await browser.get()).toMatchObject({ state: "shut", phone: "+44 1632 960100" });
    for (let count = 0; count < 5; count += 1)
      expect((await browser.post({ intent: "fresh-link" })).status).toBe(302);
    await workAll(family);
    const { inbox } = await openMailbox();
    // The first mail and three new links: who asks on is not answered any more.
    expect(inbox.list(family.first.email ?? "")).toHaveLength(4);
    const fresh = (await mailTo(family.first.email))?.path ?? "";
    expect(fresh).not.toBe(path);
    const again = browserAt(fresh);
    await again.answer(family.dateOfBirth);
    expect((await again.get()).state).toBe("open");
    expect((await browser.get()).state).toBe("shut");
  });

  it("answers alike, and sends nothing, when the guardian may no longer be told", async () => {
    const { browser, family, noticeId } = await atTheDoor();
    await expire(noticeId);
    await maintenance()`update guardianships set may_be_told = false where guardian_id = ${family.first.id}`;
    expect((await browser.post({ intent: "fresh-link" })).status).toBe(302);
    await workAll(family);
    const { inbox } = await openMailbox();
    expect(inbox.list(family.first.email ?? "")).toHaveLength(1);
  });

  it("closes a page already sent when a hold is set, in the words of any closed link", async () => {
    const { browser, family } = await atTheDoor();
    await browser.answer(family.dateOfBirth);
    expect((await browser.get()).state).toBe("open");
    await maintenance()`insert into safeguarding_holds (organisation_id, id, athlete_id)
      values (${family.club.organisation.id}, ${crypto.randomUUID()}, ${family.athlete.id})`;
    expect(Object.keys(await browser.get()).sort()).toEqual(["hours", "organisation", "phone", "state"]);
    expect((await browser.post({ intent: "acknowledge" })).status).toBe(409);
    expect((await browser.answer(family.dateOfBirth)).status).toBe(423);
  });

  it("closes a page already sent when the injury turns out to be of another child", async () => {
    const { browser, family, noticeId } = await atTheDoor();
    await browser.answer(family.dateOfBirth);
    await withdrawInjury(family.trainer, family.injury.id, { version: 1, reason: "wrong_athlete" });
    expect(Object.keys(await browser.get()).sort()).toEqual(["hours", "organisation", "phone", "state"]);
    expect((await browser.answer(family.dateOfBirth)).status).toBe(423);
    const page = await readNotice(family.trainer, noticeId);
    expect(page).toMatchObject({ mayResend: false, whyNot: expect.stringContaining("recorded in error") });
  });

  it("stops e-mails of this guardian alone, and the clinical roles see it", async () => {
    const { browser, family, noticeId } = await atTheDoor();
    expect((await browser.post({ intent: "stop-mail" })).status).toBe(302);
    await browser.post({ intent: "stop-mail" });
    const rows = await maintenance()<{ id: string; wants: boolean }[]>`
      select id, wants_email as wants from guardians where id in (${family.first.id}, ${family.second.id})`;
    expect(Object.fromEntries(rows.map(({ id, wants }) => [id, wants]))).toEqual({
      [family.first.id]: false,
      [family.second.id]: true,
    });
    const page = await readNotice(family.trainer, noticeId);
    expect(page.mayResend).toBe(false);
    expect(page.way.filter(({ words }) => words === "Stopped e-mails")).toHaveLength(1);
  });

  it("records every deed, without a word of it", async () => {
    const { browser, family, noticeId } = await atTheDoor();
    await browser.answer(family.dateOfBirth);
    await browser.post({ intent: "acknowledge" });
    await browser.post({ intent: "ask-call", when: "velvet marmalade" });
    const rows = await maintenance()<{ action: string; fields: object; acting_as: string }[]>`
      select action, fields, acting_as from audit_events where subject_id = ${noticeId} and acting_as = 'guardian' order by at`;
    expect(rows.map(({ action }) => action)).toEqual([
      "notice.open",
      "notice.acknowledge",
      "notice.ask-call",
    ]);
    expect(JSON.stringify(rows)).not.toContain("marmalade");
  });
});
