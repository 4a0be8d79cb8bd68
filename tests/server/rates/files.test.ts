import Papa from "papaparse";
import { beforeAll, describe, expect, it } from "vitest";
import type { MemberScope } from "~/features/accounts/scope.server";
import { bodyAreasViewOf } from "~/features/rates/body-areas/body-areas-view.server";
import { tableFileOf, tablesOf, viewNames } from "~/features/rates/csv-views.server";
import { loadRates } from "~/features/rates/view.server";
import { addDays } from "~/platform/clock";
import { makeOrganisation, makePerson, makeSeason, memberScope, staffScope } from "../../harness";
import { planClub, plantClub } from "./generated-club";

let scope: MemberScope;

beforeAll(async () => {
  const organisation = await makeOrganisation({ name: "=Club" });
  const staff = staffScope(organisation);
  const plan = planClub(7, staff.today);
  await makeSeason(staff, { name: "Now", startsOn: plan.season.from, endsOn: plan.season.to });
  await makeSeason(staff, {
    name: "Before",
    startsOn: addDays(plan.season.from, -300),
    endsOn: addDays(plan.season.from, -1),
  });
  await plantClub(staff, plan);
  scope = await memberScope(await makePerson(organisation, { roles: ["lead"] }), organisation);
});

const searches = [
  "",
  "?contact=without&area=knee&per=hours",
  "?by=season&over=all&compare=season",
  "?sport=soccer&sessions=match",
];

describe("the files of the views", () => {
  // The programme's has no table before a plan is written down; its own tests read its files.
  it.each(viewNames.filter((name) => name !== "programme"))("of %s say what its tables say", async (name) => {
    for (const search of searches) {
      const url = new URL(`http://localhost/club/rates/csv/${name}/x${search}`);
      const { data } = await loadRates(scope, url, async (tx, view) => {
        const found = await tablesOf(tx, view, url, name);
        const files = [];
        for (const table of found?.tables ?? [])
          files.push({ table, file: await tableFileOf(tx, view, url, { view: name, table: table.id }) });
        return { found, files };
      });
      expect(data?.files.length, search).toBeGreaterThan(0);
      for (const { table, file } of data?.files ?? []) {
        expect(file.name).toMatch(/^[A-Za-z0-9-]+\.csv$/);
        expect(file.text, `${table.id} ${search}`).not.toMatch(/NaN|Infinity|undefined|\[object/);
        const parsed = Papa.parse<Record<string, string>>(file.text.replace(/^\uFEFF/, ""), {
          header: true,
          skipEmptyLines: true,
        });
        // Of heads that repeat the parser keeps one and renames the other.
        const heads = Papa.parse<string[]>(file.text, { preview: 1 }).data[0] ?? [];
        expect(new Set(heads).size, table.id).toBe(heads.length);
        expect(parsed.data.length, table.id).toBe(table.rows.length);
        for (const row of parsed.data) {
          expect(row.organisation).toBe("'=Club");
          expect(row.view_season).toBe(data?.found?.all ? "all seasons" : "Now");
          if (search.includes("knee")) expect(row.narrowed_to).toBe("area=knee; contact=without");
        }
      }
    }
  });

  it("carry the coverage of the sessions that they are of, as the page does", async () => {
    const heldOf = async (search: string) => {
      const url = new URL(`http://localhost/club/rates/csv/body-areas/areas${search}`);
      const { data } = await loadRates(scope, url, async (tx, view) => {
        const { tables } = (await tablesOf(tx, view, url, "body-areas")) ?? { tables: [] };
        const file = await tableFileOf(tx, view, url, { view: "body-areas", table: tables[0]?.id ?? "" });
        return { file, page: (await bodyAreasViewOf(tx, view, url)).coverage };
      });
      const [row] = Papa.parse<Record<string, string>>(data?.file.text ?? "", { header: true }).data;
      expect([row?.held_sessions, row?.held_sessions_with_recorded_exposure]).toEqual([
        String(data?.page.held),
        String(data?.page.recorded),
      ]);
      return data?.page.held ?? 0;
    };
    const [all, matches] = [await heldOf(""), await heldOf("?sessions=match")];
    expect(matches).toBeGreaterThan(0);
    expect(matches).toBeLessThan(all);
    await heldOf("?sport=soccer");
  });

  it("of a view or a table that there is not are not found", async () => {
    const url = new URL("http://localhost/club/rates/csv/x/x");
    for (const name of [
      { view: "constructor", table: "x" },
      { view: "trends", table: "toString" },
      { view: "", table: "" },
    ])
      await expect(
        loadRates(scope, url, (tx, view) => tableFileOf(tx, view, url, name)),
      ).rejects.toMatchObject({ code: "not_found" });
  });
});
