import { masterKey } from "~/platform/crypto/keys.server";
import { keyOpens } from "~/platform/crypto/sealing.server";
import { queueAnswers } from "~/platform/jobs/queue.server";
import { rawClient } from "~db/client.server";

const checks: Record<string, () => Promise<boolean>> = {
  database: async () => (await rawClient()`select 1 as one`).length === 1,
  queue: queueAnswers,
  key: async () => {
    const [row] = await rawClient()<{ value: string }[]>`
      select value from installation.key_check where name = 'master'`;
    return row !== undefined && keyOpens(masterKey(), row.value);
  },
};

/** Each check by name: what is wrong is said, why is in the log. */
export async function checkHealth() {
  const results = await Promise.all(
    Object.entries(checks).map(async ([name, check]) => {
      const passed = await check().catch(() => false);
      return [name, passed ? "ok" : "failing"] as const;
    }),
  );
  return { ok: results.every(([, state]) => state === "ok"), checks: Object.fromEntries(results) };
}
