/**
 * Takes the README's pictures from a running demo:
 *
 *   npx tsx tests/browser/pictures/take.ts http://localhost:3000 http://127.0.0.1:<inbox port>
 *
 * It sends one notice to an invented family, so take them on a demo you can reset.
 */
import { fileURLToPath } from "node:url";
import { chromium, type Page } from "playwright-core";
import { listDemoPeople } from "~db/seed/load/demo-people";
import { buildScenario } from "~db/seed/scenario";

const [base = "http://localhost:3000", inbox = ""] = process.argv.slice(2);
const here = (name: string) => fileURLToPath(new URL(`./${name}.png`, import.meta.url));
const people = listDemoPeople(buildScenario());
const club = "/marram-bay";
const desk = { width: 1280, height: 900 };
const phone = { width: 390, height: 844 };

const browser = await chromium.launch({
  executablePath: process.env.CHROMIUM_PATH ?? "/usr/bin/chromium",
  args: ["--no-sandbox", "--disable-gpu", "--disable-background-networking", "--hide-scrollbars"],
});

async function open(role: string | null, viewport: { width: number; height: number }): Promise<Page> {
  const page = await (
    await browser.newContext({ baseURL: base, viewport, locale: "en-GB", reducedMotion: "reduce" })
  ).newPage();
  const person = people.find((one) => one.role === role);
  if (!person) return page;
  await page.goto("/sign-in");
  await page.getByLabel("E-mail").fill(person.email);
  await page.getByLabel("Password").fill(person.password);
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.waitForURL("**/today");
  return page;
}

async function shoot(page: Page, name: string, height?: number) {
  await page.waitForLoadState("networkidle");
  const width = page.viewportSize()?.width ?? desk.width;
  // On a page taken whole, what is fixed to the window's edge would lie across the middle.
  for (const nav of await page.locator("nav.bottom-nav").all())
    await nav.evaluate((element) => element.style.setProperty("position", "static"));
  await page.screenshot({
    path: here(name),
    fullPage: true,
    ...(height ? { clip: { x: 0, y: 0, width, height } } : {}),
  });
}

const lead = await open("lead", desk);
await lead.goto(`${club}/rates?by=sex`);
await shoot(lead, "rates", 1100);

const trainer = await open("trainer", desk);
await shoot(trainer, "today", 1000);

const coach = await open("coach", phone);
await coach.goto(`${club}/sessions`);
await coach.locator('a[href*="/sessions/"]:not([href$="/new"])').first().click();
await coach.waitForURL(/sessions\/[0-9a-f-]{36}/);
await coach.goto(`${new URL(coach.url()).pathname.replace(/\/$/, "")}/warm-up`);
await shoot(coach, "warm-up", 1000);

const touchline = await open("trainer", phone);
await touchline.goto(`${club}/injuries/new`);
const draft = touchline.getByRole("button", { name: /^Throw the draft away/ });
if (await draft.isVisible()) await draft.click();
await touchline.getByText("The first group is enough to save.").waitFor();
const search = touchline.getByRole("combobox", { name: "Athlete" });
await search.click();
await search.pressSequentially("Nia");
await touchline.getByRole("option", { name: /Nia/ }).first().waitFor();
await search.press("ArrowDown");
await search.press("Enter");
await touchline
  .locator("main form label", { hasText: /earlier/i })
  .first()
  .click();
for (const words of ["Knee", "Right", "Cutting", "Pop felt or heard", "Swelling already"])
  await touchline
    .locator("main form label", { hasText: new RegExp(`^${words}$`) })
    .first()
    .click();
await touchline.getByRole("group", { name: "Could they continue?" }).locator("label").last().click();
await touchline.mouse.move(0, 0);
await shoot(touchline, "injury", 1950);

if (inbox) {
  await trainer.goto(`${club}/today`);
  await trainer
    .getByRole("link", { name: /^Tell the family/ })
    .first()
    .click();
  await trainer.waitForURL("**/notice");
  const urgent = (await trainer.getByText("Phone first").count()) > 0;
  if (urgent) {
    await trainer.getByRole("group", { name: "Whom did you phone?" }).locator("label").first().click();
    await trainer.locator("label", { hasText: /^Yes, we spoke$/ }).click();
    await trainer.getByLabel("What did you tell them?").fill("What happened and what to do now.");
  }
  await trainer.getByRole("button", { name: "Send now" }).click();
  await trainer.waitForURL(/\/notices\/[0-9a-f-]{36}/);
  const name = (await trainer.locator("h1").textContent()) ?? "";
  let link = "";
  for (let tries = 0; tries < 60 && !link; tries += 1) {
    const { mails } = (await (await fetch(`${inbox}/inbox.json`)).json()) as { mails: { text: string }[] };
    link = /https?:\/\/\S+\/families\/[^\s)>?]+/.exec(mails[0]?.text ?? "")?.[0] ?? "";
    if (!link) await new Promise((resolve) => setTimeout(resolve, 500));
  }
  const scenario = buildScenario();
  const athlete = scenario.athletes.find((one) => name.includes(`${one.givenName} ${one.familyName}`));
  const guardian = await open(null, phone);
  await guardian.goto(new URL(link).pathname);
  await guardian.getByLabel("When was the athlete born?").fill(athlete?.dateOfBirth ?? "");
  await guardian.getByRole("button", { name: "Open the news" }).click();
  await guardian.getByRole("heading", { name: /^News about/ }).waitFor();
  await shoot(guardian, "guardian", 1500);
}
await browser.close();
