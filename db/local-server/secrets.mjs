import { randomBytes } from "node:crypto";
import { existsSync, readFileSync, renameSync, writeFileSync } from "node:fs";
import { Failure } from "../../app/platform/machine/failure.mjs";

/**
 * What a local cluster and the programs that use it keep secret. Made only together with a new cluster: the
 * master key opens what the cluster stores, so a key made later would open nothing.
 */

/**
 * @typedef {object} Secrets
 * @property {string} superuser password of the cluster's superuser `postgres`
 * @property {string} owner password of haleside_owner
 * @property {string} app password of haleside_app
 * @property {string} auth password of haleside_auth
 * @property {string} maintenance password of haleside_maintenance
 * @property {string} masterKey 32 bytes, base64
 * @property {string} betterAuth
 * @property {string} mailKey
 * @property {string} webhook `whsec_` and base64
 */

/** @returns {Secrets} */
export function makeSecrets() {
  const word = () => randomBytes(24).toString("base64url");
  return {
    superuser: word(),
    owner: word(),
    app: word(),
    auth: word(),
    maintenance: word(),
    masterKey: randomBytes(32).toString("base64"),
    betterAuth: randomBytes(32).toString("base64"),
    mailKey: `re_local_${randomBytes(12).toString("hex")}`,
    webhook: `whsec_${randomBytes(24).toString("base64")}`,
  };
}

/**
 * The secrets kept beside a cluster.
 *
 * @param {string} file
 * @returns {Secrets | undefined}
 */
export function readSecrets(file) {
  if (!existsSync(file)) return undefined;
  try {
    return { ...makeSecrets(), ...JSON.parse(readFileSync(file, "utf8")) };
  } catch {
    throw new Failure(
      `The secrets beside the local database (${file}) cannot be read.`,
      "Put the file back from a backup, or begin again with: npm run reset",
    );
  }
}

/**
 * Keep the secrets where only this user can read them.
 *
 * @param {string} file
 * @param {Secrets} secrets
 */
export function writeSecrets(file, secrets) {
  writeFileSync(`${file}.new`, `${JSON.stringify(secrets, null, 2)}\n`, { mode: 0o600 });
  renameSync(`${file}.new`, file);
}

/**
 * The secrets that an `.env` made for an earlier cluster still holds. What it does not hold is made new.
 *
 * @param {Record<string, string>} made the made part of the `.env`
 * @returns {Secrets | undefined} undefined when it holds no master key
 */
export function secretsFromEnvironment(made) {
  const masterKey = made.HALESIDE_MASTER_KEY;
  if (!masterKey || Buffer.from(masterKey, "base64").length !== 32) return undefined;
  const fresh = makeSecrets();
  return {
    superuser: fresh.superuser,
    owner: passwordOf(made.DATABASE_OWNER_URL) ?? fresh.owner,
    app: passwordOf(made.DATABASE_URL) ?? fresh.app,
    auth: passwordOf(made.DATABASE_AUTH_URL) ?? fresh.auth,
    maintenance: passwordOf(made.DATABASE_MAINTENANCE_URL) ?? fresh.maintenance,
    masterKey,
    betterAuth: made.BETTER_AUTH_SECRET ?? fresh.betterAuth,
    mailKey: made.RESEND_API_KEY ?? fresh.mailKey,
    webhook: made.RESEND_WEBHOOK_SECRET ?? fresh.webhook,
  };
}

/** @param {string | undefined} url */
function passwordOf(url) {
  if (!url || !URL.canParse(url)) return undefined;
  // Only what we make ourselves goes on: it is set in SQL, where a quote would end the text.
  const { password } = new URL(url);
  return /^[\w-]{16,}$/.test(password) ? password : undefined;
}
