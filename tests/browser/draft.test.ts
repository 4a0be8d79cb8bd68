import { afterEach, beforeAll, expect, it } from "vitest";
import { makeClub } from "../harness";
import { closePages, openSite, type Site, signIn } from "../harness/browser";

let site: Site;
let club: Awaited<ReturnType<typeof makeClub>>;

beforeAll(async () => {
  site = await openSite();
  club = await makeClub();
});
afterEach(closePages);

it("keeps what is typed of an injury, and begins again when the draft is thrown away", async () => {
  const page = await site.newPage({ phone: true });
  await signIn(page, club.people.trainer);
  const address = `/${club.organisation.slug}/injuries/new`;
  const knee = page.getByRole("radio", { name: "Knee" });
  const swelling = page.getByRole("checkbox", { name: "Swelling already" });

  await page.goto(address);
  await page.locator("label", { hasText: /^Knee$/ }).click();
  await page.locator("label", { hasText: /^Swelling already$/ }).click();
  await page.getByText(/^Draft kept at/).waitFor();

  await page.reload();
  await page.getByText(/^Draft kept at/).waitFor();
  expect(await knee.isChecked()).toBe(true);
  expect(await swelling.isChecked()).toBe(true);

  await page.getByRole("button", { name: /^Throw the draft away/ }).click();
  await page.getByText("The first group is enough to save.").waitFor();
  expect(await knee.isChecked()).toBe(false);
  expect(await swelling.isChecked()).toBe(false);
});
