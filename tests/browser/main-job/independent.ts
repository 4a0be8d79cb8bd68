import { readFileSync } from "node:fs";

/**
 * The rates of the example files computed a second time, from the files alone: no code of the application, no
 * statistics package. What the lead reads must equal this.
 */
const sample = (name: string) => readFileSync(new URL(`../../../imports/${name}`, import.meta.url), "utf8");

function records(text: string): Record<string, string>[] {
  const [head = "", ...lines] = text.trim().split(/\r?\n/);
  const names = head.split(",");
  return lines.map((line) => {
    const cells = line.split(",");
    return Object.fromEntries(names.map((name, index) => [name, cells[index] ?? ""]));
  });
}

/** The bands in which the file's athletes are. */
const bands: readonly [label: string, from: number, to: number][] = [
  ["10-12", 10, 12],
  ["13-14", 13, 14],
];

/** Completed years by comparing month and day as text. */
function ageAt(born: string, day: string) {
  const years = Number(day.slice(0, 4)) - Number(born.slice(0, 4));
  return day.slice(5) < born.slice(5) ? years - 1 : years;
}

const bandOf = (born: string, day: string) => {
  const age = ageAt(born, day);
  const band = bands.find(([, from, to]) => age >= from && age <= to);
  if (!band) throw new Error(`No band for ${age}`);
  return band[0];
};

/** P(X <= k) for a Poisson mean, term by term. */
function poissonUpTo(k: number, mean: number) {
  let term = Math.exp(-mean);
  let sum = term;
  for (let i = 1; i <= k; i += 1) {
    term *= mean / i;
    sum += term;
  }
  return sum;
}

/** The mean at which a decreasing probability meets its target, by halving. */
function solve(probability: (mean: number) => number, target: number) {
  let [low, high] = [0, 200];
  for (let step = 0; step < 200; step += 1) {
    const middle = (low + high) / 2;
    if (probability(middle) > target) low = middle;
    else high = middle;
  }
  return low;
}

/** Exact 95 % limits of a Poisson count (Garwood 1936): each tail holds 2.5 %. */
export function exactLimits(events: number) {
  return {
    lower: events === 0 ? 0 : solve((mean) => poissonUpTo(events - 1, mean), 0.975),
    upper: solve((mean) => poissonUpTo(events, mean), 0.025),
  };
}

export type Injured = { number: string; day: string };

/** Exposures, hours and injuries of the two example files, by age band and by session kind. */
export function computeFromFiles(injured: readonly Injured[]) {
  const athletes = new Map(
    records(sample("roster/samples/roster-plain.csv")).map((row) => [
      row.number ?? "",
      row.date_of_birth ?? "",
    ]),
  );
  const rows = records(sample("exposure/samples/exposure-by-athlete.csv"));
  const bornOf = (number: string) => athletes.get(number) ?? "";
  const count = (keep: (row: Record<string, string>) => boolean) => {
    const kept = rows.filter((row) => keep(row) && Number(row.minutes) > 0);
    return { aes: kept.length, hours: kept.reduce((sum, row) => sum + Number(row.minutes), 0) / 60 };
  };
  const kindOn = (day: string) => rows.find((row) => row.date === day)?.kind ?? "";
  const byBand = new Map(
    bands.map(([label]) => [
      label,
      {
        ...count((row) => bandOf(bornOf(row.number ?? ""), row.date ?? "") === label),
        injuries: injured.filter(({ number, day }) => bandOf(bornOf(number), day) === label).length,
      },
    ]),
  );
  const byKind = new Map(
    ["training", "match"].map((kind) => [
      kind,
      {
        ...count((row) => row.kind === kind),
        injuries: injured.filter(({ day }) => kindOn(day) === kind).length,
      },
    ]),
  );
  return { all: { ...count(() => true), injuries: injured.length }, byBand, byKind };
}
