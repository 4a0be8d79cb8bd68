import { spawnSync } from "node:child_process";
import { mkdtempSync, readFileSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { bornOf, holderOf, tryLock, unlock, withLock } from "~/platform/machine/lock.mjs";

const lockFile = () => join(mkdtempSync(join(tmpdir(), "haleside-lock-")), "serve");

describe("a lock between runs", () => {
  it("names its holder to whoever comes second", () => {
    const file = lockFile();
    expect(tryLock(file, "npm start", "http://localhost:3000")).toBeUndefined();
    expect(tryLock(file, "npm start")).toMatchObject({ pid: process.pid, note: "http://localhost:3000" });
    unlock(file);
    expect(holderOf(file)).toBeUndefined();
  });

  it("is taken over from a process that is gone", () => {
    const gone = spawnSync("true").pid;
    const file = lockFile();
    writeFileSync(file, JSON.stringify({ pid: gone, born: "1", what: "npm start" }));
    expect(tryLock(file, "npm test")).toBeUndefined();
    expect(JSON.parse(readFileSync(file, "utf8"))).toMatchObject({ pid: process.pid, what: "npm test" });
  });

  it("is taken over when its number belongs to another process by now", () => {
    const file = lockFile();
    writeFileSync(
      file,
      JSON.stringify({ pid: process.pid, born: `${bornOf(process.pid)}0`, what: "npm start" }),
    );
    expect(tryLock(file, "npm test")).toBeUndefined();
  });

  it("is taken over when it is not readable as a lock", () => {
    const file = lockFile();
    writeFileSync(file, "half a l");
    expect(tryLock(file, "npm test")).toBeUndefined();
  });

  it("lets the second wait until the first has done its work", async () => {
    const file = lockFile();
    const order: string[] = [];
    let told = 0;
    let finish = () => {};
    const first = withLock(
      file,
      "first",
      () => {},
      async () => {
        order.push("first begins");
        await new Promise<void>((resolve) => {
          finish = resolve;
        });
        order.push("first ends");
      },
    );
    const onWait = () => {
      told += 1;
      finish();
    };
    const second = withLock(file, "second", onWait, async () => {
      order.push("second");
    });
    await Promise.all([first, second]);
    expect(order).toEqual(["first begins", "first ends", "second"]);
    expect(told).toBe(1);
  });
});
