// One frame of film as a 16-bit grey scan.
import { develop, FORMATS } from "./film.mjs";
import { hash, rng } from "./noise.mjs";
import { Plate } from "./plate.mjs";
import { SCENES } from "./scenes/index.mjs";
import { layTiff } from "./tiff.mjs";

// kept from frame to frame: asking the system for a hundred megabytes each time costs more than clearing them
let canvas = new Float32Array(0);

/**
 * @param {import("./render.mjs").RenderJob} job
 * @returns {import("./render.mjs").RenderedScan}
 */
export function render({ scene, seed, width, height, format, lens }) {
  const s = SCENES[scene];
  if (!s) throw new Error(`no scene called ${scene}`);
  if (canvas.length < width * height) canvas = new Float32Array(width * height);
  const plate = new Plate(width, height, canvas.subarray(0, width * height));
  const key = hash(scene, seed);
  // weather and exposure wander from frame to frame
  const drift = rng(key ^ 0xe7);
  const look = { seed: key, ...s.look, format, ...(lens && { lens }) };
  look.ev = (look.ev ?? 0) + drift.gauss() * 0.15;
  plate.air = drift.range(0.75, 1.25);
  s.paint(plate, rng(key));
  const dpi = Math.max(width, height) / (FORMATS[format] / 25.4);
  const { file, samples } = layTiff(width, height, dpi);
  develop(plate, look, samples);
  return { tiff: file, samples, width, height, dpi };
}
