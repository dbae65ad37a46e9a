import { readdir } from "node:fs/promises";
import { fileURLToPath, pathToFileURL } from "node:url";
import sharp from "sharp";
import type { JobHandler } from "../app/jobs/job";
import { runJobs } from "../app/jobs/run-jobs.server";
import { SWEEPS } from "../app/jobs/sweeps.server";
import { logger } from "../app/platform/logger.server";
import { pool } from "../db/client.server";

/*
 * The worker process: takes jobs from the queue until it is asked to stop. Any number may run, on any machines.
 */

/** The start command allows ten seconds from SIGTERM to the end; the rest is for giving back what did not finish. */
const FINISH_WITHIN_MS = 4_000;

const JOBS_FOLDER = new URL("../app/jobs/", import.meta.url);

/** Every `app/jobs/<name>.handler.server.ts` exports one `handler`. */
async function loadHandlers(): Promise<JobHandler[]> {
  const files = (await readdir(fileURLToPath(JOBS_FOLDER))).filter((name) =>
    name.endsWith(".handler.server.ts"),
  );
  return Promise.all(
    files.sort().map(async (name) => {
      const loaded: { handler?: JobHandler } = await import(new URL(name, JOBS_FOLDER).href);
      if (loaded.handler === undefined) throw new Error(`${name} exports no handler`);
      return loaded.handler;
    }),
  );
}

async function main(): Promise<void> {
  sharp.concurrency(2);
  // Every picture is another one: a cache of decoded pieces would only hold memory.
  sharp.cache(false);
  const handlers = await loadHandlers();
  const jobs = await runJobs({ handlers, sweeps: SWEEPS });
  logger.info({ queues: handlers.map((handler) => handler.queue) }, "worker ready");

  const stop = (signal: NodeJS.Signals) => {
    logger.info({ signal }, "worker stops");
    jobs
      .stop(FINISH_WITHIN_MS)
      .then(() => pool.end())
      .then(
        () => process.exit(0),
        (error: unknown) => {
          logger.error({ err: error }, "worker did not stop cleanly");
          process.exit(1);
        },
      );
  };
  process.on("SIGTERM", stop);
  process.on("SIGINT", stop);
}

if (import.meta.url === pathToFileURL(process.argv[1] ?? "").href) {
  main().catch((error: unknown) => {
    logger.fatal({ err: error }, "worker cannot start");
    process.exit(1);
  });
}
