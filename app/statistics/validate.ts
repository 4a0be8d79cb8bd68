import type { Counted } from "./types";

export const defaultLevel = 0.95;
export const defaultPer = 1000;

/** Throws the module's one kind of error: the argument's name first, then what it must be. */
export function reject(name: string, must: string, got?: unknown): never {
  throw new RangeError(`${name}: must be ${must}${got === undefined ? "" : `, got ${String(got)}`}`);
}

export function requireFinite(name: string, value: number) {
  if (!Number.isFinite(value)) reject(name, "a finite number", value);
}

export function requirePositive(name: string, value: number) {
  if (!Number.isFinite(value) || value <= 0) reject(name, "a finite number above 0", value);
}

export function requireNonNegative(name: string, value: number) {
  if (!Number.isFinite(value) || value < 0) reject(name, "a finite number of 0 or more", value);
}

// Far above any count of injuries, days or years; beyond it the exact methods would take seconds.
const largestCount = 10_000_000;

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
