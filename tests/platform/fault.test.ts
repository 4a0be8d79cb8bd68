import { DrizzleQueryError } from "drizzle-orm/errors";
import { describe, expect, it } from "vitest";
import { describeFault } from "~/platform/fault.server";

const failedQuery = (cause: Error) =>
  new DrizzleQueryError(
    "insert into athletes\n values ($1, $2)",
    ["Juniper Vale", "  at home\nat 2 Harbour Row"],
    cause,
  );

describe("what is said of an error", () => {
  it("is the code of a database error and none of the query's values", () => {
    const cause = Object.assign(new Error("duplicate (Juniper Vale)"), { code: "23505" });
    expect(describeFault(failedQuery(cause))).toEqual({ sqlState: "23505" });
  });

  it("holds no line of the message when the connection broke under a query", () => {
    const cause = Object.assign(new Error("write CONNECTION_CLOSED"), { code: "CONNECTION_CLOSED" });
    const said = JSON.stringify(describeFault(failedQuery(cause)));
    expect(said).not.toMatch(/Juniper|Harbour|home|insert|params/);
    expect(said).toContain("fault.test.ts");
  });

  it("names the kind and the place of any other error", () => {
    expect(describeFault(new TypeError("Juniper Vale is undefined"))).toEqual({
      error: expect.stringMatching(/^TypeError: at .*fault\.test\.ts/),
    });
    expect(describeFault("Juniper Vale")).toEqual({ error: "unknown" });
  });
});
