import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { contrast, parseOklch, toHex, toLinearSrgb } from "./oklch";

type Tokens = ReadonlyMap<string, string>;

const css = readFileSync(new URL("../../app/app.css", import.meta.url), "utf8").replace(
  /\/\*[\s\S]*?\*\//g,
  "",
);

/** The colour tokens of the first block that follows `marker`; inner values win over `base`. */
function readTokens(marker: string, base?: Tokens): Tokens {
  const start = css.indexOf(marker);
  if (start < 0) throw new Error(`app.css has no block that starts with ${marker}`);
  const open = css.indexOf("{", start);
  const block = css.slice(open + 1, css.indexOf("}", open));
  const found = [...block.matchAll(/--color-([\w-]+):\s*(oklch\([^)]*\))/g)].map(
    (match) => [match[1] ?? "", match[2] ?? ""] as const,
  );
  if (found.length < 20) throw new Error(`Only ${found.length} colours after ${marker}`);
  return new Map([...(base ?? []), ...found]);
}

const light = readTokens("@theme static {");
const darkByDevice = readTokens(":root:not([data-scheme]) {", light);
const dark = readTokens(':root[data-scheme="dark"] {', light);
const daylight = readTokens(':root[data-scheme="daylight"] {', light);
const print = readTokens(":root:not([data-scheme]) {\n    color-scheme: light;", light);

const washes = ["lagoon-wash", "ember-wash", "berry-wash", "moss-wash"];
const series = [1, 2, 3, 4, 5, 6, 7, 8];

/** Each text and the grounds it may stand on. */
const textPairs: [text: string, ground: string][] = [
  ...["chalk", "paper", ...washes].flatMap((ground): [string, string][] => [
    ["ink", ground],
    ["soft", ground],
  ]),
  ...["lagoon", "ember", "berry", "moss"].flatMap((text): [string, string][] => [
    [text, "chalk"],
    [text, "paper"],
    [text, `${text}-wash`],
  ]),
  ["chalk", "ink"],
  ["on-lagoon", "lagoon"],
  ["on-lagoon", "lagoon-deep"],
  ["on-berry", "berry"],
  ["on-berry", "berry-deep"],
  ["on-bar", "bar"],
  ["sand", "bar"],
  ...series.flatMap((n): [string, string][] => [
    [`series-${n}-text`, "chalk"],
    [`series-${n}-text`, "paper"],
  ]),
];

/** Shapes that carry meaning and the borders of controls: 3:1 by WCAG 2.2, 1.4.11. */
const shapePairs: [shape: string, ground: string][] = [
  ...["chalk", "paper"].flatMap((ground): [string, string][] => [
    ["edge", ground],
    ["focus", ground],
    ...series.map((n): [string, string] => [`series-${n}`, ground]),
  ]),
];

function ratio(tokens: Tokens, one: string, other: string) {
  const [a, b] = [tokens.get(one), tokens.get(other)];
  if (!a || !b) throw new Error(`Missing token: ${a ? other : one}`);
  return contrast(parseOklch(a), parseOklch(b));
}

describe("the conversion itself", () => {
  test("white on black is 21 and equal colours are 1", () => {
    const white = parseOklch("oklch(1 0 0)");
    expect(contrast(white, parseOklch("oklch(0 0 0)"))).toBeCloseTo(21, 2);
    expect(contrast(white, white)).toBe(1);
  });

  test("reads published pairs: CSS Color 4 gives oklch(0.40101 0.12332 21.555) for #7d2329", () => {
    expect(toHex(parseOklch("oklch(0.40101 0.12332 21.555)"))).toBe("#7d2329");
  });

  test("grey #767676 on white is the well-known 4.54", () => {
    expect(contrast(parseOklch("oklch(0.5657 0 0)"), parseOklch("oklch(1 0 0)"))).toBeCloseTo(4.54, 1);
  });
});

describe.each([
  ["light", light, 4.5],
  ["dark by device", darkByDevice, 4.5],
  ["dark by choice", dark, 4.5],
  ["daylight", daylight, 7],
  ["print", print, 7],
] as const)("%s scheme", (_name, tokens, least) => {
  test.each(textPairs)("text %s on %s", (text, ground) => {
    const needed = text === "sand" ? 3 : least;
    expect(ratio(tokens, text, ground)).toBeGreaterThanOrEqual(needed);
  });

  test.each(shapePairs)("shape %s on %s", (shape, ground) => {
    expect(ratio(tokens, shape, ground)).toBeGreaterThanOrEqual(3);
  });

  test("every colour can be shown by an sRGB screen", () => {
    const outside = [...tokens].filter(([, value]) =>
      toLinearSrgb(parseOklch(value)).some((channel) => channel < -0.006 || channel > 1.006),
    );
    expect(outside).toEqual([]);
  });
});

test("the two dark blocks are the same", () => {
  expect([...darkByDevice]).toEqual([...dark]);
});

test("series colours that need no change are the published ones", () => {
  expect(toHex(parseOklch(light.get("series-1") ?? ""))).toBe("#0072b2");
  expect(toHex(parseOklch(light.get("series-2") ?? ""))).toBe("#d55e00");
  expect(toHex(parseOklch(light.get("series-3") ?? ""))).toBe("#009e73");
  expect(toHex(parseOklch(dark.get("series-5") ?? ""))).toBe("#e69f00");
  expect(toHex(parseOklch(light.get("sand") ?? ""))).toBe("#f2b872");
});
