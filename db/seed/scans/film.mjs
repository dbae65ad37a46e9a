// From linear light on the plate to a scan: optics, fall-off, halation, grain, curve.
import { clamp, grainTile, rng, smooth, tile } from "./noise.mjs";
import { blur, coarseRow, softened } from "./plate.mjs";

/** Length of the film area that fills the picture's long side, in millimetres (nominal for roll film). */
export const FORMATS = { "6x6": 56, "6x7": 69, "6x9": 84 };

/**
 * A traditional film of ISO 125. `grain`: density deviation over a 48 micrometre spot; `clump`: micrometres;
 * `gamma`: slope of the curve, print included. Plausible figures, not those of any product.
 */
const FILM = { grain: 0.011, clump: 8, gamma: 1.6 };

/**
 * Optics, halation, fall-off, grain and curve in one pass over the rows, written to `out` with a gamma of 2.2.
 * @param {Plate} plate linear light; a pinhole or a simple lens blurs it in place
 * @param {Uint16Array} out one sample for each pixel of the plate
 */
export function develop(plate, opts, out) {
  const {
    seed,
    format,
    ev = 0,
    contrast = 1,
    grain = 1,
    vignette = 0.22,
    glow = 0.06,
    lens = "good",
    flare = 0.0013,
  } = opts;
  const { w, h, px } = plate;
  const r = rng(seed ^ 0x51f1);
  const long = Math.max(w, h);

  if (lens === "pinhole") blur(px, w, h, long * 0.00075);
  if (lens === "simple") softEdges(px, w, h);
  // no lens and no scanner resolves one pixel
  const soft = lens !== "pinhole" && long > 900 ? Math.min(0.16, 0.06 + long / 24000) : 0;
  const halo = halation(px, w, h);

  // light falls off from a centre that is never quite the middle, and development is never quite even
  const cx = w * (0.5 + r.range(-0.03, 0.03));
  const cy = h * (0.5 + r.range(-0.03, 0.03));
  const fall = ((lens === "pinhole" ? 1.15 : vignette) * 4) / (w * w + h * h);
  const n = tile("soft");
  const ox = r.next();
  const oy = r.next();
  const cell = Math.max(1, Math.round(long / 190));
  const gw = Math.ceil(w / cell) + 2;
  const gh = Math.ceil(h / cell) + 2;
  const gains = new Float32Array(gw * gh);
  for (let j = 0; j < gh; j++) {
    const lit = 2 ** ev * (1 + 0.012 * n.at(ox, oy + ((j * cell) / h) * 0.4));
    for (let i = 0; i < gw; i++)
      gains[j * gw + i] = lit / (1 + ((i * cell - cx) ** 2 + (j * cell - cy) ** 2) * fall) ** 2;
  }

  const umPerPx = (FORMATS[format] * 1000) / long;
  const sigma = Math.round(clamp(FILM.clump / umPerPx, 0.42, 2.6) * 100) / 100;
  // density noise over one pixel, held back where the pixel is smaller than a clump
  const sd = ((FILM.grain * 48) / Math.max(umPerPx, FILM.clump * 1.5)) * 2.3 * grain;
  const noise = silver(sigma, sd, r.int(0, 511), r.int(0, 255));

  const lut = curve(Math.round(FILM.gamma * contrast * 1000) / 1000);
  const top = lut.length - 1;
  const light = new Float32Array(w);
  const bits = new Uint32Array(light.buffer);
  const glare = new Float32Array(w);
  const gain = new Float32Array(w);
  let above = new Float32Array(w);
  let here = new Float32Array(w);
  let below = new Float32Array(w);
  softRow(px, 0, w, soft, here);
  above.set(here);
  const keep = (1 - 2 * soft) * (1 - glow);
  const side = soft * (1 - glow);
  for (let j = 0; j < h; j++) {
    if (j + 1 < h) softRow(px, (j + 1) * w, w, soft, below);
    else below.set(here);
    coarseRow(halo.g, halo.gw, halo.k, j, glare);
    coarseRow(gains, gw, cell, j, gain);
    const q = (j & 511) * 512;
    for (let i = 0; i < w; i++) {
      const v = here[i] * keep + (above[i] + below[i]) * side + glare[i] * glow;
      light[i] = (v * gain[i] + flare) * noise[q + (i & 511)];
    }
    const k = j * w;
    for (let i = 0; i < w; i++) {
      const e = (bits[i] >>> 12) - BASE;
      out[k + i] = lut[e < 0 ? 0 : Math.min(e, top)];
    }
    const spare = above;
    above = here;
    here = below;
    below = spare;
  }
}

/** A tile of 512 x 512 factors around 1: fine and coarser clumps of silver, shifted by (oa, ob). */
function silver(sigma, sd, oa, ob) {
  const a = grainTile(512, sigma, 11);
  const b = grainTile(256, Math.round(Math.min(3.2, sigma * 2.1) * 100) / 100, 12);
  const t = new Float32Array(512 * 512);
  for (let j = 0, q = 0; j < 512; j++) {
    const ra = ((j + oa) & 511) * 512;
    const rb = ((j + ob) & 255) * 256;
    for (let i = 0; i < 512; i++, q++)
      t[q] = Math.max(0.1, 1 + sd * (0.88 * a[ra + ((i + ob) & 511)] + 0.4 * b[rb + ((i + oa) & 255)]));
  }
  return t;
}

/** One row through a light three-tap softening. */
function softRow(px, q, w, k, row) {
  const c = 1 - 2 * k;
  row[0] = px[q] * (1 - k) + px[q + 1] * k;
  for (let i = 1; i < w - 1; i++) row[i] = px[q + i] * c + (px[q + i - 1] + px[q + i + 1]) * k;
  row[w - 1] = px[q + w - 1] * (1 - k) + px[q + w - 2] * k;
}

// Curve table addressed by the exponent and top mantissa bits of a float: about 2^-14 to 2^7.
const BASE = (127 - 14) << 11,
  STEPS = 21 << 11,
  curves = new Map();
function curve(gamma) {
  const key = gamma.toFixed(3);
  if (!curves.has(key)) {
    const t = new Uint16Array(STEPS),
      u = new Uint32Array(1),
      f = new Float32Array(u.buffer),
      s = 0.5 ** gamma;
    for (let i = 0; i < STEPS; i++) {
      u[0] = ((i + BASE) << 12) | 0x800;
      const e = f[0] ** gamma,
        lin = 0.0016 + (0.968 * e) / (e + s);
      t[i] = Math.round(65535 * lin ** (1 / 2.2));
    }
    curves.set(key, t);
  }
  return curves.get(key);
}

/** A simple lens: sharp in the middle, softer and softer towards the corners. */
function softEdges(px, w, h) {
  const long = Math.max(w, h);
  const { g, gw, k } = softened(px, w, h, long / 1500, (f, fw, fh, by) =>
    blur(f, fw, fh, (long * 0.0022) / by),
  );
  const row = new Float32Array(w);
  const cx = w / 2;
  const cy = h / 2;
  const inv = 1 / (cx * cx + cy * cy);
  for (let j = 0; j < h; j++) {
    coarseRow(g, gw, k, j, row);
    const dy = (j - cy) * (j - cy);
    const q = j * w;
    for (let i = 0; i < w; i++) {
      const d = ((i - cx) * (i - cx) + dy) * inv;
      if (d > 0.25) px[q + i] += (row[i] - px[q + i]) * smooth(0.25, 0.95, d);
    }
  }
}

/** Light scattered in the film: a near and a wide blur of the plate, mixed. */
function halation(px, w, h) {
  return softened(px, w, h, Math.max(2, Math.max(w, h) / 320), (f, fw, fh) => {
    const far = f.slice();
    blur(f, fw, fh, 2.2);
    blur(far, fw, fh, 14);
    for (let i = 0; i < f.length; i++) f[i] = f[i] * 0.55 + far[i] * 0.45;
  });
}
