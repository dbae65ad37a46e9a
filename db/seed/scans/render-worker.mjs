// A worker thread that renders what it is sent and hands the finished file back without copying it.
import { parentPort } from "node:worker_threads";
import { encodeTiff, render } from "./render.mjs";

parentPort?.on("message", (job) => {
  const scan = render(job);
  const tiff = encodeTiff(scan);
  parentPort?.postMessage({ tiff, dpi: scan.dpi }, [tiff.buffer]);
});
