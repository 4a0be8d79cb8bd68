import { accept, type Parsed, quoteCell, refuse, tidyCell } from "./parsed";

const clock = /^(\d{1,2})(?:[:.h]\s?(\d{2}))?(?::(\d{2}))?\s*(h|uhr|a\.?m\.?|p\.?m\.?)?$/iu;
const fourDigits = /^([01]\d|2[0-3])([0-5]\d)$/u;

/** Reads a local time of day (17:30, 17.30, 17h30, 1730, 5:30 pm, 17:30 Uhr) and gives it as HH:MM. */
export function parseTimeCell(text: string): Parsed<string> {
  const cell = tidyCell(text);
  const digits = fourDigits.exec(cell);
  if (digits) return accept(`${digits[1]}:${digits[2]}`);
  const match = clock.exec(cell);
  const half = match?.[4]?.toLowerCase()[0];
  // A bare "17" could be anything: without minutes it needs "h", "Uhr", "am" or "pm".
  if (!match || (match[2] === undefined && half === undefined && !/h$/iu.test(cell))) return refuseTime(text);
  const [hour, minute, second] = [Number(match[1]), Number(match[2] ?? 0), Number(match[3] ?? 0)];
  if (minute > 59 || second > 59) return refuseTime(text);
  if (half === "a" || half === "p") return twelveHour(text, hour, minute, half);
  if (hour > 23) return refuseTime(text);
  const early = hour > 0 && hour < 6;
  return accept(
    write(hour, minute),
    early ? `${quoteCell(text)} was read as ${write(hour, minute)} in the early morning.` : undefined,
  );
}

function twelveHour(text: string, hour: number, minute: number, half: "a" | "p"): Parsed<string> {
  if (hour < 1 || hour > 12) return refuseTime(text);
  return accept(write((hour % 12) + (half === "p" ? 12 : 0), minute));
}

function refuseTime(text: string) {
  return refuse(
    "time.unreadable",
    `${quoteCell(text)} is not a time of day.`,
    "Write the time as hours and minutes, for example 17:30 or 5:30 pm.",
  );
}

function write(hour: number, minute: number) {
  return `${String(hour).padStart(2, "0")}:${String(minute).padStart(2, "0")}`;
}
