import { counts } from "./counts";
import type { Comparison } from "./draw";
import { figures } from "./figures";
import { models } from "./models";

/** Every exported function that R can compute; each name is an entry of tests/reference/against-r/compare.R. */
export const comparisons: Comparison[] = [...counts, ...models, ...figures];
