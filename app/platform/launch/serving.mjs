import { join } from "node:path";
import { readEnvFile } from "../../../db/local-server/env-file.mjs";
import { ENV_FILE, openLocalServer, otherServer } from "../../../db/local-server/environment.mjs";
import { findFreePort, isPortFree } from "../../../db/local-server/ports.mjs";
import { Failure } from "../machine/failure.mjs";
import { tryLock, withLock } from "../machine/lock.mjs";
import { privateFolder } from "../machine/places.mjs";
import { ensureModules } from "./modules.mjs";
import { note, say, step, tableLines } from "./output.mjs";
import { demoPeople, migrate, seed } from "./programs.mjs";
import { onStop } from "./stop.mjs";

/** What `npm start` and `npm run dev` have in common. */

const USUAL_PORT = 3000;

/**
 * @typedef {object} Stage
 * @property {Record<string, string>} env complete, for the server
 * @property {boolean} local our own cluster, with the demo in it
 */

/**
 * Make sure that this checkout is served only once, and find the port.
 *
 * @param {string} command
 * @returns {Promise<number>}
 */
export async function claimPort(command) {
  // What is wrong with the settings is said before anything is installed.
  otherServer();
  const wished = process.env.PORT || readEnvFile(ENV_FILE).own.PORT;
  const port = wished ? Number(wished) : await findFreePort(USUAL_PORT);
  if (!Number.isInteger(port) || port < 1 || port > 65_535) {
    throw new Failure(
      `PORT is ${wished}, which is no port.`,
      "Set PORT to a number from 1 to 65535, or leave it out.",
    );
  }
  const holder = tryLock(serveLock(), command, `http://localhost:${port}`);
  if (holder) {
    throw new Failure(
      `${holder.what} already runs in this folder, at ${holder.note} (process ${holder.pid}).`,
      `Open that address, or stop it first with: kill ${holder.pid}`,
    );
  }
  if (wished && !(await isPortFree(port))) {
    throw new Failure(
      `Port ${port} is taken by another program, or this user may not use it.`,
      "Set PORT to another number, or leave it out and a free one is found.",
    );
  }
  return port;
}

/** Held by whoever serves this checkout. */
export function serveLock() {
  return join(privateFolder("locks"), "serve");
}

/**
 * Do what changes the checkout (packages, build) while no other run does.
 *
 * @template T
 * @param {string} command
 * @param {() => Promise<T>} work
 */
export function whilePreparing(command, work) {
  const file = join(privateFolder("locks"), "prepare");
  return withLock(
    file,
    command,
    (holder) => note(`waiting for ${holder.what} (process ${holder.pid})`),
    work,
  );
}

/** @param {string} command */
export function prepareModules(command) {
  return whilePreparing(command, () =>
    step("packages", "installing, about a minute", async () => ({
      done: await ensureModules(),
      value: undefined,
    })),
  );
}

/**
 * The database: another server if one is named, else our own cluster; brought up to date, the demo loaded.
 *
 * @param {number} port
 * @returns {Promise<Stage>}
 */
export async function prepareDatabase(port) {
  const other = otherServer();
  const origin = givenOrigin() ?? `http://localhost:${port}`;
  const env = { ...(other ?? (await localServer(origin))), PORT: String(port), APP_ORIGIN: origin };
  if (other) {
    const mail = await mailOf(other);
    await upToDate({ ...env, ...mail });
    return { env: { ...env, ...mail }, local: false };
  }
  await upToDate(env);
  await step("demo", "loading, about a minute the first time", async () => {
    await seed(env);
    return { done: "there", value: undefined };
  });
  return { env, local: true };
}

/** @param {string} origin */
async function localServer(origin) {
  return step("database", "starting", async () => {
    const { cluster, env } = await openLocalServer({ origin, onStart: onStop, onNote: note });
    const deed = cluster.made ? "made and started" : cluster.started ? "started" : "running";
    return { done: `PostgreSQL ${cluster.major} ${deed} on 127.0.0.1:${cluster.port}`, value: env };
  });
}

/** @param {Record<string, string>} env */
async function upToDate(env) {
  await step("migrations", "applying", async () => {
    await migrate(env);
    return { done: "up to date", value: undefined };
  });
}

/**
 * Without a mail key, mail of a server elsewhere stays on this machine too.
 *
 * @param {Record<string, string>} given
 * @returns {Promise<Record<string, string>>}
 */
async function mailOf(given) {
  if (given.RESEND_API_KEY) return {};
  const port = given.MAIL_FAKE_PORT ?? String(await findFreePort(8025));
  note("no RESEND_API_KEY: mail goes to an inbox on this machine");
  return {
    RESEND_API_KEY: "re_local_inbox",
    RESEND_BASE_URL: `http://127.0.0.1:${port}`,
    MAIL_FAKE_PORT: port,
    RESEND_WEBHOOK_SECRET:
      given.RESEND_WEBHOOK_SECRET ?? `whsec_${Buffer.alloc(24, port).toString("base64")}`,
  };
}

/** An address that a person set; the one in the made part of `.env` is ours to choose. */
function givenOrigin() {
  const { own, made } = readEnvFile(ENV_FILE);
  const shell = process.env.APP_ORIGIN === made.APP_ORIGIN ? undefined : process.env.APP_ORIGIN;
  return shell || own.APP_ORIGIN;
}

/**
 * What a person needs now: where it is, and whom to sign in as.
 *
 * @param {Stage} stage
 */
export async function announce({ env, local }) {
  const people = local ? await demoPeople(env) : [];
  const places = [["Haleside", env.APP_ORIGIN ?? ""]];
  if (env.MAIL_FAKE_PORT)
    places.push(["Inbox", `http://127.0.0.1:${env.MAIL_FAKE_PORT}   (mail that would have been sent)`]);
  say();
  for (const line of tableLines(places)) say(`  ${line}`);
  if (people.length > 0) {
    say("\n  Sign in as");
    const rows = people.map(({ role, name, email, password }) => [role, name, email, password]);
    for (const line of tableLines(rows)) say(`    ${line}`);
  }
  say("\n  Ctrl-C stops everything.");
}
