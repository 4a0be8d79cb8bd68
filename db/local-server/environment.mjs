import { existsSync } from "node:fs";
import { join } from "node:path";
import { Failure } from "../../app/platform/machine/failure.mjs";
import { ROOT } from "../../app/platform/machine/places.mjs";
import { clusterHome, clusterUrls, openCluster } from "./cluster.mjs";
import { readEnvFile, writeEnvFile } from "./env-file.mjs";
import { findFreePort, isPortFree } from "./ports.mjs";
import { readSecrets, secretsFromEnvironment } from "./secrets.mjs";

/** The environment of every program of this project, from the shell, `.env` and the local cluster. */

export const ENV_FILE = join(ROOT, ".env");

const NEEDED_WITH_OTHER_SERVER = {
  DATABASE_OWNER_URL: "the role that owns the database and runs the migrations",
  DATABASE_AUTH_URL: "the role of the sign-in tables",
  DATABASE_MAINTENANCE_URL: "the role with BYPASSRLS for backups and erasure",
  HALESIDE_MASTER_KEY:
    "the key of that database, 32 bytes in base64 (a new database: openssl rand -base64 32)",
  BETTER_AUTH_SECRET: "what signs the sessions (a new database: openssl rand -base64 32)",
};

/**
 * Whether the shell or the person's own lines of `.env` name another database server than our own cluster.
 *
 * @returns {Record<string, string> | undefined} the complete environment of that server; undefined for our own
 * @throws {Failure} when what belongs to that server is not all given
 */
export function otherServer() {
  const { own, made } = readEnvFile(ENV_FILE);
  const given = { ...own, ...definedOf(process.env) };
  // A hand-edited address inside the made part counts as the person's own.
  const url = given.DATABASE_URL ?? (isOurs(made.DATABASE_URL) ? undefined : made.DATABASE_URL);
  if (!url) return undefined;
  // A shell that has loaded the made part of `.env` still means our own cluster.
  if (isOurs(url) && given.HALESIDE_LOCAL === "1") return undefined;
  const missing = Object.entries(NEEDED_WITH_OTHER_SERVER).filter(([name]) => !given[name]);
  if (missing.length > 0) {
    throw new Failure(
      `DATABASE_URL names a database server, but ${missing.map(([name]) => name).join(", ")} ${missing.length === 1 ? "is" : "are"} not set.`,
      `Set in the environment or in .env: ${missing.map(([name, what]) => `${name} (${what})`).join("; ")}. Or unset DATABASE_URL to use a database of this machine.`,
    );
  }
  return { ...given, DATABASE_URL: url };
}

/**
 * Bring the local cluster up and write `.env`.
 *
 * @param {object} [wish]
 * @param {boolean} [wish.keep] leave the cluster running after this process
 * @param {string} [wish.origin] a server is about to be started there: its mail fake needs a port that is free now
 * @param {(leave: () => Promise<void>) => void} [wish.onStart]
 * @param {(line: string) => void} [wish.onNote] told what a person should know
 * @returns {Promise<{ cluster: import("./cluster.mjs").Cluster, env: Record<string, string> }>}
 */
export async function openLocalServer({ keep = false, origin, onStart, onNote } = {}) {
  const { own, made } = readEnvFile(ENV_FILE);
  const home = clusterHome("dev");
  const hasCluster = existsSync(join(home, "data"));
  const kept = readSecrets(join(home, "secrets.json"));
  if (!hasCluster && made.HALESIDE_MASTER_KEY) {
    onNote?.("the database that .env belongs to is gone: a new one is made with the same secrets");
  }
  if (hasCluster && kept && made.HALESIDE_MASTER_KEY && made.HALESIDE_MASTER_KEY !== kept.masterKey) {
    throw new Failure(
      "The HALESIDE_MASTER_KEY in .env is not the one that the local database was made with.",
      "Delete the made part of .env (it is made again from the copy beside the database), or put the key back.",
    );
  }
  const carried = kept ?? secretsFromEnvironment(made);
  const cluster = await openCluster({
    name: "dev",
    keep,
    ...(carried ? { secrets: carried } : {}),
    ...(onStart ? { onStart } : {}),
  });
  const local = localEnvironment(
    cluster,
    await mailPort(made.MAIL_FAKE_PORT, origin !== undefined),
    origin ?? made.APP_ORIGIN,
  );
  writeEnvFile(ENV_FILE, local);
  return { cluster, env: withOwnWords(local, own) };
}

/**
 * What a program needs to use a local cluster.
 *
 * @param {Pick<import("./cluster.mjs").Cluster, "port" | "secrets">} cluster
 * @param {number} mailPort
 * @param {string} [origin] where people reach the application
 * @returns {Record<string, string>}
 */
export function localEnvironment(cluster, mailPort, origin = "http://localhost:3000") {
  const urls = clusterUrls(cluster);
  const { secrets } = cluster;
  return {
    HALESIDE_LOCAL: "1",
    APP_ORIGIN: origin,
    DATABASE_URL: urls.app,
    DATABASE_OWNER_URL: urls.owner,
    DATABASE_AUTH_URL: urls.auth,
    DATABASE_MAINTENANCE_URL: urls.maintenance,
    HALESIDE_MASTER_KEY: secrets.masterKey,
    BETTER_AUTH_SECRET: secrets.betterAuth,
    RESEND_API_KEY: secrets.mailKey,
    RESEND_BASE_URL: `http://127.0.0.1:${mailPort}`,
    RESEND_WEBHOOK_SECRET: secrets.webhook,
    MAIL_FAKE_PORT: String(mailPort),
  };
}

/**
 * The local environment under the person's own lines of `.env` and the shell's variables. The database stays the
 * local one; with a mail key of their own, mail goes to the real service.
 *
 * @param {Record<string, string>} local
 * @param {Record<string, string>} own
 * @returns {Record<string, string>}
 */
function withOwnWords(local, own) {
  const shell = definedOf(process.env);
  // A shell that loaded an earlier `.env` holds old ports; the made part of now is right.
  const stale = shell.HALESIDE_LOCAL === "1" ? Object.keys(local) : [];
  const words = { ...own, ...without(shell, stale) };
  const base = words.RESEND_API_KEY
    ? without(local, ["RESEND_BASE_URL", "MAIL_FAKE_PORT", "RESEND_WEBHOOK_SECRET"])
    : local;
  const databases = Object.keys(local).filter((name) => name.startsWith("DATABASE_"));
  return { ...base, ...without(words, databases) };
}

/**
 * The mail fake's port: the remembered one, unless a server is to be started and another program took it.
 *
 * @param {string | undefined} remembered
 * @param {boolean} serves
 */
async function mailPort(remembered, serves) {
  const port = Number(remembered);
  const isPort = Number.isInteger(port) && port > 1023 && port < 65_536;
  if (isPort && (!serves || (await isPortFree(port)))) return port;
  return findFreePort(8025);
}

/** Whether an address is one that we make: the app's role on the loopback address. @param {string | undefined} url */
function isOurs(url) {
  if (url === undefined) return true;
  if (!URL.canParse(url)) return false;
  const { hostname, username, pathname } = new URL(url);
  return hostname === "127.0.0.1" && username === "haleside_app" && pathname === "/haleside";
}

/** @param {NodeJS.ProcessEnv} env @returns {Record<string, string>} */
function definedOf(env) {
  /** @type {Record<string, string>} */
  const values = {};
  for (const [name, value] of Object.entries(env))
    if (value !== undefined && value !== "") values[name] = value;
  return values;
}

/** @param {Record<string, string>} values @param {readonly string[]} names */
function without(values, names) {
  return Object.fromEntries(Object.entries(values).filter(([name]) => !names.includes(name)));
}
