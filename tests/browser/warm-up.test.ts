import type { Page } from "playwright-core";
import { beforeAll, describe, expect, it } from "vitest";
import { openWarmUp } from "~/features/warm-ups/warm-ups.server";
import { read } from "~db/client.server";
import { makeAthlete, makeAvailability, makeClub, makeProgramme, makeSession, makeVenue } from "../harness";
import { axe, openSite, type Site, signIn } from "../harness/browser";

let site: Site;
let club: Awaited<ReturnType<typeof makeClub>>;

beforeAll(async () => {
  site = await openSite();
  club = await makeClub();
  const teamId = club.team.id;
  await makeProgramme(club.staff, { teamIds: [teamId] });
  const modified = await makeAthlete(club.staff, { teamId, givenName: "Runa", familyName: "Penhallow" });
  await makeAvailability(club.scopes.lead, {
    athleteId: modified.id,
    state: "modified",
    restrictions: ["straight_running_only"],
  });
  const out = await makeAthlete(club.staff, { teamId, givenName: "Tova", familyName: "Inchmere" });
  await makeAvailability(club.scopes.lead, { athleteId: out.id, state: "unavailable" });
});

async function newSession() {
  const venue = await makeVenue(club.staff);
  return makeSession(club.staff, {
    teamId: club.team.id,
    state: "planned",
    surface: "artificial_turf",
    venueId: venue.id,
  });
}

const addressOf = (id: string) => `/${club.organisation.slug}/sessions/${id}/warm-up`;
const stateOf = async (id: string) =>
  (await read(club.scopes.coach, (tx) => openWarmUp(tx, club.scopes.coach, id))).state;

/** Controls of the page under 56 px in either direction, by their words. */
const smallTargets = (page: Page) =>
  page.locator("main").evaluate((main) => {
    const targets = main.querySelectorAll(
      "form label:has(input[type=checkbox]), form button:not(.hidden), form summary, form a, form input:not(.sr-only):not([type=hidden]):not([type=radio])",
    );
    return [...targets]
      .filter((target) => target.getClientRects().length > 0)
      .map((target) => ({ words: target.textContent, ...target.getBoundingClientRect().toJSON() }))
      .filter(({ width, height }) => width < 56 || height < 56)
      .map(({ words, width, height }) => `${words} ${width}x${height}`);
  });

describe("the warm-up on a phone", () => {
  it("saves each tick by itself, in targets of 56 px", async () => {
    const session = await newSession();
    const page = await site.newPage({ phone: true });
    await signIn(page, club.people.coach);
    await page.goto(addressOf(session.id));
    expect(await smallTargets(page)).toEqual([]);
    await axe(page);
    const running = page.getByRole("checkbox", { name: "Running preparation" });
    await running.check();
    await page.getByRole("checkbox", { name: "Balance" }).check();
    await page.getByText("All saved.").waitFor();
    expect(await stateOf(session.id)).toMatchObject({ blocks: ["running", "balance"] });
    await page.reload();
    expect(await running.isChecked()).toBe(true);
    expect(await page.getByRole("checkbox", { name: /Tova Inchmere/ }).isChecked()).toBe(false);
    expect(await page.getByRole("checkbox", { name: /Runa Penhallow/ }).isChecked()).toBe(true);
  });

  it("ticks everything by one touch and takes it back", async () => {
    const session = await newSession();
    const page = await site.newPage({ phone: true });
    await signIn(page, club.people.coach);
    await page.goto(addressOf(session.id));
    await page.getByRole("button", { name: "All blocks, everyone", exact: true }).click();
    await page.getByText("All saved.").waitFor();
    expect((await stateOf(session.id)).blocks).toHaveLength(5);
    await page.getByRole("button", { name: /^Undo/ }).click();
    await expect.poll(async () => (await stateOf(session.id)).recorded).toBe(false);
  });

  it("keeps what was ticked without signal and sends it when there is some", async () => {
    const session = await newSession();
    const page = await site.newPage({
      phone: true,
      expectFailures: [/ERR_INTERNET_DISCONNECTED|ERR_FAILED/],
    });
    await signIn(page, club.people.coach);
    await page.goto(addressOf(session.id));
    await page.context().setOffline(true);
    await page.getByRole("checkbox", { name: "Running preparation" }).check();
    await page.getByText(/No signal\. 1 entry waits/).waitFor();
    await page.getByRole("checkbox", { name: "Strength" }).check();
    await page.getByText(/2 entries wait/).waitFor();
    await page.context().setOffline(false);
    await page.getByText("All saved.").waitFor();
    expect((await stateOf(session.id)).blocks).toEqual(["running", "strength"]);
  });

  it("works without script, in one form", async () => {
    const session = await newSession();
    const page = await site.newPage({ phone: true, script: false });
    await signIn(page, club.people.coach);
    await page.goto(addressOf(session.id));
    await page.getByRole("checkbox", { name: "Running preparation" }).check();
    await page.getByRole("checkbox", { name: /Runa Penhallow/ }).uncheck();
    await page.getByRole("textbox", { name: "Minutes" }).fill("12");
    await page.getByRole("button", { name: "Save the warm-up" }).click();
    await page.getByText(/^Saved by/).waitFor();
    const state = await stateOf(session.id);
    expect(state).toMatchObject({ blocks: ["running"], minutes: 12, athleteIds: [club.athlete.id] });
  });
});
