import type { Page } from "playwright-core";
import { afterEach, beforeAll, describe, expect, it } from "vitest";
import { may } from "~/features/accounts/permissions";
import { type Access, routeAccess } from "~/features/accounts/route-access";
import { type Role, roles } from "~db/schema/codes";
import {
  makeAthlete,
  makeAvailability,
  makeClub,
  makeCoachReport,
  makeGuardian,
  makeInjury,
  makeProgramme,
  makeSession,
  makeVenue,
  makeWarmUp,
} from "../harness";
import { axe, expectNoFailures, openSite, type Site, signIn } from "../harness/browser";
import { addresses } from "../server/access/addresses";
import { type Club, fill, type Parameters, recordsOf } from "../server/access/records";

/**
 * Every page of app/routes.ts as each role opens it, in a club full of records: generated, so that a new page cannot be
 * forgotten. One browser per role stays signed in; the page is loaded once and looked at in every width.
 */

let site: Site;
let club: Club;
let parameters: Parameters;
const pages = new Map<string, Page>();

beforeAll(async () => {
  [site, club] = [await openSite(), await makeClub()];
  parameters = await recordsOf(club);
  await fillClub(club);
});
afterEach(expectNoFailures);

/** Names that are long, records with gaps, every state: what makes a page wide or full. */
async function fillClub({ staff, team, athlete }: Club) {
  const venue = await makeVenue(staff, {
    name: "The Old Mill Lane Recreation Ground, far pitch behind the pavilion",
    address: "Mill Lane, Saltings-under-Wychwood",
    emergencyNumbers: "999, then +44 1632 960199",
    defibrillator: "Pavilion, left of the door",
  });
  await makeProgramme(staff, { teamIds: [team.id] });
  const long = await makeAthlete(staff, {
    teamId: team.id,
    givenName: "Wilhelmina-Charlotte",
    familyName: "Featherstonehaugh-Cholmondeley",
    number: "2026-000-000-123",
  });
  const modified = await makeAthlete(staff, { teamId: team.id, givenName: "Runa", dateOfBirth: null });
  await makeAvailability(staff, {
    athleteId: modified.id,
    state: "modified",
    restrictions: ["no_cutting", "no_contact", "minutes_limit"],
    minutesLimit: 30,
  });
  await makeGuardian(staff, {
    athleteIds: [athlete.id, long.id],
    name: "Philippa Featherstonehaugh-Cholmondeley",
    email: "philippa.featherstonehaugh-cholmondeley.at.home@example.org",
    emailStoppedAt: new Date(),
  });
  await makeInjury(staff, {
    athleteId: long.id,
    diagnosis: "Partial tear of the anterior cruciate ligament",
    description: "Cut to the left on wet grass and went down.",
    notes: ["Swelling within two hours.", "Referred to the hospital."],
    unavailableFrom: staff.today,
  });
  await makeInjury(staff, { athleteId: athlete.id, contact: null, movement: null, tissue: null });
  await makeCoachReport(staff, { athleteId: long.id, note: "Heard a pop.", suspectedConcussion: true });
  const minutes = { [athlete.id]: 90, [modified.id]: 30, [long.id]: 0 };
  const session = await makeSession(staff, { teamId: team.id, minutes, venueId: venue.id, kind: "match" });
  await makeWarmUp(staff, { sessionId: session.id, athleteIds: [athlete.id] });
  await makeSession(staff, { teamId: team.id, state: "planned", actualMinutes: null, venueId: venue.id });
}

/** The pages; files, redirects and actions have no component. */
const patterns = addresses.filter(({ file }) => file.endsWith(".tsx")).map(({ pattern }) => pattern);
const accessOfPage = (pattern: string): Access | undefined => routeAccess[pattern]?.get;
const openTo = (role: Role) =>
  patterns.filter((pattern) => {
    const access = accessOfPage(pattern);
    return access && access !== "public" && (access === "person" || may([role], access));
  });

async function pageOf(who: Role | "nobody") {
  const known = pages.get(who);
  if (known) return known;
  const page = await site.newPage();
  pages.set(who, page);
  if (who !== "nobody") await signIn(page, club.people[who]);
  return page;
}

const widths = { desk: { width: 1280, height: 800 }, phone: { width: 390, height: 844 } };

/** How far the page can be pushed sideways at the narrowest width that is promised, and what sticks out. */
async function overflow(page: Page) {
  await page.setViewportSize({ width: 320, height: 640 });
  return page.evaluate(() => {
    const room = window.innerWidth;
    const wide = document.documentElement.scrollWidth;
    if (wide <= room) return [];
    const outside = [...document.querySelectorAll("body *")].filter(
      (element) => element.getBoundingClientRect().right > room + 0.5,
    );
    return [`${wide} px`, ...outside.slice(0, 5).map((element) => element.outerHTML.slice(0, 160))];
  });
}

/** Pages that were checked at a desk; for the next role that opens one, the phone has to do, since checking takes long. */
const checkedAtDesk = new Set<string>();

async function inspect(page: Page, pattern: string) {
  await page.setViewportSize(widths.desk);
  const answer = await page.goto(fill(pattern, parameters));
  expect(answer?.status()).toBe(200);
  // A family's page speaks in the club's name.
  expect(await page.title()).toMatch(pattern.startsWith("/families/") ? /Club 1$/ : /\S.* - Haleside$/);
  expect(await page.getByRole("heading", { level: 1 }).allTextContents()).toEqual([
    expect.stringMatching(/\S/),
  ]);
  if (!checkedAtDesk.has(pattern)) await axe(page);
  checkedAtDesk.add(pattern);
  await page.setViewportSize(widths.phone);
  await axe(page);
  expect(await overflow(page)).toEqual([]);
}

describe.each(roles)("the pages of the %s", (role) => {
  it.each(openTo(role))("%s", async (pattern) => {
    await inspect(await pageOf(role), pattern);
  });
});

describe("pages without sign-in", () => {
  const open = patterns.filter((pattern) => accessOfPage(pattern) === "public");
  it.each(open)("%s", async (pattern) => {
    await inspect(await pageOf("nobody"), pattern);
  });
});

describe("in the dark", () => {
  it.each([
    ["lead", "/:organisation/today"],
    ["lead", "/:organisation/injuries/:injury"],
    ["lead", "/:organisation/rates"],
    ["trainer", "/:organisation/injuries/new"],
    ["trainer", "/:organisation/imports/:import"],
    ["coach", "/:organisation/today"],
    ["coach", "/:organisation/sessions/:session/warm-up"],
    ["coach", "/:organisation/sessions/:session/attendance"],
  ] as const)("%s: %s", async (role, pattern) => {
    const page = await pageOf(role);
    await page.emulateMedia({ colorScheme: "dark", reducedMotion: "reduce" });
    await page.setViewportSize(widths.phone);
    await page.goto(fill(pattern, parameters));
    await axe(page);
    await page.emulateMedia({ colorScheme: "light", reducedMotion: "reduce" });
  });
});

it("would notice what sticks out at 320 px", async () => {
  const page = await pageOf("nobody");
  await page.goto("/sign-in");
  await page.locator("main").evaluate((main) => {
    main.append(Object.assign(document.createElement("p"), { textContent: "x".repeat(400) }));
    main.lastElementChild?.setAttribute("style", "white-space: nowrap; overflow-wrap: normal");
  });
  expect(await overflow(page)).not.toEqual([]);
});
