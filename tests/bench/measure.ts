import { readFileSync } from "node:fs";

/**
 * Timing within one run: medians of repeats, taken in turns so that a slow moment of the machine meets all alike. What
 * counts is the processor time of the database's process, which does not hold the waiting for other programs of a
 * shared machine; the time on the clock stands beside it.
 */

export type Work = { run: () => Promise<unknown> /** The database's process. */; pid: number };
export type Time = { cpu: number; clock: number };

/** Processor time of a process in milliseconds (Linux); NaN where it cannot be read. */
function processorTime(pid: number) {
  try {
    return Number(readFileSync(`/proc/${pid}/schedstat`, "utf8").split(" ")[0]) / 1e6;
  } catch {
    return Number.NaN;
  }
}

function median(values: number[]) {
  const sorted = values.sort((a, b) => a - b);
  const middle = sorted.length / 2;
  return sorted.length % 2 === 1
    ? (sorted[Math.floor(middle)] ?? 0)
    : ((sorted[middle - 1] ?? 0) + (sorted[middle] ?? 0)) / 2;
}

/** @returns the median times of each in milliseconds */
export async function timeInTurns<Name extends string>(
  work: Record<Name, Work>,
  repeats: number,
): Promise<Record<Name, Time>> {
  const names = Object.keys(work) as Name[];
  const times = new Map(names.map((name) => [name, { cpu: [] as number[], clock: [] as number[] }]));
  // The first rounds warm the caches and are not counted.
  for (let round = -3; round < repeats; round++)
    for (const name of names) {
      const { run, pid } = work[name];
      const [cpu, clock] = [processorTime(pid), performance.now()];
      await run();
      if (round < 0) continue;
      times.get(name)?.clock.push(performance.now() - clock);
      times.get(name)?.cpu.push(processorTime(pid) - cpu);
    }
  const medians = names.map((name) => {
    const { cpu = [], clock = [] } = times.get(name) ?? {};
    return [name, { cpu: median(cpu), clock: median(clock) }];
  });
  return Object.fromEntries(medians) as Record<Name, Time>;
}

/** What is compared with what, and how many times as long at most, or how many times as fast at least. */
export type Line = { what: string; time: Time; against: string; base: Time } & (
  | { atMost: number }
  | { atLeast: number }
);

export function printTable(lines: readonly Line[]) {
  const rows = [
    ["what", "cpu ms", "against", "cpu ms", "ratio", "bar", "", "(by the clock)"],
    ...lines.map(({ what, time, against, base, ...bar }) => {
      const fraction = (kind: keyof Time) =>
        "atMost" in bar ? time[kind] / base[kind] : base[kind] / time[kind];
      const ratio = fraction(Number.isNaN(time.cpu) ? "clock" : "cpu");
      const met = "atMost" in bar ? ratio <= bar.atMost : ratio >= bar.atLeast;
      return [
        what,
        time.cpu.toFixed(2),
        against,
        base.cpu.toFixed(2),
        ratio.toFixed(2),
        "atMost" in bar ? `≤ ${bar.atMost}` : `≥ ${bar.atLeast}`,
        met ? "met" : "MISSED",
        `(${time.clock.toFixed(1)} / ${base.clock.toFixed(1)} ms: ${fraction("clock").toFixed(2)})`,
      ];
    }),
  ];
  const widths = rows[0]?.map((_, column) => Math.max(...rows.map((row) => row[column]?.length ?? 0))) ?? [];
  for (const row of rows)
    console.log(
      row
        .map((cell, column) => cell.padEnd(widths[column] ?? 0))
        .join("  ")
        .trimEnd(),
    );
}
