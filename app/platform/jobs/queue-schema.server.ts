import PgBoss from "pg-boss";
import postgres from "postgres";

export const queueSchema = "jobs";

/** Queues and their retry rules. Each job carries ids only. Made by the migrations, since the app role owns nothing. */
export const queues = {
  deliver: { retryLimit: 0, expireInSeconds: 120, deadLetter: undefined },
  import: { retryLimit: 2, retryDelay: 5, expireInSeconds: 1800, deadLetter: undefined },
  sweep: { retryLimit: 0, expireInSeconds: 120, deadLetter: undefined },
  seal: { retryLimit: 0, expireInSeconds: 300, deadLetter: undefined },
  rollup: { retryLimit: 0, expireInSeconds: 300, deadLetter: undefined },
} as const;

export type QueueName = keyof typeof queues;

/** pg-boss's own queue, through which its clock sends what is due. It would make it itself, but only as the owner. */
const clockQueue = "__pgboss__send-it";

/** Makes or updates the queue's schema as its owner and grants the application what it needs to run it. */
export async function migrateQueue(ownerUrl: string) {
  const boss = new PgBoss({
    connectionString: ownerUrl,
    schema: queueSchema,
    max: 2,
    supervise: false,
    schedule: false,
  });
  boss.on("error", () => {});
  await boss.start();
  for (const [name, { deadLetter: _none, ...options }] of Object.entries(queues)) {
    if (await boss.getQueue(name)) await boss.updateQueue(name, { name, ...options });
    else await boss.createQueue(name, { name, ...options });
  }
  if (!(await boss.getQueue(clockQueue))) await boss.createQueue(clockQueue);
  await boss.stop({ graceful: false, close: true, wait: true });
  const owner = postgres(ownerUrl, { max: 1, onnotice: () => {} });
  try {
    await owner.unsafe(`
      grant usage on schema ${queueSchema} to haleside_app, haleside_maintenance;
      grant select, insert, update, delete on all tables in schema ${queueSchema} to haleside_app, haleside_maintenance;
      grant execute on all functions in schema ${queueSchema} to haleside_app;
    `);
  } finally {
    await owner.end();
  }
}
