import { describe, expect, it } from "vitest";
import { defaultFilters, type RatesFilters } from "~/features/rates/filters";
import { textOf } from "~/features/rates/sentence";
import { compareReturns, type Loss, returnCurve, severityOf } from "~/features/rates/severity/severity";
import { burdenPoints, equalBurdens, returnCurves } from "~/features/rates/severity/severity-pictures";
import { severityTables } from "~/features/rates/severity/severity-tables";
import { returnWords, severityNote, severitySentence } from "~/features/rates/severity/severity-words";
import { expectInterval, expectValue } from "../../statistics/agreement";
import { cell, counts, injury, tally } from "./view";

const attended: RatesFilters = { ...defaultFilters, injuries: "medical-attention", by: "sex", per: "aes" };
const losses = (...days: (number | string)[]): Loss[] =>
  days.map((text) => ({ daysLost: Number.parseInt(String(text), 10), ongoing: String(text).endsWith("+") }));
const injuriesOf = (list: readonly Loss[], given = {}) =>
  list.map((loss, index) => injury({ id: `${index}`, ...loss, ...given }));

/** Days 4, 9, 0, 21, 2 in 1800 hours: the burden of statistics.md [R]. */
const small = counts({
  cells: [cell({ hours: 1800, aes: 900 })],
  injuries: injuriesOf(losses(4, 9, 0, 21, 2)),
});

/** Returns of statistics.md [R]: four are still out. */
const returns = losses(3, 5, 5, 8, 12, 14, "14+", 21, "28+", 30, "45+", "60+");

/** Anything a page could show of the tables. */
const written = (value: unknown): string =>
  JSON.stringify(value, (_, part) => (typeof part === "number" && !Number.isFinite(part) ? "BROKEN" : part));

describe("severity", () => {
  it("counts burden per 1000 hours, whatever unit the address has", () => {
    const { total } = severityOf(small, attended);
    expect(total.injuries).toBe(5);
    expect(total.daysLost).toBe(36);
    expect(total.burden?.estimate).toBeCloseTo(20, 10);
    expectInterval(total.burden ?? { lower: null, upper: null }, "5.63073652–71.03866405");
    // 5 in 1800 hours; limits of Garwood for 5: 1.623486 and 11.668332 [R].
    expectValue(total.rate?.estimate, "2.777778");
    expectInterval(total.rate ?? { lower: null, upper: null }, "0.901937–6.482407");
  });

  it("has the band of no day with medical attention, and not with time loss", () => {
    const withAttention = severityOf(small, attended);
    expect(withAttention.total.bands).toEqual({ "0": 1, "1-7": 2, "8-28": 2, ">28": 0 });
    expect(withAttention.bands.map(({ band, injuries }) => [band, injuries])).toEqual([
      ["0", 1],
      ["1-7", 2],
      ["8-28", 2],
      [">28", 0],
    ]);
    const withLoss = severityOf(small, { ...attended, injuries: "time-loss" });
    expect(withLoss.total.injuries).toBe(4);
    expect(withLoss.bands.map(({ band }) => band)).toEqual(["1-7", "8-28", ">28"]);
    const { columns } = severityTables(withLoss, { ...attended, injuries: "time-loss" }, () => "").groups;
    expect(columns.map(({ id }) => id)).not.toContain("band 0");
  });

  it("takes quartiles of closed injuries and never takes an ongoing one as finished", () => {
    const { total, bands } = severityOf(
      counts({ cells: [cell()], injuries: injuriesOf(returns) }),
      defaultFilters,
    );
    // Closed: 3 5 5 8 12 14 21 30. Type 7 by hand: positions 1.75, 3.5 and 5.25 from 0.
    expect(total.quartiles).toEqual({ lower: 5, median: 10, upper: 15.75 });
    expect(total.ongoing).toBe(4);
    expect(total.curve?.censored).toEqual([14, 28, 45, 60]);
    for (const [time, survival] of [
      [3, "0.9166667"],
      [5, "0.75"],
      [8, "0.6666667"],
      [12, "0.5833333"],
      [14, "0.5"],
      [21, "0.4"],
      [30, "0.2666667"],
    ] as const)
      expectValue(total.curve?.steps.find((step) => step.time === time)?.survival, survival, `${time}`);
    expect(total.curve?.median.estimate).toBe(14);
    expect(bands.map(({ injuries, ongoing }) => [injuries, ongoing])).toEqual([
      [3, 0],
      [6, 2],
      [3, 2],
    ]);
    // 3 of 12: Wilson by hand, (0.25 + z2/24 -+ z sqrt(0.1875/12 + z2/576)) / (1 + z2/12).
    expectInterval(bands[0]?.share ?? { lower: null, upper: null }, "0.25 (0.0889417–0.5323053)");
  });

  it("names a single injury above half of the days, and says to which day they go", () => {
    const severity = severityOf(small, attended);
    expect(severity.total.largestShare).toBeCloseTo(21 / 36, 12);
    expect(textOf(severitySentence(severity, attended, "The club"))).toBe(
      "The club lost 36 days to 5 injuries: 20.0 days per 1000 hours (5.6 to 71.0); half of those injured were back within 4 days (0, no upper limit). One injury makes up 58 % of the days.",
    );
    expect(textOf(severityNote(severity, attended, "2026-12-01"))).toContain(
      "Days are counted to 1 Dec 2026. None is ongoing.",
    );
  });

  it("speaks plainly of nothing, of no days, and of too little exposure", () => {
    const say = (given: Parameters<typeof counts>[0]) =>
      textOf(severitySentence(severityOf(counts(given), attended), attended, "The club"));
    expect(say({ cells: [cell({ hours: 1400 })] })).toBe(
      "The club had no injuries in 1,400 hours, so no days were lost.",
    );
    expect(say({ sessions: [] })).toContain("no session in this season that was held");
    expect(say({ cells: [cell()], injuries: injuriesOf(losses(0, 0)) })).toBe(
      "The club had 2 injuries, and none of them cost a day.",
    );
    const withheld = say({
      cells: [cell()],
      injuries: injuriesOf(losses(4, 6)),
      sessions: [tally({ recorded: 4 })],
    });
    expect(withheld).toContain("lost 10 days to 2 injuries");
    expect(withheld).not.toContain("days per 1000 hours");
    expect(withheld).toContain("too little of the exposure is recorded");
    expect(say({ cells: [cell()], injuries: injuriesOf(losses("9+", "12+")) })).toContain(
      "fewer than half of those injured are back so far",
    );
  });

  it("does not take a silent team for one without injuries, nor hours that there are not for none", () => {
    const say = (given: Parameters<typeof counts>[0]) =>
      textOf(severitySentence(severityOf(counts(given), attended), attended, "Boys U16"));
    expect(say({ silent: [cell()] })).toContain("Boys U16 has not reported: no injury is entered");
    expect(say({})).toBe("Boys U16 had no injuries and no exposure in hours, so there is no burden yet.");
    expect(say({ injuries: injuriesOf(losses(4)) })).toContain(
      "nothing can be said: there is no exposure in hours",
    );
  });

  it("gives tables without a number that is none, for nothing, one injury and many", () => {
    for (const injuries of [[], injuriesOf(losses("3+")), injuriesOf(losses(0)), injuriesOf(returns)])
      for (const by of ["sex", "area", "month", "season"] as const)
        for (const cells of [[], [cell()]]) {
          const severity = severityOf(counts({ cells, injuries }), { ...attended, by });
          const tables = severityTables(severity, { ...attended, by }, () => "/x");
          expect(written(tables)).not.toContain("BROKEN");
          expect(written([burdenPoints(severity), returnCurves(severity)])).not.toContain("BROKEN");
          for (const table of Object.values(tables))
            for (const row of table.rows)
              for (const { id } of table.columns) expect(row.cells, `${table.id} ${id}`).toBeDefined();
        }
  });

  it("says of a team that did not report nothing but that", () => {
    const silent = [cell({ teamId: "u" })];
    const teams = [
      { id: "t", name: "Girls U16", sport: "soccer", sex: "girls" },
      { id: "u", name: "Boys U16", sport: "soccer", sex: "boys" },
    ];
    const severity = severityOf(counts({ cells: [cell()], silent, teams, injuries: injuriesOf(returns) }), {
      ...attended,
      by: "team",
    });
    const row = severityTables(severity, attended, () => "/x").frequency.rows.find(({ key }) => key === "u");
    expect(Object.keys(row?.cells ?? {})).toEqual(["group", "injuries"]);
    expect(written(row)).toContain("not reported");
    expect(row?.href).toBeUndefined();
  });
});

describe("time to return by group", () => {
  const group = (sex: "female" | "male" | "not_stated", label: string) => ({
    key: sex,
    label,
    sex,
    band: null,
    teamId: null,
  });
  // Remission in weeks of two arms (Gehan 1965, in R as MASS::gehan); log-rank 16.792941 [R].
  const treated = losses(
    6,
    6,
    6,
    "6+",
    7,
    "9+",
    10,
    "10+",
    "11+",
    13,
    16,
    "17+",
    "19+",
    "20+",
    22,
    23,
    "25+",
    "32+",
    "32+",
    "34+",
    "35+",
  );
  const control = losses(1, 1, 2, 2, 3, 4, 4, 5, 5, 8, 8, 8, 8, 11, 11, 12, 12, 15, 17, 22, 23);
  const two = [
    { group: group("female", "Girls"), losses: treated },
    { group: group("male", "Boys"), losses: control },
  ];

  it("is tested by the log-rank test between two large groups", () => {
    const compared = compareReturns(two);
    // The upper tail of chi-squared with one degree of freedom at 16.792941 is 4.17e-5.
    expect(compared?.pValue).toBeGreaterThan(4.1e-5);
    expect(compared?.pValue).toBeLessThan(4.2e-5);
    const words = textOf(compared ? returnWords(compared) : []);
    expect(words).toContain("Girls, 21 injuries: half of them were back within 23 days");
    expect(words).toContain("probability below 0.001");
    expect(words).not.toContain("significant");
  });

  it("does not depend on which group comes first", () => {
    expect(compareReturns([...two].reverse())?.pValue).toBeCloseTo(compareReturns(two)?.pValue ?? 0, 15);
  });

  it("draws two or three large groups and no others", () => {
    const small = { group: group("not_stated", "Not stated"), losses: control.slice(0, 9) };
    const open = {
      group: group("not_stated", "Not stated"),
      losses: losses(...Array.from({ length: 12 }, () => "5+"), 1, 2),
    };
    expect(compareReturns([...two, small, open])?.groups).toHaveLength(2);
    expect(compareReturns([{ group: group("female", "Girls"), losses: treated }, small])).toBeNull();
    const third = { group: group("not_stated", "Not stated"), losses: control };
    const three = compareReturns([...two, third]);
    expect(three?.groups).toHaveLength(3);
    expect(three?.pValue).toBeNull();
    expect(compareReturns([...two, third, { ...third }])).toBeNull();
  });

  it("says that no time tells two groups apart that came back on one day", () => {
    const same = Array.from({ length: 10 }, () => 4);
    const compared = compareReturns([
      { group: group("female", "Girls"), losses: losses(...same) },
      { group: group("male", "Boys"), losses: losses(...same) },
    ]);
    expect(compared?.pValue).toBeNull();
    expect(textOf(compared ? returnWords(compared) : [])).toContain("No time tells the two apart.");
  });

  it("has no curve of nobody", () => expect(returnCurve([])).toBeNull());
});

describe("lines of equal burden", () => {
  const point = (x: number, y: number) => ({ label: "", x, y, events: 5 });

  it("are round and lie around the points", () => {
    const lines = equalBurdens([point(2, 10), point(4, 50)]);
    expect(lines.map(({ value }) => value)).toEqual([10, 50, 200]);
    expect(lines[0]?.label).toBe("10 days");
  });

  it("are at most four, and none without points", () => {
    expect(equalBurdens([point(0.1, 1), point(30, 400)]).length).toBeLessThanOrEqual(4);
    expect(equalBurdens([])).toEqual([]);
  });
});
