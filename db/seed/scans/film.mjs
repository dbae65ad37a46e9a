// From linear light on the plate to a scan: optics, fall-off, halation, grain, curve.
import { clamp, grainTile, rng, smooth, tile } from "./noise.mjs";
import { blur, coarseRow, shrink } from "./plate.mjs";

/** Length of the film area that fills the picture's long side, in millimetres (nominal for roll film). */
export const FORMATS = { "6x6": 56, "6x7": 69, "6x9": 84 };

/**
 * A traditional film of ISO 125. `grain`: density deviation over a 48 micrometre spot; `clump`: micrometres;
 * `gamma`: slope of the curve, print included. Plausible figures, not those of any product.
 */
const FILM = { grain: 0.011, clump: 8, gamma: 1.6 };

/**
 * Optics, halation, fall-off, grain and curve in one pass over the rows. Nothing is written back to the plate.
 * @returns {Uint16Array} gamma 2.2
 */
export function develop(plate, opts) {
  const {
    seed,
    format = "6x7",
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

  // light falls off from a centre that is never quite the middle
  const cx = w * (0.5 + r.range(-0.03, 0.03));
  const cy = h * (0.5 + r.range(-0.03, 0.03));
  const fall = ((lens === "pinhole" ? 1.15 : vignette) * 4) / (w * w + h * h);
  const gain = 2 ** ev;
  const n = tile("soft");
  const ox = r.next();
  const oy = r.next();

  const umPerPx = (FORMATS[format] * 1000) / long;
  const sigma = clamp(FILM.clump / umPerPx, 0.42, 2.6);
  // density noise over one pixel, held back where the pixel is smaller than a clump
  const sd = ((FILM.grain * 48) / Math.max(umPerPx, FILM.clump * 1.5)) * 2.3 * grain;
  const a = scaled(grainTile(512, sigma, 11), sd * 0.88);
  const b = scaled(grainTile(256, Math.min(3.2, sigma * 2.1), 12), sd * 0.4);
  const oa = r.int(0, 511);
  const ob = r.int(0, 255);

  const lut = curve(FILM.gamma * contrast);
  const top = lut.length - 1;
  const out = new Uint16Array(w * h);
  const light = new Float32Array(w);
  const bits = new Uint32Array(light.buffer);
  const glare = new Float32Array(w);
  const gx = new Float32Array(w);
  for (let i = 0; i < w; i++) gx[i] = 1 + (i - cx) * (i - cx) * fall;
  let above = new Float32Array(w);
  let here = new Float32Array(w);
  let below = new Float32Array(w);
  softRow(px, 0, w, soft, here);
  above.set(here);
  const keep = 1 - 2 * soft;
  for (let j = 0; j < h; j++) {
    if (j + 1 < h) softRow(px, (j + 1) * w, w, soft, below);
    else below.set(here);
    coarseRow(halo.g, halo.gw, halo.k, j, glare);
    const dy = (j - cy) * (j - cy) * fall;
    const ra = ((j + oa) & 511) * 512;
    const rb = ((j + ob) & 255) * 256;
    const lit = gain * (1 + 0.012 * n.at(ox, oy + (j / h) * 0.4));
    for (let i = 0; i < w; i++) {
      const v = here[i] * keep + (above[i] + below[i]) * soft;
      const c = gx[i] + dy;
      const m = 1 + a[ra + ((i + ob) & 511)] + b[rb + ((i + oa) & 255)];
      const e = ((v + (glare[i] - v) * glow) * lit) / (c * c);
      light[i] = (Math.max(e, 0) + flare) * Math.max(m, 0.1);
    }
    const k = j * w;
    for (let i = 0; i < w; i++) {
      const q = (bits[i] >>> 12) - BASE;
      out[k + i] = lut[q < 0 ? 0 : Math.min(q, top)];
    }
    const spare = above;
    above = here;
    here = below;
    below = spare;
  }
  return out;
}

function scaled(tileData, k) {
  const d = new Float32Array(tileData.length);
  for (let i = 0; i < d.length; i++) d[i] = tileData[i] * k;
  return d;
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

function softEdges(px, w, h) {
  const soft = px.slice();
  blur(soft, w, h, Math.max(w, h) * 0.0022);
  const cx = w / 2,
    cy = h / 2,
    inv = 1 / (cx * cx + cy * cy);
  for (let j = 0, k = 0; j < h; j++)
    for (let i = 0; i < w; i++, k++) {
      const d = ((i - cx) * (i - cx) + (j - cy) * (j - cy)) * inv;
      if (d > 0.25) px[k] += (soft[k] - px[k]) * smooth(0.25, 0.95, d);
    }
}

/** Light scattered in the film: a near and a wide blur on a coarse grid whose samples lie at multiples of k. */
function halation(px, w, h) {
  const k = Math.max(2, Math.round(Math.max(w, h) / 320));
  const { g: far, gw, gh } = shrink(px, w, h, k);
  const near = far.slice();
  blur(near, gw, gh, 2.2);
  blur(far, gw, gh, 14);
  const W = gw + 2;
  const H = gh + 2;
  const g = new Float32Array(W * H);
  const at = (i, j) => {
    const q = clamp(j, 0, gh - 1) * gw + clamp(i, 0, gw - 1);
    return near[q] * 0.55 + far[q] * 0.45;
  };
  // block centres lie half a block off the grid of samples
  for (let j = 0; j < H; j++)
    for (let i = 0; i < W; i++)
      g[j * W + i] = 0.25 * (at(i - 1, j - 1) + at(i, j - 1) + at(i - 1, j) + at(i, j));
  return { g, gw: W, k };
}
