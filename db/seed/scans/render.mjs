// One frame of film as 16-bit grey.
import { develop, FORMATS } from "./film.mjs";
import { hash, rng } from "./noise.mjs";
import { Plate } from "./plate.mjs";
import { SCENES } from "./scenes/index.mjs";
import { encodeTiff } from "./tiff.mjs";

export { encodeTiff };

/**
 * @param {import("./render.mjs").RenderJob} job
 * @returns {import("./render.mjs").RenderedScan}
 */
export function render({ scene, seed, width, height, format, lens }) {
  const s = SCENES[scene];
  if (!s) throw new Error(`no scene called ${scene}`);
  const key = hash(scene, seed);
  const plate = new Plate(width, height);
  // weather and exposure wander from frame to frame
  const drift = rng(key ^ 0xe7);
  const look = { seed: key, ...s.look, format, ...(lens && { lens }) };
  look.ev = (look.ev ?? 0) + drift.gauss() * 0.15;
  plate.air = drift.range(0.75, 1.25);
  s.paint(plate, rng(key));
  return {
    data: develop(plate, look),
    width,
    height,
    dpi: Math.max(width, height) / (FORMATS[format] / 25.4),
  };
}
