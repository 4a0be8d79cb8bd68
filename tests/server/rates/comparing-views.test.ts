import { beforeAll, describe, expect, it } from "vitest";
import { defaultAgeBands } from "~/features/accounts/founding.server";
import { comparisonsViewOf } from "~/features/rates/comparisons/comparisons-view.server";
import { recentWeeksViewOf } from "~/features/rates/recent-weeks/recent-weeks-view.server";
import { isFigure, type TableData } from "~/features/rates/tables";
import { teamRatesViewOf } from "~/features/rates/teams/team-rates-view.server";
import { trendsViewOf } from "~/features/rates/trends/trends-view.server";
import { loadRates } from "~/features/rates/view.server";
import { addDays, daysBetween, weekStart } from "~/platform/clock";
import { ageAt, plantComparedClub, type RawRow } from "./compared-club";

/** The four views that compare, against the raw rows counted here with none of the application's code. */

let club: Awaited<ReturnType<typeof plantComparedClub>>;
beforeAll(async () => {
  club = await plantComparedClub();
});

const address = (view: string, search = "") => new URL(`http://localhost/club/rates/${view}${search}`);
type Is = (row: RawRow) => boolean;
const injuriesOf = (is: Is) => club.rows.injuries.filter(is).length;
const exposuresOf = (is: Is) => club.rows.exposures.filter(is).length;
const inSpan =
  (from: string, to: string): Is =>
  ({ day }) =>
    from <= day && day <= to;
const thisSeason: Is = ({ day }) => day >= (club.spans[1]?.from ?? "");
const bandAt = (row: RawRow) =>
  defaultAgeBands.find(({ from, to }) => ageAt(row) >= from && ageAt(row) <= (to ?? 999))?.label ?? "";

function tableOf(tables: readonly TableData[], id: string) {
  const table = tables.find((each) => each.id === id);
  if (!table) throw new Error(`no table ${id}`);
  return table;
}
const rowOf = (table: TableData, key: string) => table.rows.find((row) => row.key === key)?.cells ?? {};
function estimateOf(cell: unknown) {
  if (!isFigure(cell as never)) throw new Error(`no figure: ${JSON.stringify(cell)}`);
  return (cell as { estimate: number }).estimate;
}

it("is a club in which there is something to compare", () => {
  expect(injuriesOf(thisSeason)).toBeGreaterThan(30);
  expect(injuriesOf(({ kind }) => kind === null)).toBeGreaterThan(3);
});

describe("comparisons", () => {
  it("are those of the raw rows, as they are and by Mantel-Haenszel", async () => {
    const url = address("comparisons");
    const { data } = await loadRates(club.lead, url, (tx, view) => comparisonsViewOf(tx, view, url));
    if (!data) throw new Error("no season");
    const side =
      (sex: string): Is =>
      (row) =>
        thisSeason(row) && row.sex === sex;
    const [a, b] = ["female", "male"].map((sex) => ({
      events: injuriesOf(side(sex)),
      aes: exposuresOf(side(sex)),
    }));
    const rates = tableOf(data.tables, "rates");
    expect(rowOf(rates, "female")).toMatchObject({ injuries: a?.events, exposure: a?.aes });
    expect(rowOf(rates, "male")).toMatchObject({ injuries: b?.events, exposure: b?.aes });
    const ratios = tableOf(data.tables, "ratios");
    const crude = (a?.events ?? 0) / (a?.aes ?? 0) / ((b?.events ?? 0) / (b?.aes ?? 0));
    expect(estimateOf(rowOf(ratios, "crude").ratio)).toBeCloseTo(crude, 10);
    expect(estimateOf(rowOf(ratios, "crude-teams").ratio)).toBeCloseTo(crude, 8);

    let [top, bottom] = [0, 0];
    for (const { label } of defaultAgeBands)
      for (const kind of ["training", "match"]) {
        const within =
          (sex: string): Is =>
          (row) =>
            side(sex)(row) && row.kind === kind && bandAt(row) === label;
        const [e1, t1, e0, t0] = [
          injuriesOf(within("female")),
          exposuresOf(within("female")),
          injuriesOf(within("male")),
          exposuresOf(within("male")),
        ];
        if (t1 > 0 && t0 > 0) {
          top += (e1 * t0) / (t1 + t0);
          bottom += (e0 * t1) / (t1 + t0);
        }
      }
    expect(estimateOf(rowOf(ratios, "adjusted").ratio)).toBeCloseTo(top / bottom, 10);
    const sports = tableOf(data.tables, "sports");
    for (const sport of ["soccer", "handball"]) {
      const ofSport: Is = (row) => side("female")(row) && row.sport === sport;
      expect(rowOf(sports, `${sport} female`)).toMatchObject({
        injuries: injuriesOf(ofSport),
        exposure: exposuresOf(ofSport),
      });
    }
  });

  it("take their groups from the address, over all seasons where it says so", async () => {
    const [first, , third] = club.teams;
    const url = address("comparisons", `?compare=team&a=${third?.id}&b=${first?.id}&over=all`);
    const { data } = await loadRates(club.lead, url, (tx, view) => comparisonsViewOf(tx, view, url));
    const rates = tableOf(data?.tables ?? [], "rates");
    for (const team of [third, first])
      expect(rowOf(rates, team?.id ?? "")).toMatchObject({
        injuries: injuriesOf(({ teamId }) => teamId === team?.id),
        exposure: exposuresOf(({ teamId }) => teamId === team?.id),
      });
    expect(rowOf(tableOf(data?.tables ?? [], "ratios"), "crude-teams").ratio).toEqual({
      reason: "single teams",
    });
  });
});

/** Slope of a log-linear Poisson trend: where the sum of x over the events is what the model expects. */
function slopeOf(rows: readonly { x: number; events: number; aes: number }[]) {
  const total = rows.reduce((sum, { events }) => sum + events, 0);
  const observed = rows.reduce((sum, { x, events }) => sum + x * events, 0);
  const excess = (slope: number) => {
    const weights = rows.map(({ x, aes }) => aes * Math.exp(slope * x));
    const mean =
      rows.reduce((sum, { x }, i) => sum + x * (weights[i] ?? 0), 0) / weights.reduce((sum, w) => sum + w, 0);
    return observed - total * mean;
  };
  let [low, high] = [-1, 1];
  for (let step = 0; step < 200; step++) {
    const middle = (low + high) / 2;
    if (excess(middle) > 0) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

describe("trends", () => {
  it("are those of the raw rows, by month, by season and for the season so far", async () => {
    const { data } = await loadRates(club.lead, address("trends"), trendsViewOf);
    if (!data) throw new Error("no season");
    const months = tableOf(data.tables, "months");
    const month =
      (key: string): Is =>
      ({ day }) =>
        day.startsWith(key);
    for (const { key, cells } of months.rows) {
      const aes = exposuresOf(month(key));
      if (aes > 0) expect(cells).toMatchObject({ injuries: injuriesOf(month(key)), exposure: aes });
      else expect(cells.rate).toMatchObject({ reason: expect.any(String) });
    }
    const finished = months.rows.flatMap(({ key }, x) =>
      key < club.today.slice(0, 7) && exposuresOf(month(key)) > 0
        ? [{ x, events: injuriesOf(month(key)), aes: exposuresOf(month(key)) }]
        : [],
    );
    const perMonth = Math.exp(slopeOf(finished));
    const trend = tableOf(data.tables, "trend");
    expect(estimateOf(rowOf(trend, "month").ratio)).toBeCloseTo(perMonth, 7);
    expect(estimateOf(rowOf(trend, "year").ratio)).toBeCloseTo(perMonth ** 12, 5);

    const soFar = tableOf(data.tables, "so-far");
    const [before, now] = club.spans;
    const length = daysBetween(now?.from ?? "", club.today);
    const [own, earlier] = soFar.rows;
    const then = inSpan(before?.from ?? "", addDays(before?.from ?? "", length));
    expect(own?.cells).toMatchObject({ injuries: injuriesOf(thisSeason), exposure: exposuresOf(thisSeason) });
    expect(earlier?.cells).toMatchObject({ injuries: injuriesOf(then), exposure: exposuresOf(then) });
    const ratio = injuriesOf(thisSeason) / exposuresOf(thisSeason) / (injuriesOf(then) / exposuresOf(then));
    expect(estimateOf(earlier?.cells.ratio)).toBeCloseTo(ratio, 10);
  });
});

describe("teams against the whole", () => {
  it("are those of the raw rows, with what the whole's rates let expect", async () => {
    const { data } = await loadRates(club.lead, address("teams"), teamRatesViewOf);
    const [teams, expected] = ["teams", "expected"].map((id) => tableOf(data?.tables ?? [], id));
    if (!teams || !expected) throw new Error("no tables");
    const placeOf = (row: RawRow) => `${bandAt(row)} ${row.kind}`;
    const tally = (rows: readonly RawRow[], key: (row: RawRow) => string) => {
      const sums = new Map<string, number>();
      for (const row of rows) sums.set(key(row), (sums.get(key(row)) ?? 0) + 1);
      return sums;
    };
    const exposures = club.rows.exposures.filter(thisSeason);
    const injuries = club.rows.injuries.filter(thisSeason);
    const [byPlace, byBand] = [tally(exposures, placeOf), tally(exposures, bandAt)];
    const sudden = tally(
      injuries.filter(({ kind }) => kind !== null),
      placeOf,
    );
    const gradual = tally(
      injuries.filter(({ kind }) => kind === null),
      bandAt,
    );
    for (const { id } of club.teams) {
      const own = exposures.filter(({ teamId }) => teamId === id);
      const count = injuries.filter(({ teamId }) => teamId === id).length;
      expect(rowOf(teams, id)).toMatchObject({ injuries: count, exposure: own.length });
      const let_ = own.reduce(
        (sum, row) =>
          sum +
          (sudden.get(placeOf(row)) ?? 0) / (byPlace.get(placeOf(row)) ?? 1) +
          (gradual.get(bandAt(row)) ?? 0) / (byBand.get(bandAt(row)) ?? 1),
        0,
      );
      expect(rowOf(expected, id).expected).toBeCloseTo(let_, 8);
      expect(estimateOf(rowOf(expected, id).ratio)).toBeCloseTo(count / let_, 8);
    }
    expect(rowOf(teams, "whole")).toMatchObject({ injuries: injuries.length, exposure: exposures.length });
  });

  it("show a trainer of listed teams their own and the club's sums alone", async () => {
    const lead = await loadRates(club.lead, address("teams"), teamRatesViewOf);
    const { data } = await loadRates(club.trainer, address("teams"), teamRatesViewOf);
    const [own, ...others] = club.teams;
    const teams = tableOf(data?.tables ?? [], "teams");
    expect(teams.rows.map(({ key }) => key)).toEqual([own?.id, "whole"]);
    for (const key of [own?.id ?? "", "whole"])
      expect({ ...rowOf(teams, key), team: "" }).toEqual({
        ...rowOf(tableOf(lead.data?.tables ?? [], "teams"), key),
        team: "",
      });
    const sent = JSON.stringify(data);
    for (const { id, name } of others) {
      expect(sent).not.toContain(id);
      expect(sent).not.toContain(name);
    }
  });
});

describe("teams against a whole that would give one of them away", () => {
  it.each(["?sport=handball", "?sex=female", "?sport=soccer&sex=male"])(
    "hide it under %s",
    async (search) => {
      const of = async (scope: typeof club.trainer) =>
        (await loadRates(scope, address("teams", search), teamRatesViewOf)).data;
      const data = await of(club.trainer);
      expect(rowOf(tableOf(data?.tables ?? [], "teams"), "whole")).toMatchObject({
        injuries: null,
        exposure: null,
        rate: { reason: expect.stringMatching(/hidden/) },
      });
      expect(data).toMatchObject({ whole: null, limits: [] });
      expect(data?.sentence.map(({ text }) => text).join("")).toMatch(/not shown/);
      // The lead sees it.
      expect(rowOf(tableOf((await of(club.lead))?.tables ?? [], "teams"), "whole").injuries).toBeGreaterThan(
        0,
      );
    },
  );
});

/** P(X >= count) of a Poisson, summed by hand. */
function atLeast(count: number, mean: number) {
  let [chance, below] = [Math.exp(-mean), 0];
  for (let k = 0; k < count; k++) {
    below += chance;
    chance *= mean / (k + 1);
  }
  return 1 - below;
}

describe("recent weeks", () => {
  it("are those of the raw rows, against all that went before", async () => {
    const { data } = await loadRates(club.lead, address("recent-weeks"), recentWeeksViewOf);
    if (!data) throw new Error("no season");
    const span = { from: addDays(club.today, -28), to: addDays(club.today, -1) };
    expect(data.span).toEqual(span);
    const recent = inSpan(span.from, span.to);
    const earlier: Is = ({ day }) => day < span.from;
    const expectedOf = (is: Is) =>
      ["training", "match"].reduce((sum, kind) => {
        const ofKind: Is = (row) => is(row) && row.kind === kind;
        const past: Is = (row) => earlier(row) && ofKind(row);
        return (
          sum + (exposuresOf((row) => recent(row) && ofKind(row)) * injuriesOf(past)) / exposuresOf(past)
        );
      }, 0) +
      (exposuresOf((row) => recent(row) && is(row)) *
        injuriesOf((row) => earlier(row) && is(row) && row.kind === null)) /
        exposuresOf((row) => earlier(row) && is(row));
    const teams = tableOf(data.tables, "teams");
    let judged = 0;
    for (const { id } of club.teams) {
      const own: Is = ({ teamId }) => teamId === id;
      const cells = rowOf(teams, id);
      const observed = injuriesOf((row) => recent(row) && own(row));
      // A team of which nobody said anything in these weeks has no number.
      if (observed > 0) expect(cells.observed).toBe(observed);
      if (typeof cells.observed !== "number") continue;
      judged += 1;
      expect(estimateOf(cells.expected)).toBeCloseTo(expectedOf(own), 8);
      expect(cells.probability).toBeCloseTo(atLeast(observed, expectedOf(own)), 8);
    }
    expect(judged).toBeGreaterThan(1);
    const all = data.sentence.map(({ text }) => text).join("");
    expect(all).toContain(`${injuriesOf(recent)} injur`);
    const weeks = tableOf(data.tables, "weeks");
    expect(weeks.rows.length).toBeGreaterThan(15);
    for (const { key, cells } of weeks.rows) {
      const ofWeek: Is = ({ day }) => weekStart(day) === key && day <= span.to;
      expect(cells).toMatchObject({ injuries: injuriesOf(ofWeek), exposure: exposuresOf(ofWeek) });
    }
  });
});
