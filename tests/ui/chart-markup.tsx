import fc from "fast-check";
import type { ReactElement } from "react";
import { renderToStaticMarkup } from "react-dom/server";
import { StaticRouter } from "react-router";
import { expect } from "vitest";

/** A chart as the server sends it. */
export const draw = (chart: ReactElement): string =>
  renderToStaticMarkup(<StaticRouter location="/">{chart}</StaticRouter>);

/** How often a piece of markup stands in it. */
export const count = (html: string, piece: string): number => html.split(piece).length - 1;

/** Every number of an attribute with this name. */
export const numbersOf = (html: string, attribute: string): number[] =>
  [...html.matchAll(new RegExp(` ${attribute}="([^"]*)"`, "g"))].map((match) => Number(match[1]));

/** No figure that is none reaches a page, and nothing has a size below 0. */
export function expectSound(html: string) {
  expect(html).not.toMatch(/NaN|Infinity|undefined|\[object/);
  for (const size of ["width", "height", "r"])
    expect(Math.min(0, ...numbersOf(html, size).filter((value) => !Number.isNaN(value)))).toBe(0);
}

/** What a computation may hand over at its worst. */
export const figure = fc.oneof(
  fc.double({ min: 0, max: 100, noNaN: true }),
  fc.constantFrom(0, 1, Number.MIN_VALUE, 1e-9, 1e9, 1e15, 1e300, Number.NaN, Number.POSITIVE_INFINITY),
);
export const words = fc.constantFrom(
  "",
  "ankle",
  "lower back and pelvis",
  "Girls under 16, second team, Saturdays",
);
export const periods = fc
  .integer({ min: 0, max: 70 })
  .map((length) => Array.from({ length }, (_, index) => `${(index % 28) + 1} Aug`));
