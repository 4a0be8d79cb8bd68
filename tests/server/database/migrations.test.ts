import { cpSync, readdirSync, rmSync } from "node:fs";
import { join } from "node:path";
import { expect, it } from "vitest";
import { tool } from "../../../app/platform/launch/modules.mjs";
import { run } from "../../../app/platform/machine/command.mjs";
import { privateFolder, ROOT } from "../../../app/platform/machine/places.mjs";
import { migrateDatabase } from "../../../db/migrate";
import { owner } from "../../harness";
import { listPolicies } from "./catalogue.queries";

it("has a migration for everything the schema says", async () => {
  // The generator takes a path relative to the checkout only.
  const name = `migrations.${process.pid}`;
  const copy = join(privateFolder("test-migrations"), name);
  cpSync(join(ROOT, "db/migrations"), copy, { recursive: true });
  try {
    const before = readdirSync(copy);
    const { output } = await run(
      tool("drizzle-kit"),
      [
        "generate",
        "--dialect=postgresql",
        "--schema=db/schema/index.ts",
        `--out=.haleside/test-migrations/${name}`,
      ],
      { cwd: ROOT },
    );
    expect(output).toContain("No schema changes");
    expect(readdirSync(copy)).toEqual(before);
  } finally {
    rmSync(copy, { recursive: true, force: true });
  }
});

it("changes nothing when it is run again, and refuses a key that is not the database's", async () => {
  const urls = {
    owner: process.env.DATABASE_OWNER_URL ?? "",
    maintenance: process.env.DATABASE_MAINTENANCE_URL ?? "",
  };
  const shape = () => owner()`select table_name, column_name, data_type, is_nullable, column_default
    from information_schema.columns where table_schema in ('public', 'auth', 'installation') order by 1, 2`;
  const before = [await shape(), await listPolicies()];
  await migrateDatabase(urls, Buffer.from(process.env.HALESIDE_MASTER_KEY ?? "", "base64"));
  expect([await shape(), await listPolicies()]).toEqual(before);
  await expect(migrateDatabase(urls, Buffer.alloc(32, 7))).rejects.toThrow("does not open this database");
});
