import { describe, expect, it } from "vitest";
import { accountTexts } from "~/features/accounts/emails/account-texts";
import { composeInvitation } from "~/features/accounts/emails/invitation-email";
import { composePasswordReset } from "~/features/accounts/emails/password-reset-email";
import { composeVerification } from "~/features/accounts/emails/verification-email";
import { findWebAddresses, readHtmlBody } from "./read-html";
import { computeReadingGrade } from "./reading-grade";

const linkUrl = "https://haleside.example.org/door/9c1e";
const invitation = {
  language: "en" as const,
  inviter: "Iver Solheim",
  organisation: "Otterwick Secondary School",
  email: "t.brandt@example.org",
  roles: ["trainer", "coach"] as const,
  teams: ["Girls under 15", "Boys under 17"],
  linkUrl,
  expiresAt: new Date("2026-10-13T09:30:00Z"),
  timeZone: "Europe/London",
};
const toAddress = { language: "en" as const, email: "t.brandt@example.org", linkUrl };

const kinds = {
  invitation: () => composeInvitation(invitation),
  verification: () => composeVerification({ ...toAddress, validMinutes: 60 }),
  "password reset": () => composePasswordReset({ ...toAddress, validMinutes: 30 }),
};

describe.each(Object.entries(kinds))("the mail of the %s", (_name, compose) => {
  it("carries its one link in both parts and fetches nothing", async () => {
    const mail = await compose();
    expect(findWebAddresses(mail.html)).toEqual([linkUrl]);
    expect(mail.text.split("\n")).toContain(linkUrl);
    expect(mail.html).not.toMatch(/<(img|script|link|iframe)\b|url\(|@import/i);
  });

  it("names the address it is for, and what to do if it was not expected", async () => {
    const mail = await compose();
    for (const part of [readHtmlBody(mail.html), mail.text]) {
      expect(part).toContain("t.brandt@example.org");
      expect(part).toMatch(/Was it not you\?|Do you not know us\?/);
    }
  });

  it("is read at age 11 or below", async () => {
    expect(computeReadingGrade((await compose()).text)).toBeLessThanOrEqual(6);
  });
});

describe("the invitation", () => {
  it("says who invites, where, as what, to which teams and until when", async () => {
    const { subject, text } = await kinds.invitation();
    expect(subject).toBe("Join Otterwick Secondary School on Haleside");
    expect(text).toContain("Iver Solheim asks you to join Otterwick Secondary School");
    expect(text).toContain("Your role will be: athletic trainer and coach.");
    expect(text).toContain("Your teams: Girls under 15 and Boys under 17.");
    expect(text).toContain("13 October 2026 at 10:30");
  });

  it("tells all teams from listed ones, and says nothing of teams where none are listed", async () => {
    const all = await composeInvitation({ ...invitation, teams: "all" });
    expect(all.text).toContain("You will work with all teams.");
    const none = await composeInvitation({ ...invitation, teams: [] });
    expect(none.text).not.toMatch(/teams:/);
  });
});

describe("the time a link works", () => {
  it.each([
    [1, "1 minute"],
    [30, "30 minutes"],
    [60, "1 hour"],
    [90, "90 minutes"],
    [2880, "2 days"],
  ])("is %i minutes in words: %s", (minutes, words) => {
    expect(accountTexts.en.duration(minutes)).toBe(words);
  });
});
