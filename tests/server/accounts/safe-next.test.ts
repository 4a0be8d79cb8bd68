import { expect, it } from "vitest";
import { safeNext } from "~/middleware/client.server";

it.each([
  ["/marram-bay/today?team=1", "/marram-bay/today?team=1"],
  ["//elsewhere.example.org", "/"],
  ["/\t/elsewhere.example.org", "/"],
  ["/\n/elsewhere.example.org", "/"],
  ["/\\elsewhere.example.org", "/"],
  ["/.//elsewhere.example.org", "/"],
  ["https://elsewhere.example.org", "/"],
  ["javascript:alert(1)", "/"],
  ["", "/"],
  [null, "/"],
])("goes back from sign-in to %j only as far as %j", (asked, expected) => {
  expect(safeNext(asked)).toBe(expected);
});
