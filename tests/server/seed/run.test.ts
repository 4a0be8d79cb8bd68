import { execFile } from "node:child_process";
import { fileURLToPath } from "node:url";
import { describe, expect, it } from "vitest";
import { passwordProblem } from "~/features/accounts/passwords.server";
import { maintenance } from "../../harness";

const root = fileURLToPath(new URL("../../..", import.meta.url));

function run(args: readonly string[], env: Record<string, string>) {
  return new Promise<{ code: number; stdout: string; stderr: string }>((resolve) => {
    execFile(
      process.execPath,
      ["--import", "tsx", "db/seed/run.ts", ...args],
      { cwd: root, env: { ...process.env, ...env } },
      (error, stdout, stderr) => resolve({ code: error ? Number(error.code) : 0, stdout, stderr }),
    );
  });
}

describe("npm run seed", () => {
  it("refuses outside our own cluster, and loads nothing", async () => {
    for (const HALESIDE_LOCAL of ["", "0", "true"])
      for (const args of [[], ["--people"]]) {
        const { code, stdout, stderr } = await run(args, { HALESIDE_LOCAL });
        expect([code, stdout]).toEqual([1, ""]);
        expect(stderr).toContain("only in our own cluster");
      }
    const [row] = await maintenance()<{ rows: number }[]>`select count(*)::int as rows from organisations`;
    expect(row?.rows).toBe(0);
  });

  it("names whom to sign in as, with a password that the application itself would take", async () => {
    const { code, stdout } = await run(["--people"], { HALESIDE_LOCAL: "1" });
    expect(code).toBe(0);
    const people: { role: string; name: string; email: string; password: string }[] = JSON.parse(stdout);
    expect(people).toHaveLength(6);
    for (const { email, name, password } of people) {
      expect(email).toMatch(/@example\.org$/);
      expect(passwordProblem(password, { email, name })).toBeUndefined();
    }
  });

  it("loads, says no password, and is quiet the second time", async () => {
    const first = await run([], { HALESIDE_LOCAL: "1" });
    expect([first.code, first.stderr]).toEqual([0, ""]);
    expect(first.stdout).toContain("Marram Bay Athletic");
    expect(first.stdout).not.toMatch(/tide|@/);
    expect(await run([], { HALESIDE_LOCAL: "1" })).toEqual({ code: 0, stdout: "", stderr: "" });
  }, 120_000);
});
