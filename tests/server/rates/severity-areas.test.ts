import { beforeAll, describe, expect, it } from "vitest";
import { bodyAreasViewOf } from "~/features/rates/body-areas/body-areas-view.server";
import { tableFileOf } from "~/features/rates/csv-views.server";
import { defaultFilters, type RatesFilters } from "~/features/rates/filters";
import { severityViewOf } from "~/features/rates/severity/severity-view.server";
import { countByHand } from "./brute-force";
import {
  type Counted,
  cellsOf,
  countedByHand,
  figureOf,
  hoursOf,
  linesOf,
  medianByHand,
  open,
  plant,
  sum,
} from "./views-by-hand";

/** The figures of two pages against walks through the raw rows, with none of the application's counting. */

describe("the page of severity", () => {
  const filters: RatesFilters = { ...defaultFilters, injuries: "medical-attention", by: "sex", per: "hours" };
  let club: Awaited<ReturnType<typeof plant>>;
  let counted: Counted[];

  beforeAll(async () => {
    club = await plant(11);
    counted = countedByHand(club.world, filters);
  });

  it("equals days, burden, bands and times to return counted by hand", async () => {
    // The address asks for athlete-exposures, which burden must not use.
    const { tables } = await open(club.lead, "?injuries=medical-attention&by=sex&per=aes", severityViewOf);
    const exposure = countByHand(club.world, filters);
    expect(counted.length).toBeGreaterThan(40);
    expect(counted.some(({ ongoing }) => ongoing)).toBe(true);
    expect(counted.some(({ days }) => days === 0)).toBe(true);
    const groups = [...new Set(counted.map(({ key }) => key))];
    expect(groups.length).toBeGreaterThan(2);
    for (const key of [...groups, "total"]) {
      const own = key === "total" ? counted : counted.filter((each) => each.key === key);
      const hours = key === "total" ? sum(Object.values(exposure).map(hoursOf)) : hoursOf(exposure[key]);
      const days = own.map((each) => each.days);
      const total = sum(days);
      expect(cellsOf(tables.frequency, key).injuries, key).toBe(own.length);
      expect(cellsOf(tables.burden, key).days, key).toBe(total);
      expect(cellsOf(tables.frequency, key).hours).toBeCloseTo(hours, 6);
      expect(figureOf(tables.frequency, key, "incidence")?.estimate).toBeCloseTo(
        (own.length / hours) * 1000,
        6,
      );
      const burden = figureOf(tables.burden, key, "burden");
      const factor = Math.exp((1.959963984540054 * Math.sqrt(sum(days.map((each) => each ** 2)))) / total);
      expect(burden?.estimate).toBeCloseTo((total / hours) * 1000, 6);
      expect(burden?.lower).toBeCloseTo(((total / hours) * 1000) / factor, 6);
      expect(burden?.upper).toBeCloseTo((total / hours) * 1000 * factor, 6);
      const within = (from: number, to: number) => days.filter((each) => each >= from && each <= to).length;
      expect(cellsOf(tables.groups, key), key).toMatchObject({
        "band 0": within(0, 0),
        "band 1-7": within(1, 7),
        "band 8-28": within(8, 28),
        "band >28": within(29, 9999),
        ongoing: own.filter(({ ongoing }) => ongoing).length,
      });
      expect(cellsOf(tables.returns, key).closed, key).toBe(own.filter(({ ongoing }) => !ongoing).length);
      expect(cellsOf(tables.returns, key).half, key).toEqual(medianByHand(own) ?? { reason: "not reached" });
    }
  });

  it("has no band of no day with time loss, and links bands and ongoing injuries to their records", async () => {
    const { tables, links } = await open(club.lead, "?by=sex", severityViewOf);
    expect(tables.bands.rows.map(({ key }) => key)).toEqual(["1-7", "8-28", ">28"]);
    const lost = countedByHand(club.world, { ...filters, injuries: "time-loss" });
    expect(sum(tables.bands.rows.map(({ cells }) => Number(cells.injuries)))).toBe(lost.length);
    const search = new URL(tables.bands.rows[2]?.href ?? "", "http://x").searchParams;
    expect(Object.fromEntries(search)).toEqual({ by: "sex", per: "hours", severity: ">28" });
    expect(new URL(links.ongoing, "http://x").searchParams.get("lost")).toBe("ongoing");
  });

  it("gives the file the tables of the page", async () => {
    const { page, file } = await open(club.lead, "?by=sport", async (tx, view, url) => ({
      page: (await severityViewOf(tx, view, url)).tables.burden,
      file: await tableFileOf(tx, view, url, { view: "severity", table: "burden" }),
    }));
    const lines = linesOf(file.text);
    expect(lines.map(({ group }) => group)).toEqual(page.rows.map(({ cells }) => cells.group));
    for (const [index, { key, cells }] of page.rows.entries()) {
      expect(Number(lines[index]?.days), key).toBe(cells.days);
      expect(Number(lines[index]?.burden_upper), key).toBe(figureOf(page, key, "burden")?.upper);
      expect(lines[index]?.burden_unit).toBe("days per 1000 hours");
    }
  });
});

describe("the page of body areas", () => {
  it("equals injuries and days of every area and side counted by hand", async () => {
    const club = await plant(12);
    const filters: RatesFilters = { ...defaultFilters, injuries: "time-loss", by: "area-side", per: "aes" };
    const counted = countedByHand(club.world, filters);
    const byHand = countByHand(club.world, filters);
    const { tables } = await open(club.lead, "", bodyAreasViewOf);
    const all = sum(counted.map(({ days }) => days));
    const keys = [...new Set(counted.map(({ key }) => key))];
    expect(keys.length).toBeGreaterThan(6);
    expect(tables.sides.rows.map(({ key }) => key).sort()).toEqual([...keys].sort());
    for (const key of keys) {
      const own = counted.filter((each) => each.key === key);
      const days = sum(own.map((each) => each.days));
      const { recorded = 0, headcount = 0 } = byHand[key] ?? {};
      expect(cellsOf(tables.sides, key), key).toMatchObject({ injuries: own.length, days });
      expect(cellsOf(tables.sides, key)["days-share"]).toBeCloseTo((days / all) * 100, 9);
      expect(figureOf(tables.sides, key, "rate")?.estimate).toBeCloseTo(
        (own.length / (recorded + headcount)) * 1000,
        9,
      );
    }
    for (const { key, cells } of tables.areas.rows.filter(({ total }) => !total)) {
      const own = counted.filter((each) => each.key.split(" ")[0] === key);
      expect(cells, key).toMatchObject({ injuries: own.length, days: sum(own.map(({ days }) => days)) });
    }
    expect(cellsOf(tables.areas, "total")).toMatchObject({ injuries: counted.length, days: all });
  });
});
