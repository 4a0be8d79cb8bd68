import type { Counted } from "./types";

export const defaultLevel = 0.95;
export const defaultPer = 1000;

/** Throws the module's one kind of error: the argument's name first, then what it must be. */
export function reject(name: string, must: string, got?: unknown): never {
  throw new RangeError(`${name}: must be ${must}${got === undefined ? "" : `, got ${String(got)}`}`);
}

// Far outside any exposure, rate or count of days; between them squares and quotients stay finite.
const largest = 1e60;
const smallest = 1e-60;

export function requireFinite(name: string, value: number) {
  if (!Number.isFinite(value) || Math.abs(value) > largest)
    reject(name, `a finite number, at most ${largest} in size`, value);
}

export function requirePositive(name: string, value: number) {
  if (!Number.isFinite(value) || value < smallest || value > largest)
    reject(name, `a finite number above 0 (${smallest} to ${largest})`, value);
}

export function requireNonNegative(name: string, value: number) {
  if (!Number.isFinite(value) || value < 0 || value > largest)
    reject(name, `a finite number of 0 or more, at most ${largest}`, value);
}

// Far above any count of injuries, days or years; beyond it the exact methods would take seconds.
export const largestCount = 10_000_000;

export function requireCount(name: string, value: number) {
  if (!Number.isInteger(value) || value < 0 || value > largestCount) {
    reject(name, `a whole number from 0 to ${largestCount}`, value);
  }
}

export function requireFraction(name: string, value: number) {
  if (!Number.isFinite(value) || value <= 0 || value >= 1)
    reject(name, "between 0 and 1, both excluded", value);
}

export function requireLevel(level: number) {
  requireFraction("level", level);
}

export function requireCounted(name: string, { events, exposure }: Counted) {
  const prefix = name === "" ? "" : `${name}.`;
  requireCount(`${prefix}events`, events);
  requirePositive(`${prefix}exposure`, exposure);
}

export function requireNonEmpty(name: string, values: readonly unknown[]) {
  if (values.length === 0) reject(name, "a list with at least one entry");
}
