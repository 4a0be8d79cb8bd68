import type { TargetSize } from "./button";
import { joinClasses } from "./classes";

/** Widths follow what is typed: a date is short, a name is not. */
export type InputWidth = "short" | "medium" | "full";

const widths: Record<InputWidth, string> = {
  short: "w-full max-w-[11rem]",
  medium: "w-full max-w-[20rem]",
  full: "w-full max-w-[36rem]",
};

export function inputClasses(width: InputWidth = "full", size: TargetSize = "regular") {
  return joinClasses(
    "block rounded-md border border-edge bg-paper px-3 py-2 text-ink",
    "disabled:bg-chalk disabled:text-soft [&[readonly]]:bg-chalk",
    "aria-invalid:border-berry aria-invalid:border-[3px]",
    size === "large" ? "min-h-target-large" : "min-h-target",
    widths[width],
  );
}
