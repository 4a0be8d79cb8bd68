import type { Page } from "playwright-core";
import { afterEach, beforeAll, describe, expect, it } from "vitest";
import { formatRatio } from "~/features/rates/figures";
import { defaultFilters, type RatesFilters } from "~/features/rates/filters";
import { addMonths, dayIn } from "~/platform/clock";
import { funnelLimits, incidenceRate, rateRatio, rateTrend } from "~/statistics";
import { loadDemo } from "~db/seed/load";
import { listDemoPeople } from "~db/seed/load/demo-people";
import { buildScenario } from "~db/seed/scenario";
import type { TestPerson } from "../../harness";
import { axe, expectNoFailures, openSite, type Site, signIn } from "../../harness/browser";
import { type Brute, countByHand, countedByHand } from "../../server/rates/brute-force";
import { type RawSeason, readSeasons, readWarmUps } from "./raw-rows";

/**
 * Five questions that a medical lead asks of the demo, answered from the pages and held against the demo's own rows,
 * counted by hand.
 */
const slug = "marram-bay";
let site: Site;
let lead: TestPerson;
let page: Page;
let seasons: RawSeason[];

beforeAll(async () => {
  await loadDemo({ maintenanceUrl: process.env.DATABASE_MAINTENANCE_URL ?? "" });
  seasons = await readSeasons(slug, dayIn("Europe/London"));
  const found = listDemoPeople(buildScenario({})).find(({ role }) => role === "lead");
  if (!found) throw new Error("The demo has no lead.");
  lead = { ...found, id: "" };
  site = await openSite();
  page = await site.newPage();
  await signIn(page, lead);
}, 600_000);
afterEach(expectNoFailures);

const filters = (given: Partial<RatesFilters> = {}): RatesFilters => ({ ...defaultFilters, ...given });
const nameOf = (season: RawSeason, teamId: string) =>
  season.world.plan.teams.find(({ id }) => id === teamId)?.name ?? "";
const aesOf = ({ recorded, headcount }: Brute[string]) => recorded + headcount;

/** The words of a page of the rates, and the cells of the row of one of its tables. */
async function open(view: string, search: Record<string, string>) {
  const address = `/${slug}/rates${view}?${new URLSearchParams(search)}`;
  expect((await page.goto(address))?.status()).toBe(200);
  return ((await page.locator("main").textContent()) ?? "").replace(/\s+/g, " ");
}

/** The row of a name in a table of the page, by the words of its column heads; null when the table has none. */
async function row(table: RegExp, name: string): Promise<Record<string, string> | null> {
  const found = page.getByRole("table", { name: table });
  const heads = await found.getByRole("columnheader").allTextContents();
  const line = found.getByRole("row").filter({ has: page.getByRole("rowheader", { name, exact: true }) });
  if ((await line.count()) === 0) return null;
  const cells = await line.getByRole("cell").allTextContents();
  return Object.fromEntries(cells.map((text, index) => [heads[index + 1]?.trim() ?? "", text.trim()]));
}

/** Teams of which less than half of the held sessions have recorded exposure: their rates are withheld. */
function withheld({ world, from, to }: RawSeason) {
  const held = world.plan.sessions.filter(
    ({ day, kind, state }) =>
      from <= day &&
      day <= to &&
      ["training", "match"].includes(kind) &&
      ["held", "abandoned"].includes(state),
  );
  return (teamId: string) => {
    const own = held.filter((session) => session.teamId === teamId);
    return own.filter(({ exposureGrade }) => exposureGrade === "recorded").length / own.length < 0.5;
  };
}

it("shows every picture and its table to a browser without script", async () => {
  const plain = await site.newPage({ script: false });
  await signIn(plain, lead);
  for (const view of ["", "/severity", "/prevalence", "/body-areas", "/teams", "/trends", "/coverage"]) {
    await plain.goto(`/${slug}/rates${view}`);
    expect(
      await plain.locator("main figure svg, main [role=img] svg, main svg[role=img]").count(),
      view,
    ).toBeGreaterThan(0);
    expect(await plain.locator("main template").count(), view).toBe(0);
    expect(await plain.getByRole("link", { name: /CSV/ }).count(), view).toBeGreaterThan(0);
  }
  await plain.context().close();
});

describe("the medical lead asks", () => {
  it("which team stands out", async () => {
    for (const season of seasons) {
      const byTeam = countByHand(season.world, filters({ by: "team" }));
      const isWithheld = withheld(season);
      const teams = Object.entries(byTeam).map(([key, counts]) => ({
        name: nameOf(season, key),
        withheld: isWithheld(key),
        events: counts.injuries,
        exposure: aesOf(counts),
      }));
      const sum = (pick: (team: (typeof teams)[number]) => number) =>
        teams.reduce((all, team) => all + pick(team), 0);
      const whole = incidenceRate({ events: sum((t) => t.events), exposure: sum((t) => t.exposure) });
      const outside = teams.filter(({ events, exposure, ...team }) => {
        if (team.withheld) return false;
        const { lower, upper } = funnelLimits({ rate: whole.estimate, exposure });
        const rate = (1000 * events) / exposure;
        return rate > upper || rate < lower;
      });
      const text = await open("/teams", { season: season.id });
      expect(text).toContain(`${whole.estimate.toFixed(1)} per 1000`);
      if (outside.length === 0) expect(text).toMatch(/None of \d+ teams lies outside the 95 % limits/);
      const [sentence = ""] = text.match(/Of \d+ teams .*? by luck/i) ?? [];
      for (const { name } of outside) expect(sentence).toContain(name);
      for (const { name } of teams.filter((team) => !outside.includes(team)))
        expect(sentence).not.toContain(`${name} (`);
      for (const { name, events, exposure, ...team } of teams) {
        expect(await row(/Teams against the whole/, name), name).toMatchObject({
          Injuries: events.toLocaleString("en-GB"),
          Exposures: Math.round(exposure).toLocaleString("en-GB"),
          Rate: team.withheld ? "–" : ((1000 * events) / exposure).toFixed(1),
        });
      }
    }
  });

  it("whether girls' non-contact knee injuries differ from boys' in soccer", async () => {
    const narrowing = { contact: "without", area: "knee", sport: "soccer" } as const;
    let compared = 0;
    for (const season of seasons) {
      const bySex = countByHand(season.world, filters({ ...narrowing, by: "sex" }));
      const side = (sex: string) => ({
        events: bySex[sex]?.injuries ?? 0,
        exposure: bySex[sex] ? aesOf(bySex[sex]) : 0,
      });
      const [girls, boys] = [side("female"), side("male")];
      const text = await open("/comparisons", {
        season: season.id,
        ...narrowing,
        ...{ compare: "sex", a: "female", b: "male" },
      });
      expect(text).toContain(`${Math.round(girls.exposure).toLocaleString("en-GB")} exposures`);
      expect(text).toContain(
        `${boys.events === 0 ? "none" : boys.events} in ${Math.round(boys.exposure).toLocaleString("en-GB")}`,
      );
      if (girls.events === 0 || boys.events === 0) continue;
      compared += 1;
      const ratio = rateRatio(girls, boys);
      expect(text).toContain(`${formatRatio(ratio.estimate)} times`);
      expect(text).toContain(`(${formatRatio(ratio.lower)} to ${formatRatio(ratio.upper)})`);
    }
    expect(compared).toBeGreaterThan(0);
  });

  it("whether the trend is real", async () => {
    const text = await open("/trends", {});
    const byMonth = new Map<string, { events: number; exposure: number }>();
    for (const season of seasons)
      for (const [month, counts] of Object.entries(countByHand(season.world, filters({ by: "month" })))) {
        const known = byMonth.get(month) ?? { events: 0, exposure: 0 };
        byMonth.set(month, {
          events: known.events + counts.injuries,
          exposure: known.exposure + aesOf(counts),
        });
      }
    const today = dayIn("Europe/London");
    const first = seasons.at(-1)?.from.slice(0, 7) ?? "";
    const periodOf = (month: string) =>
      (Number(month.slice(0, 4)) - Number(first.slice(0, 4))) * 12 +
      Number(month.slice(5)) -
      Number(first.slice(5));
    const finished = [...byMonth]
      .filter(([month, { exposure }]) => exposure > 0 && addMonths(`${month}-01`, 1) <= today)
      .map(([month, counts]) => ({ period: periodOf(month), ...counts }));
    const trend = rateTrend(finished);
    const [estimate, lower, upper] = [trend.estimate, trend.lower, trend.upper].map((each) =>
      (each ** 12).toFixed(2),
    );
    expect(text).toContain(`${estimate} times a year (${lower} to ${upper})`);
    const isClear = trend.lower > 1 || trend.upper < 1;
    expect(text.includes("no clear trend")).toBe(!isClear);
  });

  it("how much time is lost to ankles", async () => {
    for (const season of seasons) {
      const counted = countedByHand(season.world, filters());
      const days = (list: typeof counted) => list.reduce((sum, each) => sum + each.days, 0);
      const ankles = counted.filter(({ injury }) => injury.bodyArea === "ankle");
      await open("/body-areas", { season: season.id });
      const found = await row(/by body area/, "Ankle");
      if (ankles.length === 0) {
        expect(found).toBeNull();
        continue;
      }
      expect(found).toMatchObject({
        Injuries: String(ankles.length),
        "Days lost": days(ankles).toLocaleString("en-GB"),
        "% of all days": ((100 * days(ankles)) / days(counted)).toFixed(0),
      });
    }
  });

  it("which team skips its warm-up", async () => {
    const [season] = seasons;
    if (!season) throw new Error("The demo has no season.");
    const rows = await readWarmUps(slug, season.from, season.to);
    const teams = season.world.plan.teams.flatMap(({ id, name }) => {
      const recorded = rows.filter(({ teamId, outcome }) => teamId === id && outcome !== null);
      const skipped = recorded.filter(({ outcome }) => outcome === "skipped").length;
      return recorded.length >= 5 ? [{ name, skipped, recorded: recorded.length }] : [];
    });
    const share = ({ skipped, recorded }: (typeof teams)[number]) => skipped / recorded;
    const [most] = [...teams].sort((a, b) => share(b) - share(a) || b.recorded - a.recorded);
    const text = await open("/programme", { season: season.id });
    expect(most?.skipped).toBeGreaterThan(0);
    const [sentence = ""] = text.match(new RegExp(`${most?.name} skipped \\d+ of \\d+`)) ?? [];
    expect(sentence).toBe(`${most?.name} skipped ${most?.skipped} of ${most?.recorded}`);
    for (const { name, skipped, recorded } of teams) {
      const found = await row(/Warm-ups done, skipped and not recorded/, name);
      expect(Number(found?.Skipped), name).toBe(skipped);
      expect(Number(found?.Done) + Number(found?.Skipped), name).toBe(recorded);
    }
    await axe(page);
  });
});
