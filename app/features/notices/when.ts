import { dayIn, timeIn } from "~/platform/clock";
import { formatDay } from "~/platform/days";
import type { SayWhen } from "./notice-state";

/** Writes instants on the organisation's clock: "today 14:03", "3 Dec 14:03", "3 Dec 2025 14:03". */
export function sayWhenIn({ timeZone, today }: { timeZone: string; today: string }): SayWhen {
  return (at) => {
    const day = dayIn(timeZone, at);
    const time = timeIn(timeZone, at);
    if (day === today) return `today ${time}`;
    return `${formatDay(day, day.slice(0, 4) === today.slice(0, 4) ? "day-month" : "short")} ${time}`;
  };
}
