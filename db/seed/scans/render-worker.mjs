// A worker thread that renders what it is sent and hands the finished file back without copying it.
import { parentPort } from "node:worker_threads";
import { render } from "./render.mjs";

parentPort?.on("message", (job) => {
  const { tiff, dpi } = render(job);
  parentPort?.postMessage({ tiff, dpi }, [tiff.buffer]);
});
