import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { z } from "zod";
import { comparisons } from "./comparisons";
import { differenceOf, readFigure } from "./difference";

// Answers of R, kept by `npm run against-r -- --freeze`; `version` says which R.
const sample = z
  .object({
    version: z.string().startsWith("R version"),
    functions: z.array(
      z.object({
        name: z.string(),
        cases: z.array(z.object({ input: z.unknown(), values: z.record(z.string(), z.string()) })),
      }),
    ),
  })
  .parse(JSON.parse(readFileSync(new URL("../../reference/against-r/sample.json", import.meta.url), "utf8")));

describe("the frozen sample of R's answers", () => {
  it("has some for every function that is compared", () => {
    expect(sample.functions.map(({ name }) => name)).toEqual(comparisons.map(({ name }) => name));
  });

  it.each(sample.functions.map(({ name, cases }) => [name, cases] as const))(
    "%s agrees to 1e-6",
    (name, cases) => {
      const comparison = comparisons.find((one) => one.name === name) ?? expect.fail(name);
      expect(cases.length).toBeGreaterThanOrEqual(8);
      for (const { input, values } of cases) {
        const ours = comparison.again(input) ?? expect.fail(`${name} refuses ${JSON.stringify(input)}`);
        for (const [figure, text] of Object.entries(values)) {
          const what = `${figure}: ours ${ours[figure]}, R ${text}, of ${JSON.stringify(input)}`;
          expect(differenceOf(ours[figure], readFigure(text)), what).toBeLessThanOrEqual(1e-6);
        }
      }
    },
  );
});
