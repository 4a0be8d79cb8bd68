import { appendFileSync, mkdirSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { handOver, must, writeOwned } from "./programs.mjs";
import { DATABASE, databaseStatements, roleStatements } from "./roles.mjs";

/**
 * Make the data folder aside and put it in place only when it is whole, so that a killed run leaves nothing that
 * looks like a cluster. Single-user mode sets it up before anybody can connect to it.
 *
 * @param {import("./binaries.mjs").Binaries} binaries
 * @param {string} home
 * @param {import("./secrets.mjs").Secrets} secrets
 * @param {boolean} lasting
 */
export async function makeData(binaries, home, secrets, lasting) {
  const aside = join(home, "data.new");
  rmSync(aside, { recursive: true, force: true });
  mkdirSync(aside, { mode: 0o700 });
  handOver(aside);
  const password = join(home, "password.new");
  writeFileSync(password, secrets.superuser, { mode: 0o600 });
  handOver(password);
  try {
    await must(binaries, "Making the local database", "initdb", [
      ...["-D", aside, "-U", "postgres", "-E", "UTF8", "--locale=C.UTF-8", `--pwfile=${password}`],
      ...["--auth-local=scram-sha-256", "--auth-host=scram-sha-256", ...(lasting ? [] : ["--no-sync"])],
    ]);
  } finally {
    rmSync(password, { force: true });
  }
  appendFileSync(join(aside, "postgresql.conf"), "\ninclude 'haleside.conf'\n");
  writeOwned(join(aside, "haleside.conf"), "");
  const fast = lasting ? [] : ["-c", "fsync=off"];
  for (const [database, statements] of /** @type {const} */ ([
    ["postgres", roleStatements(secrets)],
    [DATABASE, databaseStatements()],
  ])) {
    // In -j mode a statement ends with a semicolon and an empty line.
    const input = statements.map((statement) => `${statement};\n\n`).join("");
    const options = [
      "-c",
      "exit_on_error=on",
      "-c",
      "password_encryption=scram-sha-256",
      "-c",
      "log_statement=none",
    ];
    await must(
      binaries,
      "Setting up the local database",
      "postgres",
      ["--single", "-j", "-D", aside, ...options, ...fast, database],
      input,
    );
  }
  renameSync(aside, join(home, "data"));
}
