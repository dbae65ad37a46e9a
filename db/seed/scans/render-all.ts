import { Worker } from "node:worker_threads";
import { type CatalogueFrame, type CatalogueRoll, type FrameRef, frameKey, rolls } from "./catalogue";
import type { FilmFormat, RenderJob } from "./render.mjs";

/** One frame, drawn: the file as it would come from the scanner. */
export type FinishedFrame = {
  roll: CatalogueRoll;
  frame: CatalogueFrame;
  /** "203-04" */
  key: string;
  /** "roll-203-frame-04.tif" */
  fileName: string;
  /** 16-bit grey TIFF, uncompressed, Gray Gamma 2.2 profile */
  tiff: Uint8Array<ArrayBuffer>;
  width: number;
  height: number;
  /** pixels per inch of film */
  dpi: number;
};

/** The long side of a frame over its short side. */
const PROPORTION: Record<FilmFormat, number> = { "6x6": 1, "6x7": 1.25, "6x9": 1.5 };

/** Pixel size of a catalogue frame, known before it is drawn. */
export function frameSize(roll: CatalogueRoll, frame: CatalogueFrame): { width: number; height: number } {
  const long = PROPORTION[roll.format];
  return { width: frame.width, height: Math.round(frame.upright ? frame.width * long : frame.width / long) };
}

/** The file name a frame's scan is given. */
export function scanFileName(ref: FrameRef): string {
  return `roll-${frameKey(ref).replace("-", "-frame-")}.tif`;
}

/**
 * Draws every frame of the catalogue (or those named in `only`) on `concurrency` worker threads, the largest
 * first, and hands each over as soon as it is done. The order of arrival varies; the bytes of a frame do not.
 * A slow `onFrame` holds its own thread back after one frame, so finished files never pile up in memory.
 * Rejects with the first error of a worker or of `onFrame`.
 */
export async function renderAll(
  onFrame: (finished: FinishedFrame) => void | Promise<void>,
  options: { concurrency?: number; only?: readonly FrameRef[] } = {},
): Promise<void> {
  const wanted = options.only && new Set(options.only.map(frameKey));
  const jobs = rolls
    .flatMap((roll) =>
      roll.frames.map((frame) => ({ roll, frame, ref: { roll: roll.number, position: frame.position } })),
    )
    .filter((job) => !wanted || wanted.has(frameKey(job.ref)))
    .map((job) => ({ ...job, ...frameSize(job.roll, job.frame) }))
    .sort(
      (a, b) =>
        b.width * b.height - a.width * a.height || a.ref.roll - b.ref.roll || a.ref.position - b.ref.position,
    );
  const lanes = Math.min(options.concurrency ?? 2, jobs.length);
  let failed = false;

  const lane = async () => {
    // no flags inherited: the worker is plain JavaScript and starts quicker without the TypeScript loader
    const worker = new Worker(new URL("./render-worker.mjs", import.meta.url), { execArgv: [] });
    let delivering: Promise<void> = Promise.resolve();
    try {
      for (let job = jobs.shift(); job && !failed; job = jobs.shift()) {
        const { roll, frame, ref, width, height } = job;
        const drawn = await draw(worker, {
          scene: frame.scene,
          seed: frame.seed,
          width,
          height,
          format: roll.format,
          lens: roll.lens,
        });
        await delivering;
        delivering = Promise.resolve(
          onFrame({ roll, frame, key: frameKey(ref), fileName: scanFileName(ref), width, height, ...drawn }),
        );
        // noticed when it is awaited; a rejection in between is not "unhandled"
        delivering.catch(() => undefined);
      }
      await delivering;
    } catch (error) {
      failed = true;
      throw error;
    } finally {
      await worker.terminate();
    }
  };
  const settled = await Promise.allSettled(Array.from({ length: lanes }, lane));
  for (const result of settled) if (result.status === "rejected") throw result.reason;
}

function draw(worker: Worker, job: RenderJob): Promise<{ tiff: Uint8Array<ArrayBuffer>; dpi: number }> {
  return new Promise((resolve, reject) => {
    const done = (message: { tiff: Uint8Array<ArrayBuffer>; dpi: number }) => {
      worker.off("error", reject);
      worker.off("exit", stopped);
      resolve(message);
    };
    const stopped = () => reject(new Error(`The renderer stopped while drawing ${job.scene}.`));
    worker.once("message", done);
    worker.once("error", reject);
    worker.once("exit", stopped);
    worker.postMessage(job);
  });
}
