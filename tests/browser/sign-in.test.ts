import { afterEach, beforeAll, expect, it } from "vitest";
import { makeClub } from "../harness";
import { axe, closePages, openSite, type Site, signIn } from "../harness/browser";

let site: Site;
let club: Awaited<ReturnType<typeof makeClub>>;

beforeAll(async () => {
  site = await openSite();
  club = await makeClub();
});
afterEach(closePages);

it.each([
  ["at a desk", {}],
  ["on a phone in the dark", { phone: true, dark: true }],
  ["without script", { script: false }],
] as const)("signs in %s", async (_where, options) => {
  const page = await site.newPage(options);
  await page.goto("/sign-in");
  // Without script the checker cannot run in the page either.
  if (!("script" in options)) await axe(page);
  await signIn(page, club.people.coach);
  expect(new URL(page.url()).pathname).toBe(`/${club.organisation.slug}/today`);
});

it("says what was wrong and keeps the address", async () => {
  const page = await site.newPage({ expectFailures: [/status of 400/] });
  await page.goto("/sign-in");
  await page.getByLabel("E-mail").fill(club.people.coach.email);
  await page.getByLabel("Password").fill("not the right one at all");
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.getByText("do not belong together").first().waitFor();
  expect(await page.getByLabel("E-mail").inputValue()).toBe(club.people.coach.email);
  await axe(page);
});

it("brings a person back to the page they asked for", async () => {
  const page = await site.newPage();
  await page.goto(`/${club.organisation.slug}/sessions`);
  await page.getByLabel("E-mail").fill(club.people.coach.email);
  await page.getByLabel("Password").fill(club.people.coach.password);
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.waitForURL(`**/${club.organisation.slug}/sessions`);
});
