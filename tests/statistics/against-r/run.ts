import { spawnSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { z } from "zod";
import { comparisons } from "./comparisons";
import { differenceOf, readFigure } from "./difference";
import { makeDraw } from "./draw";

// Compares every exported figure with R: `npm run against-r [cases a function] [--freeze]`.
// `--freeze` also writes the first cases of each function to sample.json, which a test then holds ours against.

const install =
  "R is needed for this (npm test does not need it). On Debian:\n" +
  "  apt-get install r-base-core r-cran-jsonlite r-cran-survival r-cran-epitools r-cran-mass r-cran-sandwich r-cran-geepack";
const largestAllowed = 1e-6;
const frozenPerFunction = 10;

const answersFile = z.object({
  version: z.string(),
  answers: z.array(
    z.object({ values: z.record(z.string(), z.string()).optional(), none: z.string().optional() }),
  ),
});

function askR(cases: { name: string; input: unknown }[]) {
  if (spawnSync("Rscript", ["--version"]).status !== 0) stop(install);
  const folder = mkdtempSync(join(tmpdir(), "against-r-"));
  try {
    writeFileSync(join(folder, "cases.json"), JSON.stringify(cases));
    const script = new URL("../../reference/against-r/compare.R", import.meta.url).pathname;
    const { status } = spawnSync("Rscript", ["--vanilla", script, folder], { stdio: "inherit" });
    if (status !== 0) stop(status === 3 ? install : `R ended with ${status}`);
    return answersFile.parse(JSON.parse(readFileSync(join(folder, "answers.json"), "utf8")));
  } finally {
    rmSync(folder, { recursive: true });
  }
}

function stop(why: string): never {
  console.error(why);
  process.exit(1);
}

const perFunction = Number(process.argv.find((word) => /^\d+$/.test(word)) ?? 120);
const cases = comparisons.flatMap((comparison, index) => {
  const draw = makeDraw(1_000 + index);
  return Array.from({ length: perFunction }, () => ({ name: comparison.name, ...comparison.next(draw) }));
});
// What ours refuses R is not asked: geepack never returns from some data on which the iteration does not settle.
const asked = cases.filter(({ ours }) => ours !== null);
const { version, answers: given } = askR(asked.map(({ name, input }) => ({ name, input })));
const answerOf = new Map(asked.map((one, index) => [one, given[index]]));
const answers = cases.map((one) => answerOf.get(one));

console.log(`${version}; ${cases.length} cases\n`);
// Left out: what ours refuses (no event at all, one group only, no more spread than chance, no fit) and what R cannot.
console.log(
  `${"function".padEnd(34)}${"compared".padStart(9)}${"refused".padStart(9)}${"R cannot".padStart(9)}  largest relative difference`,
);
let failed = false;
for (const { name } of comparisons) {
  const own = cases.flatMap((one, index) => (one.name === name ? [{ ...one, answer: answers[index] }] : []));
  const compared = own.flatMap(({ ours, input, answer }) =>
    ours && answer?.values
      ? Object.entries(answer.values).map(([figure, value]) => ({
          figure,
          input,
          ours: ours[figure],
          theirs: readFigure(value),
          difference: differenceOf(ours[figure], readFigure(value)),
        }))
      : [],
  );
  const worst = compared.reduce(
    (a, b) => (b.difference > a.difference ? b : a),
    compared[0] ?? stop(`${name}: nothing to compare`),
  );
  const refused = own.filter(({ ours }) => !ours).length;
  const used = own.filter(({ ours, answer }) => ours && answer?.values).length;
  const numbers = [used, refused, own.length - used - refused].map((n) => String(n).padStart(9)).join("");
  const line = `${name.padEnd(34)}${numbers}`;
  console.log(`${line}  ${worst.difference.toExponential(1)} (${worst.figure})`);
  if (worst.difference <= largestAllowed) continue;
  failed = true;
  console.log(`  ours ${worst.ours}, R ${worst.theirs}: ${JSON.stringify(worst.input).slice(0, 600)}`);
}

if (process.argv.includes("--freeze")) {
  const frozen = comparisons.map(({ name }) => ({
    name,
    cases: cases
      .flatMap(({ input, ours, ...one }, index) => {
        const values = answers[index]?.values;
        return one.name === name && ours && values ? [{ input, values }] : [];
      })
      .slice(0, frozenPerFunction),
  }));
  const path = new URL("../../reference/against-r/sample.json", import.meta.url).pathname;
  writeFileSync(path, `${JSON.stringify({ version, functions: frozen })}\n`);
}
if (failed) stop("\nA difference above 1e-6 wants an explanation or a mend.");
