import { afterEach, expect, it } from "vitest";
import { athleteSchema } from "~/features/roster/roster.schema";
import { editAthlete } from "~/features/roster/roster.server";
import { maintenance, makeClub } from "../harness";
import { axe, closePages, openSite, signIn } from "../harness/browser";

afterEach(closePages);

it.each([
  ["with script", true],
  ["without script", false],
])("keeps what the slower of two typed, and lets them save again, %s", async (_how, script) => {
  const site = await openSite();
  const club = await makeClub();
  const page = await site.newPage({ script, expectFailures: [/status of 409/] });
  await signIn(page, club.people.trainer);
  await page.goto(`/${club.organisation.slug}/roster/${club.athlete.id}/edit`);
  await page.getByLabel("Given name").fill("Slower");
  const faster = athleteSchema.parse({ givenName: "Faster", familyName: "Ashdown", sex: "female" });
  await editAthlete(club.scopes.lead, club.athlete.id, 1, faster);
  await page.getByRole("button", { name: "Save" }).click();
  await page.getByText("What you typed is still here").first().waitFor();
  expect(await page.getByLabel("Given name").inputValue()).toBe("Slower");
  if (script) await axe(page);
  const nameNow = async () =>
    (await maintenance()`select given_name from athletes where id = ${club.athlete.id}`)[0]?.given_name;
  expect(await nameNow()).toBe("Faster");
  await page.getByRole("button", { name: "Save" }).click();
  await page.waitForURL(`**/roster/${club.athlete.id}`);
  expect(await nameNow()).toBe("Slower");
});
