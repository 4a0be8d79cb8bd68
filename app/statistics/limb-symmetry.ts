import { reject, requireNonNegative, requirePositive } from "./validate";

/**
 * Limb symmetry index in per cent; 100 is equal. For strength and distances (`higher` is better) injured /
 * uninjured, for timed tests (`lower` is better) uninjured / injured. It says nothing about a bilateral injury,
 * and the uninjured limb loses strength too: keep both raw values.
 * @throws RangeError naming `injured`, `uninjured` or `better`
 */
export function limbSymmetryIndex({
  injured,
  uninjured,
  better,
}: {
  injured: number;
  uninjured: number;
  better: "higher" | "lower";
}) {
  requirePositive("uninjured", uninjured);
  if (better === "higher") {
    // 0 is a result: the injured limb could not do it.
    requireNonNegative("injured", injured);
    return (injured / uninjured) * 100;
  }
  if (better !== "lower") reject("better", "higher or lower", better);
  requirePositive("injured", injured);
  return (uninjured / injured) * 100;
}
