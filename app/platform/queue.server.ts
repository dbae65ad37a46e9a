import { pool } from "db/client.server";
import type { PoolClient } from "pg";
import PgBoss from "pg-boss";
import { QUEUES, type QueueName } from "~/jobs/queues";
import { env } from "./env.server";
import { logger } from "./logger.server";

let boss: Promise<PgBoss> | undefined;

/** The queue's client; `work` processes also maintain it. Started on first use, stopped by `stopQueue`. */
export function startQueue(options: { works: boolean } = { works: false }): Promise<PgBoss> {
  boss ??= (async () => {
    const client = new PgBoss({
      connectionString: env.DATABASE_URL,
      max: options.works ? 4 : 1,
      migrate: false,
      supervise: options.works,
      schedule: false,
    });
    client.on("error", (error) => logger.error({ err: error.message }, "queue"));
    await client.start();
    return client;
  })().catch((error: unknown) => {
    boss = undefined;
    throw error;
  });
  return boss;
}

/** Lets running jobs end (at most `milliseconds`), then closes the queue. */
export async function stopQueue(milliseconds = 5_000): Promise<void> {
  if (boss === undefined) return;
  const client = await boss;
  boss = undefined;
  await client.stop({ graceful: true, wait: true, timeout: milliseconds });
}

type Enqueue = {
  /** The transaction's connection: the job exists exactly if the change that needs it does. */
  client?: PoolClient;
  startAfter?: Date;
  /** At most one waiting job with this key. */
  singletonKey?: string;
};

/** Adds a job. With `client` it is part of that transaction. Ids and figures only; no personal data. */
export async function enqueue(
  queue: QueueName,
  data: Record<string, unknown>,
  options: Enqueue = {},
): Promise<void> {
  const limits = QUEUES.find((q) => q.name === queue)?.options;
  if (limits === undefined) throw new Error(`unknown queue ${queue}`);
  const connection = options.client ?? pool;
  const client = await startQueue();
  await client.send(queue, data, {
    ...limits,
    ...(options.startAfter === undefined ? {} : { startAfter: options.startAfter }),
    ...(options.singletonKey === undefined ? {} : { singletonKey: options.singletonKey }),
    db: { executeSql: (text, values) => connection.query(text, values) },
  });
}
