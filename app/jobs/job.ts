import type { z } from "zod";
import type { QueueName } from "./queues";

/** A kind of job: its queue and what it is told. Ids and figures only, never personal data. */
export type Job<S extends z.ZodType = z.ZodType> = { queue: QueueName; payload: S };

/** Names a kind of job; lives in `<name>.job.ts`, apart from its handler, so that commands can enqueue it. */
export function defineJob<S extends z.ZodType>(queue: QueueName, payload: S): Job<S> {
  return { queue, payload };
}

export type JobRun = {
  /** 1 at the first try. */
  attempt: number;
  /** Whether the queue gives up if this try fails. */
  last: boolean;
  /** Aborted when the worker is asked to stop. */
  signal: AbortSignal;
};

export type JobHandler = {
  queue: QueueName;
  /** Decodes pictures: one at a time in a worker, whatever its queue. */
  imaging: boolean;
  /** Checks what the job was told and does it. May be run twice for one job, also after it has succeeded. */
  run(data: unknown, about: JobRun): Promise<void>;
};

/** Ties work to a kind of job; exported as `handler` by `<name>.handler.server.ts`, where the worker finds it. */
export function handle<S extends z.ZodType>(
  job: Job<S>,
  work: (payload: z.output<S>, about: JobRun) => Promise<void>,
  options: { imaging?: boolean } = {},
): JobHandler {
  return {
    queue: job.queue,
    imaging: options.imaging ?? false,
    run: async (data, about) => work(job.payload.parse(data), about),
  };
}
