import { sql } from "drizzle-orm";
import PgBoss from "pg-boss";
import { rawClient, type Tx } from "~db/client.server";
import { env } from "../env.server";
import { describeFault } from "../fault.server";
import { log } from "../log.server";
import { type QueueName, queueSchema } from "./queue-schema.server";

let boss: PgBoss | undefined;

/** The job queue of this process, started at first use. It lives in PostgreSQL, so that nothing is lost with a process. */
async function queue() {
  if (boss) return boss;
  const started = new PgBoss({
    connectionString: env().DATABASE_URL,
    schema: queueSchema,
    migrate: false,
    max: 3,
    application_name: "haleside jobs",
  });
  started.on("error", (error) => log.error(describeFault(error), "job queue"));
  await started.start();
  boss = started;
  return started;
}

/**
 * Enqueues a job inside the caller's transaction: it exists exactly when the cause does.
 * @param data ids only
 */
export async function enqueue(
  tx: Tx,
  name: QueueName,
  data: Record<string, string>,
  options: { singletonKey?: string; startAfterSeconds?: number } = {},
) {
  const active = await queue();
  await active.send(name, data, {
    ...(options.singletonKey ? { singletonKey: options.singletonKey } : {}),
    ...(options.startAfterSeconds ? { startAfter: options.startAfterSeconds } : {}),
    db: {
      // pg-boss hands over numbered parameters; postgres.js wants null for undefined and text for JSON.
      async executeSql(text: string, values: unknown[] = []) {
        const prepared = values.map((value) => {
          if (value === undefined) return null;
          if (value instanceof Date) return value.toISOString();
          if (value !== null && typeof value === "object" && !Array.isArray(value))
            return JSON.stringify(value);
          return value;
        });
        const chunks = text.split(/\$(\d+)/);
        const numbers = chunks.filter((_, index) => index % 2 === 1);
        const query = sql.join(
          chunks.map((chunk, index) => {
            if (index % 2 === 0) return sql.raw(chunk);
            const value = prepared[Number(chunk) - 1] as string | null;
            // Each use becomes a parameter of its own. One that is used several times keeps the type of a text, or the
            // database would read "10" as a moment in the branch that is not taken.
            const repeated = numbers.indexOf(chunk) !== numbers.lastIndexOf(chunk);
            return repeated && typeof value === "string" ? sql`${value}::text` : sql`${value}`;
          }),
        );
        const rows = await tx.execute(query);
        return { rows: [...rows], rowCount: rows.length };
      },
    },
  });
}

/** Registers the worker of a queue. A thrown error lets the queue try again by its rules. */
export async function work(name: QueueName, handle: (data: Record<string, string>) => Promise<void>) {
  const active = await queue();
  await active.work<Record<string, string> | null>(
    name,
    { pollingIntervalSeconds: 1, batchSize: 1 },
    async (jobs) => {
      for (const job of jobs) {
        try {
          // A job that its clock has sent carries nothing.
          await handle(job.data ?? {});
        } catch (error) {
          const fault = describeFault(error);
          log.error({ queue: name, ...fault }, "job failed");
          // The queue keeps what is thrown, in clear and outside the organisations' tables.
          throw new Error(Object.values(fault).join(" "));
        }
      }
    },
  );
}

/** Runs a queue's job on a schedule (cron, UTC). */
export async function schedule(name: QueueName, cron: string) {
  const active = await queue();
  await active.schedule(name, cron);
}

/** Whether the queue answers, for health. */
export async function queueAnswers() {
  const rows = await rawClient().unsafe(`select 1 from ${queueSchema}.queue limit 1`);
  return rows.length > 0;
}

export async function stopQueue() {
  await boss?.stop({ graceful: true, close: true, timeout: 10_000 });
  boss = undefined;
}
