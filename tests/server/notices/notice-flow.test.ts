import { beforeAll, describe, expect, it } from "vitest";
import { startWorkers } from "~/features/jobs.server";
import { noticeContentSchema } from "~/features/notices/notice-content";
import {
  listNotices,
  listNoticesNeedingAction,
  logCall,
  readNotice,
  resendNotice,
} from "~/features/notices/notices.server";
import { sendNotices } from "~/features/notices/writing.server";
import { formatDay } from "~/platform/days";
import { read } from "~db/client.server";
import { maintenance, makeSeason, openMailbox } from "../../harness";
import { bodyAreas, clinicalWords, findWords } from "../mail/clinical-words";
import { arrives, browserAt, deliveriesOf, formOf, mailTo, makeFamily, send, until } from "./family";

const url = new URL("http://localhost:3000/x/notices");

describe("from the injury to the family", () => {
  beforeAll(async () => {
    await openMailbox();
    await startWorkers();
  });

  it("goes the whole way: sent, arrives, opened, acknowledged, seen by the trainer", async () => {
    const family = await makeFamily();
    const { noticeIds } = await send(family);
    expect(noticeIds).toHaveLength(2);
    const { path } = await arrives(family.first.email);
    await arrives(family.second.email);
    const browser = browserAt(path);
    expect(await browser.get()).toMatchObject({ state: "question", triesLeft: 5 });
    const opened = await browser.answer(formatDay(family.dateOfBirth, "long"));
    expect(opened.status).toBe(302);
    for (const part of ["HttpOnly", "SameSite=Lax", "Max-Age=1800", `Path=${path}`])
      expect(opened.cookie).toContain(part);
    const page = await browser.get();
    expect(page).toMatchObject({ state: "open", acknowledged: false, urgent: false });
    if (page.state !== "open") throw new Error("not open");
    expect(page.content.childName).toBe("Quillon");
    expect(page.content.happened).toContain("the left knee");
    expect(page.content.call.phone).toBe("+44 1632 960100");
    expect((await browser.post({ intent: "acknowledge" })).status).toBe(302);
    await browser.post({ intent: "acknowledge" });
    expect(await browser.get()).toMatchObject({ acknowledged: true });

    const list = await listNotices(family.trainer, url, "all");
    const line = list.lines.find(({ guardianName }) => guardianName === "Maren Oakes");
    expect(line?.state.code).toBe("acknowledged");
    expect(list.sentence).toContain("Every family has opened a notice");
    const seen = await readNotice(family.trainer, line?.id ?? "");
    expect(seen.way.map(({ words }) => words)).toEqual([
      `Written (${family.trainer.displayName})`,
      "E-mail sent",
      "Opened by the family",
      "Acknowledged",
    ]);
  });

  it("keeps two guardians apart: each with a link of their own, one state each", async () => {
    const family = await makeFamily();
    await send(family);
    const first = await arrives(family.first.email);
    const second = await arrives(family.second.email);
    expect(first.path).not.toBe(second.path);
    const browser = browserAt(first.path);
    await browser.answer(family.dateOfBirth);
    await browser.post({ intent: "acknowledge" });
    await browser.post({ intent: "ask-call", when: "tonight after 6" });
    const page = await browser.get();
    expect(JSON.stringify(page)).not.toMatch(/Tobias|Vane|960202|second-/);
    const other = browserAt(second.path);
    await other.answer(family.dateOfBirth);
    expect(await other.get()).toMatchObject({ state: "open", acknowledged: false, callAsked: false });
    const waiting = await read(family.trainer, listNoticesNeedingAction);
    expect(waiting.map(({ guardianName, state }) => [guardianName, state.phoneTask])).toEqual([
      ["Maren Oakes", "Asks for a call."],
    ]);
    const { way } = await readNotice(family.trainer, waiting[0]?.id ?? "");
    expect(way.at(-1)).toMatchObject({ words: "Asked for a call", detail: "tonight after 6" });
  });

  it("writes nothing of the athlete and nothing clinical into any mail", async () => {
    const family = await makeFamily({ urgent: true });
    await send(family, { happened: "Quillon Zarathorn tore the knee", watchFor: "Swelling of the ankle" });
    await arrives(family.first.email);
    await arrives(family.second.email);
    const { inbox } = await openMailbox();
    const mails = inbox.list();
    expect(mails.length).toBeGreaterThanOrEqual(2);
    for (const mail of mails) {
      const links = [...(mail.text ?? "").matchAll(/https?:\/\/\S+/g)].map(([link]) => link).join(" ");
      const words = [mail.subject, (mail.text ?? "").replace(/https?:\/\/\S+/g, " "), mail.from].join("\n");
      for (const planted of [
        "Quillon",
        "Zarathorn",
        "tore",
        "ankle",
        "rupture",
        family.dateOfBirth,
        family.athlete.id,
      ])
        expect(`${mail.subject} ${mail.html} ${mail.text} ${links}`.toLowerCase()).not.toContain(
          planted.toLowerCase(),
        );
      expect(findWords(words, [...bodyAreas, ...clinicalWords])).toEqual([]);
    }
  });

  it("refuses the athlete's name and clinical words in the one line that a mail takes over", async () => {
    const family = await makeFamily();
    for (const callName of ["Quillon's trainer", "the knee desk"])
      await expect(send(family, { callName })).rejects.toMatchObject({
        fields: { callName: [expect.stringContaining("e-mail")] },
      });
    expect(await deliveriesOf(family)).toEqual([]);
  });

  it("sends once however often the form arrives, and not twice by accident", async () => {
    const family = await makeFamily();
    const input = await formOf(family);
    const other = { ...(await formOf(family)), operation: crypto.randomUUID() };
    const [one, two] = await Promise.all([
      sendNotices(family.trainer, family.injury.id, input),
      sendNotices(family.trainer, family.injury.id, input),
    ]);
    expect(two).toEqual(one);
    await expect(sendNotices(family.trainer, family.injury.id, other)).rejects.toMatchObject({
      fields: { tell: [expect.stringContaining("told of this injury already")] },
    });
    expect(await deliveriesOf(family)).toHaveLength(2);
    await send(family, { tell: [], again: [family.first.id] });
    expect(await deliveriesOf(family)).toHaveLength(3);
  });

  it("lets two trainers who press at the same moment tell a family once", async () => {
    const family = await makeFamily();
    const forms = [await formOf(family), { ...(await formOf(family)), operation: crypto.randomUUID() }];
    const results = await Promise.allSettled(
      forms.map((form) => sendNotices(family.trainer, family.injury.id, form)),
    );
    expect(results.map(({ status }) => status).sort()).toEqual(["fulfilled", "rejected"]);
    expect(await deliveriesOf(family)).toHaveLength(2);
  });

  it("asks for a call first where it is urgent, and keeps what was said sealed", async () => {
    const family = await makeFamily({ urgent: true });
    await expect(
      formOf(family, { callGuardian: undefined, callOutcome: undefined, callTold: "" }),
    ).rejects.toThrow("Say whom you phoned");
    await expect(formOf(family, { callTold: "" })).rejects.toThrow("Write down what you told them");
    const quiet = { ...(await formOf(family)), urgency: "routine" as const, callGuardian: undefined };
    await expect(sendNotices(family.trainer, family.injury.id, quiet)).rejects.toMatchObject({
      fields: { callGuardian: [expect.stringContaining("phone first")] },
    });
    const { noticeIds } = await send(family, { callTold: "Velvet marmalade: told of the knee" });
    const rows = await maintenance()<{ kind: string; detail: Buffer | null }[]>`
      select kind, detail from notice_events where notice_id in ${maintenance()(noticeIds)} and kind = 'phoned'`;
    expect(rows).toHaveLength(1);
    expect(rows[0]?.detail?.toString("latin1")).not.toContain("marmalade");
    const pages = await Promise.all(noticeIds.map((id) => readNotice(family.trainer, id)));
    const phoned = pages.find(({ line }) => line.guardianName === "Maren Oakes");
    expect(phoned?.line.state.code).toBe("phoned");
    expect(phoned?.way.some(({ detail }) => detail?.includes("marmalade"))).toBe(true);
  });

  it("seals what stands behind the link", async () => {
    const family = await makeFamily();
    const { noticeIds } = await send(family, { happened: "Velvet marmalade in the knee" });
    const [row] = await maintenance()<
      { content: Buffer }[]
    >`select content from notices where id = ${noticeIds[0] ?? ""}`;
    expect(row?.content.toString("latin1")).not.toContain("marmalade");
    const { content } = await readNotice(family.trainer, noticeIds[0] ?? "");
    expect(noticeContentSchema.parse(content).happened).toBe("Velvet marmalade in the knee");
  });

  it("puts a guardian without e-mail on the phone list until a call is logged", async () => {
    const family = await makeFamily();
    await maintenance()`update guardians set email = null where id = ${family.second.id}`;
    const { noticeIds } = await send(family, { tell: [family.second.id] });
    const id = noticeIds[0] ?? "";
    expect(await deliveriesOf(family)).toEqual([]);
    const waiting = await read(family.trainer, listNoticesNeedingAction);
    expect(waiting).toMatchObject([{ id, guardianPhone: "+44 1632 960202", state: { code: "written" } }]);
    const call = { callOutcome: "no_answer" as const, callTold: "" };
    await logCall(family.trainer, id, { ...call, operation: crypto.randomUUID() });
    expect(await read(family.trainer, listNoticesNeedingAction)).toHaveLength(1);
    const operation = crypto.randomUUID();
    const reached = { callOutcome: "reached" as const, callTold: "Told him everything.", operation };
    await logCall(family.trainer, id, reached);
    await logCall(family.trainer, id, reached);
    expect(await read(family.trainer, listNoticesNeedingAction)).toHaveLength(0);
    const { way } = await readNotice(family.trainer, id);
    expect(way.filter(({ words }) => words.startsWith("Told by phone"))).toHaveLength(1);
  });

  it("closes the links before when it is sent again", async () => {
    const family = await makeFamily();
    const { noticeIds } = await send(family, { tell: [family.first.id] });
    const before = await arrives(family.first.email);
    const operation = crypto.randomUUID();
    await resendNotice(family.trainer, noticeIds[0] ?? "", operation);
    await resendNotice(family.trainer, noticeIds[0] ?? "", operation);
    const after = await until(async () => {
      const mail = await mailTo(family.first.email);
      return mail && mail.path !== before.path && mail;
    });
    expect((await browserAt(before.path).get()).state).toBe("shut");
    const browser = browserAt(after.path);
    await browser.answer(family.dateOfBirth);
    expect((await browser.get()).state).toBe("open");
    const { inbox } = await openMailbox();
    expect(inbox.list(family.first.email ?? "")).toHaveLength(2);
  });

  it("stands under the season it was written in and under no earlier one", async () => {
    const family = await makeFamily();
    await send(family);
    const { scopes } = family.club;
    const earlier = await makeSeason(family.club.staff, {
      name: "Years ago",
      startsOn: "2015-09-01",
      endsOn: "2016-06-30",
    });
    const inSeason = (id: string) => listNotices(scopes.lead, new URL(`${url.href}?season=${id}`), "all");
    expect((await inSeason(family.club.season.id)).lines).toHaveLength(2);
    expect((await inSeason(earlier.id)).lines).toEqual([]);
  });

  it("is closed to coaches, administrators and trainers of other teams", async () => {
    const family = await makeFamily();
    const { noticeIds } = await send(family);
    const { coach, admin } = family.club.scopes;
    for (const scope of [coach, admin]) {
      expect(() => listNotices(scope, url, "all")).toThrow("Your role does not include this");
      expect(() => readNotice(scope, noticeIds[0] ?? "")).toThrow("Your role does not include this");
    }
    const elsewhere = { ...family.trainer, teams: [family.club.otherTeam.id] };
    await expect(readNotice(elsewhere, noticeIds[0] ?? "")).rejects.toMatchObject({ code: "not_found" });
    expect((await listNotices(elsewhere, url, "all")).lines).toEqual([]);
    const foreign = (await makeFamily()).trainer;
    await expect(readNotice(foreign, noticeIds[0] ?? "")).rejects.toMatchObject({ code: "not_found" });
  });
});
