import { describe, expect, it } from "vitest";
import { bodyAreasOf } from "~/features/rates/body-areas/body-areas";
import { bodyAreasTables } from "~/features/rates/body-areas/body-areas-tables";
import { defaultFilters } from "~/features/rates/filters";
import { computeRates } from "~/features/rates/rates";
import { cell, counts, several, tally } from "./view";

/** Under half of the sessions recorded: no figure that rests on their exposure is shown, in any view. */

describe("a sport whose own sessions are mostly not recorded", () => {
  const view = counts({
    teams: [
      { id: "t", name: "Girls U16", sport: "soccer", sex: "girls" },
      { id: "h", name: "Girls handball", sport: "handball", sex: "girls" },
    ],
    cells: [cell(), cell({ teamId: "h", aes: 100 })],
    injuries: [...several(6), ...several(6, { teamId: "h" })],
    sessions: [tally({ held: 30, recorded: 30 }), tally({ teamId: "h", held: 10, recorded: 3 })],
  });

  it("has no rate, however well the other sports record", () => {
    const { rows, total } = computeRates(view, { ...defaultFilters, by: "sport" });
    expect(total.rate).not.toBeNull();
    const [handball, soccer] = ["handball", "soccer"].map((key) => rows.find((row) => row.key === key));
    expect(handball).toMatchObject({ rate: null, reason: expect.stringMatching(/withheld: only 30 %/) });
    expect(soccer?.rate?.estimate).toBeCloseTo(6, 9);
  });
});

describe("left against right where exposure is withheld", () => {
  const given = {
    cells: [cell()],
    injuries: [...several(6, { side: "left" }), ...several(3, { side: "right" })],
  };
  const ratioOf = (recorded: number) => {
    const areas = bodyAreasOf(
      counts({ ...given, sessions: [tally({ held: 10, recorded })] }),
      defaultFilters,
    );
    const tables = bodyAreasTables(areas, "aes", () => "");
    const cells = Object.values(tables).flatMap(({ rows }) =>
      rows.flatMap(({ cells: { ratio } }) => ratio ?? []),
    );
    return { ratio: areas.areas[0]?.ratio ?? null, cells };
  };

  it("has no ratio, and says why", () => {
    expect(ratioOf(10).ratio?.estimate).toBeCloseTo(2, 9);
    expect(ratioOf(4).ratio).toBeNull();
    expect(ratioOf(4).cells[0]).toMatchObject({ reason: expect.stringMatching(/withheld/) });
  });
});
