import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { type CountCell, suppressSmallCells } from "~/features/rates/fixed/suppression";

const cellsOf = (events: readonly number[], athletes: readonly number[] = []): CountCell[] =>
  events.map((count, index) => ({
    key: `group ${index}`,
    events: count,
    exposedAthletes: athletes[index] ?? 40,
    injuredAthletes: count,
  }));

type Published = { total: number | null; shown: (number | null)[] };

function publish(cells: readonly CountCell[], smallest: number): Published {
  const { hidden, hideTotal } = suppressSmallCells(cells, smallest);
  const total = cells.reduce((sum, { events }) => sum + events, 0);
  return {
    total: hideTotal ? null : total,
    shown: cells.map(({ key, events }) => (hidden.has(key) ? null : events)),
  };
}

/** Every way to fill the hidden cells so that they add up to what is missing from the total. */
function* fillings(count: number, sum: number): Generator<number[]> {
  if (count === 0) {
    if (sum === 0) yield [];
    return;
  }
  for (let first = 0; first <= sum; first++)
    for (const rest of fillings(count - 1, sum - first)) yield [first, ...rest];
}

/**
 * What somebody finds out who knows the rules, the total and what is shown: for each hidden cell, all values with
 * which the same table would have been published.
 */
function recover({ total, shown }: Published, athletes: readonly number[], smallest: number) {
  const places = shown.flatMap((value, index) => (value === null ? [index] : []));
  const missing = (total ?? 0) - shown.reduce<number>((sum, value) => sum + (value ?? 0), 0);
  const possible = places.map(() => new Set<number>());
  for (const filling of fillings(places.length, missing)) {
    const events = shown.map((value, index) => value ?? filling[places.indexOf(index)] ?? 0);
    const again = publish(cellsOf(events, athletes), smallest);
    if (JSON.stringify(again) !== JSON.stringify({ total, shown })) continue;
    for (const [index, value] of filling.entries()) possible[index]?.add(value);
  }
  return possible;
}

describe("small cells", () => {
  it("are hidden with a second cell, so that the total does not give them away", () => {
    const { hidden, hideTotal } = suppressSmallCells(cellsOf([2, 30, 41]), 5);
    expect(hidden.size).toBe(2);
    expect(hidden.has("group 0")).toBe(true);
    expect(hideTotal).toBe(false);
  });

  it("are those of few athletes too, exposed or injured", () => {
    const [first, ...rest] = cellsOf([9, 30, 41]);
    if (!first) throw new Error("No cell");
    expect(suppressSmallCells([{ ...first, exposedAthletes: 4 }, ...rest], 5).hidden.has("group 0")).toBe(
      true,
    );
    expect(suppressSmallCells([{ ...first, injuredAthletes: 4 }, ...rest], 5).hidden.has("group 0")).toBe(
      true,
    );
    expect(suppressSmallCells([first, ...rest], 5).hidden.size).toBe(0);
  });

  it("take the total with them when it is small itself, or is the one cell", () => {
    expect(suppressSmallCells(cellsOf([1, 2]), 5)).toMatchObject({ hideTotal: true });
    expect(suppressSmallCells(cellsOf([9], [3]), 5)).toMatchObject({ hideTotal: true });
    expect(suppressSmallCells(cellsOf([]), 5).hidden.size).toBe(0);
  });

  it("need no company where none is small", () => {
    expect(suppressSmallCells(cellsOf([5, 6, 7]), 5).hidden.size).toBe(0);
  });

  it("can never be worked out from what is shown, by somebody who knows the rules", () => {
    const table = fc
      .array(fc.tuple(fc.integer({ min: 0, max: 12 }), fc.integer({ min: 6, max: 9 })), {
        minLength: 2,
        maxLength: 4,
      })
      .map((rows) => ({
        events: rows.map(([count]) => count),
        athletes: rows.map(([, people]) => people + 20),
      }));
    fc.assert(
      fc.property(table, ({ events, athletes }) => {
        const published = publish(cellsOf(events, athletes), 5);
        if (published.total === null) return;
        for (const values of recover(published, athletes, 5)) expect(values.size).toBeGreaterThanOrEqual(3);
      }),
      { numRuns: 1500 },
    );
  });

  it("are not given away by adding up to almost as much as small cells can", () => {
    const published = publish(cellsOf([5, 4, 4, 3]), 5);
    expect(published.shown).toEqual([null, null, null, null]);
  });

  it("would be worked out if only they were hidden (the check above can fail)", () => {
    const shown = [null, 30, 41];
    const missing = 73 - 71;
    expect([...fillings(1, missing)]).toEqual([[2]]);
    expect(shown.filter((value) => value === null)).toHaveLength(1);
  });
});
