import { setTimeout as delay } from "node:timers/promises";
import { pool } from "db/client.server";
import pg from "pg";
import type { JobWithMetadata } from "pg-boss";
import { env } from "~/platform/env.server";
import { logger } from "~/platform/logger.server";
import { startQueue, stopQueue } from "~/platform/queue.server";
import type { JobHandler } from "./job";
import type { QueueName } from "./queues";
import type { Sweep } from "./sweeps.server";

/** First key of the advisory locks that say "this job is being run"; the second is a hash of the job's id. */
const RUNNING = 7_025_003;
/** First key of the advisory locks that keep a sweep to one worker at a time; the second is a hash of its name. */
const SWEEPING = 7_025_004;

/** A job is taken from the queue some milliseconds before its lock is; younger ones are left alone. */
const ORPHAN_AFTER_SECONDS = 5;
const ORPHANS_EVERY_SECONDS = 5;

export type Jobs = {
  /**
   * Takes no more jobs and waits for those that run, at most so long; what is still running then goes back into the
   * queue without counting as a failed try. Safe to call twice.
   */
  stop(milliseconds: number): Promise<void>;
};

type Options = { handlers: readonly JobHandler[]; sweeps: readonly Sweep[]; pollingSeconds?: number };

type Running = { queue: QueueName; id: string; done: Promise<void> };

/**
 * Runs jobs until stopped: every queue by itself, but pictures one at a time, since one alone may take half a
 * gigabyte. While a job runs, this worker holds an advisory lock on its id, which ends with the process however
 * that ends; a job marked as running whose lock nobody holds belonged to a worker that was killed, and is given to
 * another one within seconds instead of when it expires.
 */
export async function runJobs({ handlers, sweeps, pollingSeconds = 0.5 }: Options): Promise<Jobs> {
  const boss = await startQueue({ works: true });
  const locks = new LockConnection();
  const running = new Map<string, Running>();
  const stopping = new AbortController();
  const onePicture = oneAtATime();

  async function run(handler: JobHandler, job: JobWithMetadata<unknown>): Promise<void> {
    const { id } = job;
    const last = job.retryCount >= job.retryLimit;
    await locks.hold(id);
    const started = performance.now();
    try {
      await handler.run(job.data, { attempt: job.retryCount + 1, last, signal: stopping.signal });
      logger.info(
        { job: handler.queue, id, milliseconds: Math.round(performance.now() - started) },
        "job done",
      );
    } catch (error) {
      const level = last ? "error" : "warn";
      logger[level]({ job: handler.queue, id, attempt: job.retryCount + 1, last, err: error }, "job failed");
      throw error;
    } finally {
      await locks.release(id);
    }
  }

  async function take(handler: JobHandler, job: JobWithMetadata<unknown>): Promise<void> {
    const start = async () => {
      if (stopping.signal.aborted) await giveBack(handler.queue, job.id);
      else await run(handler, job);
    };
    const done = handler.imaging ? onePicture(start) : start();
    const entry: Running = { queue: handler.queue, id: job.id, done };
    running.set(job.id, entry);
    try {
      await done;
    } finally {
      running.delete(job.id);
    }
  }

  for (const handler of handlers) {
    await boss.work(
      handler.queue,
      { pollingIntervalSeconds: pollingSeconds, batchSize: 1, includeMetadata: true },
      async (jobs) => {
        for (const job of jobs) await take(handler, job);
      },
    );
  }

  const orphans: Sweep = {
    name: "orphaned-jobs",
    everySeconds: ORPHANS_EVERY_SECONDS,
    run: () => reviveOrphans(handlers.map((handler) => handler.queue)),
  };
  const sweeping = [orphans, ...sweeps].map((sweep) => sweepUntil(stopping.signal, sweep));

  let stopped: Promise<void> | undefined;
  return {
    stop(milliseconds) {
      stopped ??= (async () => {
        stopping.abort();
        await Promise.all(handlers.map((handler) => boss.offWork(handler.queue)));
        const ended = Promise.allSettled([...[...running.values()].map((entry) => entry.done), ...sweeping]);
        const waited = new AbortController();
        await Promise.race([
          ended,
          delay(milliseconds, undefined, { signal: waited.signal }).catch(() => undefined),
        ]);
        waited.abort();
        const unfinished = [...running.values()];
        // Stopping fails what still runs, which may even have been its last try; giving back undoes that.
        await stopQueue(1_000);
        for (const entry of unfinished) await giveBack(entry.queue, entry.id);
        await locks.end();
      })();
      return stopped;
    },
  };
}

/** Puts a job of this worker back as if it had not been taken. pg-boss itself can only fail it, which counts as a try. */
async function giveBack(queue: QueueName, id: string): Promise<void> {
  await pool.query(
    `update pgboss.job set state = 'retry', started_on = null, completed_on = null, start_after = now()
      where name = $1 and id = $2 and state in ('active', 'retry', 'failed')`,
    [queue, id],
  );
}

/** Finds jobs whose worker was killed and fails that try, so that the queue's own limit of tries still holds. */
async function reviveOrphans(queues: QueueName[]): Promise<void> {
  const { rows } = await pool.query<{ id: string; name: QueueName }>(
    `select j.id, j.name from pgboss.job j
      where j.state = 'active' and j.name = any($1) and j.started_on < now() - make_interval(secs => $2)
        and not exists (
          select from pg_locks l
           where l.locktype = 'advisory' and l.objsubid = 2 and l.classid::bigint = $3
             and l.objid::bigint = (hashtext(j.id::text)::bigint & 4294967295)
             and l.database = (select oid from pg_database where datname = current_database()))`,
    [queues, ORPHAN_AFTER_SECONDS, RUNNING],
  );
  const boss = await startQueue();
  for (const { id, name } of rows) {
    logger.warn({ job: name, id }, "the worker that ran this job has gone; it is tried again");
    await boss.fail(name, id, { message: "the worker that ran it has gone" });
  }
}

/** Runs a sweep again and again, in one worker at a time. */
async function sweepUntil(signal: AbortSignal, sweep: Sweep): Promise<void> {
  while (!signal.aborted) {
    try {
      await ifNobodyElse(sweep.name, sweep.run);
    } catch (error) {
      logger.error({ sweep: sweep.name, err: error }, "sweep failed");
    }
    await delay(sweep.everySeconds * 1000, undefined, { signal }).catch(() => undefined);
  }
}

async function ifNobodyElse(name: string, work: () => Promise<void>): Promise<void> {
  const client = await pool.connect();
  let broken: Error | undefined;
  try {
    const { rows } = await client.query<{ mine: boolean }>(
      "select pg_try_advisory_lock($1, hashtext($2)) as mine",
      [SWEEPING, name],
    );
    if (rows[0]?.mine !== true) return;
    try {
      await work();
    } finally {
      await client.query("select pg_advisory_unlock($1, hashtext($2))", [SWEEPING, name]);
    }
  } catch (error) {
    broken = error instanceof Error ? error : new Error(String(error));
    throw error;
  } finally {
    // A connection that may still hold the lock is closed, which lets it go.
    client.release(broken);
  }
}

/** A connection of its own for locks that last as long as a job: those of a pooled one would be lost from sight. */
class LockConnection {
  #client: Promise<pg.Client> | undefined;
  /** One connection asks one thing at a time. */
  readonly #inTurn = oneAtATime();

  async #connection(): Promise<pg.Client> {
    this.#client ??= (async () => {
      const client = new pg.Client({
        connectionString: env.DATABASE_URL,
        connectionTimeoutMillis: 5_000,
        application_name: "numberleaf worker",
      });
      const forget = () => {
        this.#client = undefined;
      };
      client.on("error", forget);
      client.on("end", forget);
      await client.connect();
      return client;
    })().catch((error: unknown) => {
      this.#client = undefined;
      throw error;
    });
    return this.#client;
  }

  async hold(jobId: string): Promise<void> {
    await this.#ask("select pg_advisory_lock_shared($1, hashtext($2))", jobId);
  }

  #ask(sql: string, jobId: string): Promise<unknown> {
    return this.#inTurn(async () => (await this.#connection()).query(sql, [RUNNING, jobId]));
  }

  async release(jobId: string): Promise<void> {
    try {
      await this.#ask("select pg_advisory_unlock_shared($1, hashtext($2))", jobId);
    } catch (error) {
      // With the connection the lock has gone as well.
      logger.warn({ err: error }, "a lock went with its connection");
    }
  }

  async end(): Promise<void> {
    const client = await this.#client?.catch(() => undefined);
    await client?.end();
  }
}

/** Queues work so that no two pieces overlap. */
function oneAtATime(): <T>(work: () => Promise<T>) => Promise<T> {
  let last: Promise<unknown> = Promise.resolve();
  return (work) => {
    const next = last.then(work, work);
    last = next.catch(() => undefined);
    return next;
  };
}
