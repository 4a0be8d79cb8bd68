import { renderToStaticMarkup } from "react-dom/server";
import { MemoryRouter } from "react-router";
import { describe, expect, test } from "vitest";
import { type Column, DataTable } from "~/ui/data-table";

type Row = { team: string; injuries: number | null };
const rows: Row[] = [
  { team: "Under 12", injuries: 9 },
  { team: "Under 9", injuries: null },
  { team: "under 16", injuries: 31 },
];
const columns: Column<Row>[] = [
  { id: "team", header: "Team", value: (row) => row.team, rowHeader: true },
  { id: "injuries", header: "Injuries", value: (row) => row.injuries, numeric: true },
  { id: "notes", header: "Notes", cell: () => "none" },
];

function render(at: string, props: Partial<Parameters<typeof DataTable<Row>>[0]> = {}) {
  return renderToStaticMarkup(
    <MemoryRouter initialEntries={[at]}>
      <DataTable
        caption="Injuries by team"
        columns={columns}
        rows={rows}
        rowKey={(row) => row.team}
        empty="No team yet."
        {...props}
      />
    </MemoryRouter>,
  );
}

const order = (html: string) => [...html.matchAll(/<th scope="row"[^>]*>([^<]*)</g)].map((match) => match[1]);

describe("DataTable", () => {
  test("has a caption, column heads and a row head, in a box that can be scrolled by keys", () => {
    const html = render("/");
    const caption = /<caption id="([^"]+)"/.exec(html)?.[1];
    expect(html).toContain(`aria-labelledby="${caption}"`);
    expect(html).toContain('tabindex="0"');
    expect(html.split('scope="col"').length - 1).toBe(3);
    expect(html.split('scope="row"').length - 1).toBe(3);
  });

  test("keeps the order it is given until someone sorts", () => {
    expect(order(render("/"))).toEqual(["Under 12", "Under 9", "under 16"]);
    expect(render("/")).not.toContain("aria-sort");
  });

  test("sorts words as people do, without script, from the address", () => {
    const html = render("/?sort=team");
    expect(order(html)).toEqual(["Under 9", "Under 12", "under 16"]);
    expect(html).toMatch(/aria-sort="ascending"/);
    expect(order(render("/?sort=-team"))).toEqual(["under 16", "Under 12", "Under 9"]);
  });

  test("a missing figure is last in both directions", () => {
    expect(order(render("/?sort=injuries"))).toEqual(["Under 12", "under 16", "Under 9"]);
    expect(order(render("/?sort=-injuries"))).toEqual(["under 16", "Under 12", "Under 9"]);
  });

  test("heads link to the next order and keep the rest of the address", () => {
    const html = render("/?season=3&sort=-injuries");
    expect(html).toContain('href="/?season=3&amp;sort=injuries"');
    expect(html).toContain('href="/?season=3&amp;sort=team"');
    expect(render("/")).toContain('href="/?sort=-injuries"');
    expect(html).not.toContain("sort=notes");
  });

  test("an unknown column falls back to the default order", () => {
    expect(order(render("/?sort=nothing", { defaultSort: "-injuries" }))).toEqual([
      "under 16",
      "Under 12",
      "Under 9",
    ]);
  });

  test("rows sorted by the server stay as they came", () => {
    const html = render("/?sort=team", { sortedByServer: true });
    expect(order(html)).toEqual(["Under 12", "Under 9", "under 16"]);
    expect(html).toContain('aria-sort="ascending"');
  });

  test("an empty table says so across its width and offers no CSV", () => {
    const html = render("/", { rows: [], csvHref: "/teams.csv" });
    expect(html).toContain('<td colSpan="3"');
    expect(html).toContain("No team yet.");
    expect(html).not.toContain("teams.csv");
  });

  test("the CSV is a download", () => {
    expect(render("/", { csvHref: "/teams.csv" })).toMatch(/<a href="\/teams.csv" download/);
  });

  test("figures are set to the right", () => {
    expect(render("/")).toMatch(/<td class="[^"]*text-right[^"]*">31<\/td>/);
  });
});
