import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { composeFreshLink } from "~/features/notices/emails/fresh-link-email";
import { composeNotice } from "~/features/notices/emails/notice-email";
import type { ComposedMail } from "~/platform/mail/email-layout";
import { bodyAreas, clinicalWords, findWords } from "./clinical-words";
import { findWebAddresses, readHtmlBody } from "./read-html";
import { computeReadingGrade } from "./reading-grade";

const props = {
  language: "en" as const,
  organisation: "Marram Bay Athletic",
  urgent: false,
  day: "2026-10-06",
  contact: { name: "Rhoda Penhale", phone: "01632 960 123" },
  linkUrl: "https://haleside.example.org/n/7f3a/kJ8w1Zq0VxTt3mYb7RrLd9sXc2PfUhA4eGnQoWi6yM",
  linkExpiresAt: new Date("2026-10-09T17:00:00Z"),
  timeZone: "Europe/London",
  stopUrl: "https://haleside.example.org/n/7f3a/stop",
};

const everyPart = (mail: ComposedMail) =>
  [mail.subject, readHtmlBody(mail.html), mail.html, mail.text].join("\n");

const kinds = {
  "urgent notice": (more: object = {}) => composeNotice({ ...props, ...more, urgent: true }),
  "ordinary notice": (more: object = {}) => composeNotice({ ...props, ...more }),
  "fresh link": (more: object = {}) => composeFreshLink({ ...props, ...more }),
};

describe.each(Object.entries(kinds))("the mail of the %s", (_name, compose) => {
  it("says whom to call, carries both links and tells when the link ends, in both parts", async () => {
    const mail = await compose();
    for (const part of [readHtmlBody(mail.html), mail.text]) {
      expect(part).toContain("Rhoda Penhale");
      expect(part).toContain("01632 960 123");
      expect(part).toContain("9 October 2026 at 18:00");
      expect(part).toContain("Not sure that this came from us?");
    }
    expect(findWebAddresses(mail.html)).toEqual([props.linkUrl, props.stopUrl].sort());
    expect(mail.text.split("\n")).toEqual(expect.arrayContaining([props.linkUrl, props.stopUrl]));
    expect(mail.html).toContain('href="tel:01632960123"');
    expect(mail.html).toContain('lang="en"');
  });

  it("fetches nothing, tracks nothing, runs nothing", async () => {
    const { html } = await compose();
    expect(html).not.toMatch(/<(img|script|iframe|object|embed|video|audio|picture|link|form|svg)\b/i);
    expect(html).not.toMatch(/url\(|@import|@font-face|\bon\w+=/i);
  });

  it("is light and dark", async () => {
    const { html } = await compose();
    expect(html).toContain('<meta name="color-scheme" content="light dark"');
    expect(html).toContain("@media (prefers-color-scheme: dark)");
  });

  it("is read at age 11 or below", async () => {
    const mail = await compose();
    expect(computeReadingGrade(mail.text)).toBeLessThanOrEqual(6);
  });

  it("holds no body area and no clinical word", async () => {
    const mail = await compose();
    const words = [mail.subject, readHtmlBody(mail.html), mail.text].join("\n");
    expect(findWords(words, [...bodyAreas, ...clinicalWords])).toEqual([]);
  });

  it("lets nothing out of a record that is handed to it by mistake", async () => {
    // Made-up names of at least six letters cannot be part of a common word of the mail by chance.
    const name = fc.string({
      unit: fc.constantFrom(..."bcdfghjklmnpqrstvwxzäéøł"),
      minLength: 6,
      maxLength: 14,
    });
    const record = fc.record({
      athlete: fc.record({ givenName: name, familyName: name }),
      bodyArea: fc.constantFrom(...bodyAreas),
      diagnosis: fc.constantFrom(...clinicalWords),
      note: name,
    });
    await fc.assert(
      fc.asyncProperty(record, async (planted) => {
        const mail = await compose({
          ...planted,
          athleteName: planted.athlete.givenName,
          children: planted.note,
        });
        const all = everyPart(mail);
        const texts = [mail.subject, readHtmlBody(mail.html), mail.text].join("\n");
        const names = [planted.athlete.givenName, planted.athlete.familyName, planted.note];
        expect(names.filter((one) => all.includes(one))).toEqual([]);
        expect(findWords(texts, [planted.bodyArea, planted.diagnosis])).toEqual([]);
      }),
      { numRuns: 60 },
    );
  });

  it("keeps hostile names of an organisation as text, on one line in the subject", async () => {
    const mail = await compose({
      organisation: 'Bay\r\nBcc: x@example.org <script>alert("1")</script> & Sons',
    });
    expect(mail.subject).not.toMatch(/[\r\n]/);
    expect(mail.html).not.toContain("<script");
    expect(mail.text).toContain('<script>alert("1")</script> & Sons');
  });

  it.each([
    { linkUrl: "javascript:alert(1)" },
    { linkUrl: "/n/relative" },
    { stopUrl: "" },
    { contact: { name: "Rhoda Penhale", phone: "ask the office" } },
    { timeZone: "Marram/Bay" },
    { linkExpiresAt: new Date(Number.NaN) },
  ])("refuses what would make a useless mail: %j", async (bad) => {
    await expect(compose(bad)).rejects.toThrow();
  });

  it("writes English, and says so, to a reader whose language has no texts yet", async () => {
    const mail = await compose({ language: "cy" });
    expect(mail.html).toContain('lang="en"');
    expect(mail.text).toContain("Call us on a number that you know.");
  });
});

describe("urgency", () => {
  it("asks for a call now, in the subject, the heading and the first lines", async () => {
    const mail = await kinds["urgent notice"]();
    expect(mail.subject).toBe("Urgent: please call Marram Bay Athletic now");
    expect(mail.text).toContain("If your phone rings, please answer it.");
    expect(mail.text.indexOf("01632 960 123")).toBeLessThan(mail.text.indexOf(props.linkUrl));
  });

  it("says plainly when it is not urgent", async () => {
    const mail = await kinds["ordinary notice"]();
    expect(mail.text).toContain("This is not urgent.");
    expect(mail.text.toLowerCase()).not.toContain("call us now");
  });

  it("names the organisation's date of the news", async () => {
    expect((await kinds["ordinary notice"]()).text).toContain("6 October 2026");
    await expect(composeNotice({ ...props, day: "06/10/2026" })).rejects.toThrow(/calendar date/);
    await expect(composeNotice({ ...props, day: "2026-02-30" })).rejects.toThrow(/calendar date/);
  });

  it("tells the end of the link in the organisation's time zone", async () => {
    const mail = await composeNotice({ ...props, timeZone: "Pacific/Auckland" });
    expect(mail.text).toContain("10 October 2026 at 06:00");
  });
});

describe("the scan itself", () => {
  it("finds what it looks for, and nothing within other words", () => {
    expect(findWords("Her left KNEES and a Torn\nligament.", ["knee", "torn", "ligament"])).toHaveLength(3);
    expect(findWords("anterior\ncruciate", ["anterior cruciate"])).toHaveLength(1);
    expect(findWords("Please use the ship's shinier office", ["hip", "shin", "ice"])).toEqual([]);
  });
});
