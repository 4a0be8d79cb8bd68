import { fileURLToPath } from "node:url";
import type { Page } from "playwright-core";
import { expect } from "vitest";
import { axe, type Site } from "../../harness/browser";

const samples = fileURLToPath(new URL("../../../imports/", import.meta.url));
export const password = "seven windy harbour gulls";

/** Opens an address and checks the page as it stands. */
export async function visit(page: Page, path: string) {
  await page.goto(path);
  await axe(page);
}

/** The newest mail to an address, once it has come; its first link of ours. */
export async function linkInMail(site: Site, to: string, subject: RegExp): Promise<string> {
  const found = await expect
    .poll(async () => (await site.mails(to)).find((mail) => subject.test(mail.subject)), {
      timeout: 30_000,
      interval: 250,
    })
    .toBeTruthy()
    .then(async () => (await site.mails(to)).find((mail) => subject.test(mail.subject)));
  const link = new RegExp(`${site.origin}/[^\\s)>\\]]+`).exec(found?.text ?? "")?.[0];
  if (!link) throw new Error(`No link in the mail to ${to}`);
  return link;
}

/** Accepts an invitation by its mailed link and gives the new person's own browser, signed in. */
export async function accept(site: Site, email: string, options: { phone?: boolean } = {}): Promise<Page> {
  const link = await linkInMail(site, email, /^Join /);
  const page = await site.newPage(options);
  await visit(page, link);
  await page.getByLabel("Password").fill(password);
  await page.getByRole("button", { name: "Accept the invitation" }).click();
  await page.waitForURL("**/today");
  await axe(page);
  return page;
}

type Invitee = { name: string; email: string; role: string };

/** The administrator invites somebody for all teams. */
export async function inviteFromPeople(page: Page, slug: string, { name, email, role }: Invitee) {
  await visit(page, `/${slug}/settings/people`);
  await page.getByLabel("Name", { exact: true }).fill(name);
  await page.getByLabel("E-mail address").fill(email);
  const form = page.locator("form", { has: page.getByRole("button", { name: "Send the invitation" }) });
  await form.locator("label", { hasText: new RegExp(`^${role}$`) }).click();
  await form.locator("label", { hasText: /^All teams$/ }).click();
  await form.getByRole("button", { name: "Send the invitation" }).click();
  await page.getByText("The invitation is on its way.").waitFor();
}

/** Uploads a sample file, answers what the page asks, and imports it. */
export async function importFile(page: Page, slug: string, kind: "roster" | "exposure", file: string) {
  await visit(page, `/${slug}/imports/new?kind=${kind}`);
  await page.locator('input[type="file"]').setInputFiles(`${samples}${kind}/samples/${file}`);
  await page.getByRole("button", { name: "Read the file" }).click();
  await page.waitForURL(/\/imports\/[0-9a-f-]{36}/);
  const answer = page.getByRole("button", { name: "Show the preview" });
  const commit = page.getByRole("button", { name: /^Import \d+ rows?$/ });
  await answer.or(commit).first().waitFor();
  await axe(page);
  if (await answer.isVisible()) {
    await answer.click();
    await commit.waitFor();
    await axe(page);
  }
  await expect.poll(() => page.getByText("No row is rejected.").count()).toBe(1);
  await commit.click();
  await page.getByText("Undo this import").waitFor();
  await axe(page);
}

export type FirstGroup = {
  athlete: string;
  day: string;
  time: string;
  area: string;
  side: string;
  movement?: string;
  signs?: string[];
};

/** The athletic trainer logs an injury from its first group. The athlete could not continue. */
export async function logInjury(page: Page, slug: string, injury: FirstGroup): Promise<string> {
  await visit(page, `/${slug}/injuries/new`);
  const search = page.getByRole("combobox", { name: "Athlete" });
  await search.click();
  await search.pressSequentially(injury.athlete);
  await page.getByRole("option", { name: injury.athlete }).first().waitFor();
  await search.press("ArrowDown");
  await search.press("Enter");
  const choose = (words: string) =>
    page
      .locator("main form label", { hasText: new RegExp(`^${words}$`) })
      .first()
      .click();
  await page
    .locator("main form label", { hasText: /earlier/i })
    .first()
    .click();
  await page.getByRole("textbox", { name: "Day" }).fill(injury.day);
  await page.getByLabel("Time").fill(injury.time);
  await choose(injury.area);
  await choose(injury.side);
  if (injury.movement) await choose(injury.movement);
  const group = (legend: string) => page.getByRole("group", { name: legend });
  await group("Could they continue?").locator("label", { hasText: /^No$/ }).click();
  await group("Suspected concussion?").locator("label", { hasText: /^No$/ }).click();
  for (const sign of injury.signs ?? []) await choose(sign);
  await axe(page);
  await page.getByRole("button", { name: /^Save/ }).click();
  await page.waitForURL(/\/injuries\/[0-9a-f-]{36}/);
  await axe(page);
  return /injuries\/([0-9a-f-]{36})/.exec(page.url())?.[1] ?? "";
}
