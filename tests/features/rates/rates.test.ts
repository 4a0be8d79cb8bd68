import { describe, expect, it } from "vitest";
import { countInjuries, type InjuryRow, numeratorRules, reasonLeftOut } from "~/features/rates/counting";
import { formatRatio } from "~/features/rates/figures";
import { defaultFilters } from "~/features/rates/filters";
import { computeRates } from "~/features/rates/rates";
import { parseRatesQuery, ratesQuery } from "~/features/rates/rates.schema";
import { writeRatesCsv } from "~/features/rates/rates-csv";
import { textOf, writeNote, writeSentence } from "~/features/rates/sentence";
import { reportedWeeks, splitSilent } from "~/features/rates/silence";
import { problem } from "~/middleware/error-response.server";
import { incidenceRate, rateRatio } from "~/statistics";
import { cell, counts, injury, several, tally } from "./view";

const filters = ratesQuery.parse({});
const rules = { definition: "time-loss", sessions: "training-and-matches", unit: "aes" } as const;

describe("which injuries enter the numerator", () => {
  const cases: [string, Partial<InjuryRow>, string | null][] = [
    ["an ordinary one", {}, null],
    ["a re-injury", { subsequence: "recurrent" }, null],
    ["a local one", { subsequence: "local" }, null],
    ["one at another site", { subsequence: "other_site" }, null],
    ["one not yet classified", { subsequence: null, onset: null }, null],
    ["an exacerbation", { subsequence: "exacerbation" }, "exacerbation"],
    ["one outside sport", { outsideSport: true, sessionKind: null, sessionState: null }, "outside_sport"],
    ["a withdrawn one", { withdrawn: true, outsideSport: true }, "withdrawn"],
    ["one of the gym", { sessionKind: "strength" }, "other_kind"],
    ["a sudden one without a session", { sessionKind: null, sessionState: null }, "no_session"],
    ["one of a cancelled session", { sessionState: "cancelled" }, "not_held"],
    ["one of an unconfirmed session", { sessionState: "planned" }, "not_held"],
    ["one of an abandoned match", { sessionKind: "match", sessionState: "abandoned" }, null],
    [
      "one of a session without exposure",
      { sessionAes: false, sessionHours: false },
      "session_without_exposure",
    ],
    ["one of an estimated match", { sessionKind: "match", sessionAes: false }, "session_without_aes"],
    ["a gradual one without a session", { onset: "gradual", sessionKind: null, sessionState: null }, null],
    ["a gradual one of an empty week", { onset: "gradual", weekAes: false }, "week_without_exposure"],
    ["one without time loss", { daysLost: 0 }, "no_time_loss"],
    ["one that still runs", { daysLost: 1, ongoing: true }, null],
  ];
  it.each(cases)("%s", (_, given, reason) => {
    expect(reasonLeftOut(injury(given), rules)).toBe(reason);
  });

  it("differs by definition and unit where it must", () => {
    expect(reasonLeftOut(injury({ daysLost: 0 }), { ...rules, definition: "medical-attention" })).toBeNull();
    expect(
      reasonLeftOut(injury({ sessionAes: false, sessionKind: "match" }), { ...rules, unit: "hours" }),
    ).toBeNull();
    const gradual = injury({ onset: "gradual", sessionKind: null, sessionState: null });
    expect(reasonLeftOut(gradual, { ...rules, sessions: "match" })).toBe("no_one_kind");
  });

  it("counts and names all that is left out, and nothing twice", () => {
    const injuries = cases.map(([, given]) => injury(given));
    const { counted, leftOut } = countInjuries(injuries, rules);
    expect(counted.length + leftOut.reduce((sum, { count }) => sum + count, 0)).toBe(injuries.length);
    expect(new Set(numeratorRules.map(({ reason }) => reason)).size).toBe(numeratorRules.length);
  });
});

describe("rates", () => {
  const both = counts({
    cells: [
      cell({ aes: 9840 }),
      cell({ sex: "male", age: 13, aes: 9600 }),
      cell({ sex: "male", age: 13, kind: "match", grade: "estimated", aes: 0, hours: 33 }),
    ],
    injuries: [...several(31), ...several(19, { sex: "male", age: 13 })],
  });

  it("come with their exact interval and compare the sexes", () => {
    const rates = computeRates(both, filters);
    expect(rates.rows.map(({ label, injuries }) => [label, injuries])).toEqual([
      ["Boys, 13 to 14", 19],
      ["Girls, 15 to 16", 31],
    ]);
    expect(rates.total.rate).toEqual(incidenceRate({ events: 50, exposure: 19_440 }));
    const ratio = rateRatio({ events: 31, exposure: 9840 }, { events: 19, exposure: 9600 });
    expect(rates.comparison?.ratio).toEqual(ratio);
    expect(textOf(writeSentence(rates, filters, "The club"))).toBe(
      `Girls had 31 injuries in 9,840 exposures, 3.2 per 1000 (2.1 to 4.5). That is 1.6 times the boys' rate (${formatRatio(ratio.lower)} to ${formatRatio(ratio.upper)}); the interval includes no difference.`,
    );
    expect(textOf(writeNote(rates, filters))).toContain("100 % of held sessions have recorded exposure.");
  });

  it("never mix hours into athlete-exposures", () => {
    expect(computeRates(both, filters).total.denominator).toBe(19_440);
    expect(computeRates(both, { ...filters, per: "hours" }).total.denominator).toBe(1400 * 2 + 33);
  });

  it("say when the evidence is thin and when one side has none", () => {
    const few = { ...both, injuries: [...several(4)] };
    const sentence = textOf(writeSentence(computeRates(few, filters), filters, "The club"));
    expect(sentence).toContain("no upper limit");
    expect(sentence).toContain("This is thin evidence.");
    const none = textOf(writeSentence(computeRates({ ...both, injuries: [] }, filters), filters, "The club"));
    expect(none).toContain("no injuries");
    expect(`${sentence}${none}`).not.toMatch(/NaN|Infinity/);
  });

  it("carry a warning under 80 % coverage and are withheld under 50 %", () => {
    const low = computeRates({ ...both, sessions: [tally({ recorded: 7 })] }, filters);
    expect(low.coverage.state).toBe("low");
    expect(low.total.rate).not.toBeNull();
    const withheld = computeRates({ ...both, sessions: [tally({ recorded: 4 })] }, filters);
    expect(withheld.coverage.state).toBe("withheld");
    expect([withheld.total, ...withheld.rows].every(({ rate, reason }) => rate === null && reason)).toBe(
      true,
    );
    expect(textOf(writeSentence(withheld, filters, "The club"))).toContain("too little of the exposure");
  });

  it("read not reported for a team that entered nothing, and 0 for the weeks that one confirmed", () => {
    const cells = [cell({ day: "2026-10-05", aes: 40 }), cell({ day: "2026-10-14", aes: 60 })];
    const byTeam = { ...filters, by: "team" } as const;
    const silent = computeRates(counts({ ...splitSilent(cells, [], []) }), byTeam);
    expect(silent.rows).toMatchObject([{ injuries: null, rate: null, exposure: null }]);
    expect(silent.rows[0]?.reason).toMatch(/^not reported/);
    expect(silent).toMatchObject({ silentExposure: 100, total: { injuries: 0, denominator: 0, rate: null } });
    const weeks = [{ teamId: "t", week: "2026-10-12" }];
    const confirmed = computeRates(counts({ ...splitSilent(cells, [], weeks) }), byTeam);
    expect(confirmed.rows).toMatchObject([{ injuries: 0, denominator: 60, rate: { estimate: 0, lower: 0 } }]);
    expect(confirmed.silentExposure).toBe(40);
    const hurt = [injury({ daysLost: 0 })];
    const reporting = computeRates(counts({ ...splitSilent(cells, hurt, []), injuries: hurt }), byTeam);
    expect(reporting.rows).toMatchObject([{ injuries: 0, denominator: 100 }]);
    expect(splitSilent(cells, [injury({ withdrawn: true })], []).cells).toEqual([]);
    expect(reportedWeeks(cells, hurt, weeks)).toEqual({ reported: 2, all: 2 });
    expect(reportedWeeks(cells, [], weeks)).toEqual({ reported: 1, all: 2 });
  });

  it("are a dash and a reason without exposure", () => {
    const rates = computeRates(counts({ sessions: [] }), filters);
    expect(rates.rows).toEqual([]);
    expect(rates.total).toMatchObject({ injuries: 0, rate: null, reason: "no athlete-exposures" });
    expect(textOf(writeSentence(rates, filters, "The club"))).toContain("there is no rate yet");
  });
});

it("write a ratio with two figures, and never on the wrong side of 1", () => {
  expect([0.98, 1.62, 2.6, 12.34, 0.9994, 1.004, 250.2, 0, 1, Infinity].map(formatRatio)).toEqual([
    "0.98",
    "1.6",
    "2.6",
    "12",
    "0.999",
    "1.004",
    "250",
    "0",
    "1.0",
    "no upper limit",
  ]);
});

describe("an address", () => {
  it("has defaults, and is refused in words for a value that does not exist", async () => {
    expect(parseRatesQuery(new URLSearchParams(""))).toEqual(defaultFilters);
    expect(() => parseRatesQuery(new URLSearchParams("per=days"))).toThrow(/per: Use one of: aes, hours/);
    expect(() => parseRatesQuery(new URLSearchParams("per=aes&per=hours"))).toThrow(/once/);
    expect(() => parseRatesQuery(new URLSearchParams("season=x"))).toThrow(/season/);
  });

  it("may hold the page's own parameters, but the API refuses what it does not know", async () => {
    const params = new URLSearchParams("sort=-rate");
    expect(() => parseRatesQuery(params)).not.toThrow();
    const refused = (() => {
      try {
        return parseRatesQuery(params, { strict: true });
      } catch (error) {
        return error;
      }
    })();
    const answer = problem(refused);
    expect(answer.status).toBe(400);
    expect(answer.headers.get("Content-Type")).toBe("application/problem+json");
    expect(await answer.json()).toMatchObject({
      status: 400,
      fields: { sort: [expect.stringContaining("Unknown")] },
    });
  });
});

it("write the file with its definition in every row, safe to open", () => {
  const teams = [{ id: "t", name: "=HYPERLINK(1)", sport: "soccer", sex: "girls" }];
  const view = counts({ cells: [cell()], injuries: several(6), teams });
  const by = { ...filters, by: "team" as const };
  const { rows, total, coverage } = computeRates(view, by);
  const text = writeRatesCsv([{ filters: by, rows: [...rows, total] }], {
    organisation: "Club",
    season: "2026/27",
    from: "2026-08-01",
    to: "2026-12-01",
    team: "all teams",
    coverage,
  });
  const lines = text.trim().split("\r\n");
  expect(lines).toHaveLength(3);
  expect(lines[1]).toContain("'=HYPERLINK(1)");
  for (const line of lines.slice(1)) {
    expect(line).toContain("time loss of 1 day or more");
    expect(line).toContain("per 1000 athlete-exposures");
    expect(line).toContain("exact (Poisson)".slice(0, 5));
  }
});
