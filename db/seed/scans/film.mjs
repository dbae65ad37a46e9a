// From linear light on the plate to a scan: optics, exposure, halation, grain, curve, rebate.
import { clamp, grainTile, rng, smooth, tile } from "./noise.mjs";
import { blur, Plate, shrink, spread } from "./plate.mjs";

/** Width of the film area that fills the picture's long side, in millimetres. */
export const FORMATS = {
  35: 36,
  "6x6": 56,
  "6x7": 69,
  "6x9": 84,
  "4x5": 120,
};

/** `grain`: density deviation over a 48 micrometre spot; `clump`: micrometres; `gamma`: curve slope. */
export const FILMS = {
  iso50: { grain: 0.0075, clump: 5, gamma: 1.68 },
  iso125: { grain: 0.011, clump: 8, gamma: 1.6 },
  iso400: { grain: 0.0165, clump: 12, gamma: 1.52 },
};

export function develop(plate, opts) {
  const {
    seed,
    format = "6x7",
    film = "iso125",
    ev = 0,
    contrast = 1,
    grain = 1,
    vignette = 0.22,
    glow = 0.06,
    lens = "good",
    flare = 0.002,
  } = opts;
  const { w, h, px } = plate,
    r = rng(seed ^ 0x51f1),
    long = Math.max(w, h),
    emulsion = FILMS[film];

  if (lens === "pinhole") blur(px, w, h, long * 0.00075);
  else if (long > 900) soften(px, w, h, Math.min(0.16, 0.06 + long / 24000));
  if (lens === "simple") softEdges(px, w, h);
  if (glow > 0) halation(px, w, h, glow);

  // light falls off from a centre that is never quite the middle
  const cx = w * (0.5 + r.range(-0.03, 0.03)),
    cy = h * (0.5 + r.range(-0.03, 0.03));
  const fall = ((lens === "pinhole" ? 1.15 : vignette) * 4) / (w * w + h * h);
  const gain = 2 ** ev,
    n = tile("soft"),
    ox = r.next(),
    oy = r.next();

  const umPerPx = (FORMATS[format] * 1000) / long;
  const sigma = clamp(emulsion.clump / umPerPx, 0.42, 2.6);
  // density noise over one pixel, held back where the pixel is smaller than a clump
  const sd = ((emulsion.grain * 48) / Math.max(umPerPx, emulsion.clump * 1.5)) * 2.3 * grain;
  const a = grainTile(512, sigma, 11),
    b = grainTile(256, Math.min(3.2, sigma * 2.1), 12);
  const oa = r.int(0, 511),
    ob = r.int(0, 255),
    sa = sd * 0.88,
    sb = sd * 0.4;

  const lut = curve(emulsion.gamma * contrast),
    bits = new Uint32Array(px.buffer, px.byteOffset, px.length);
  const out = new Uint16Array(w * h),
    gx = new Float32Array(w);
  for (let i = 0; i < w; i++) gx[i] = (i - cx) * (i - cx);
  for (let j = 0; j < h; j++) {
    const dy = (j - cy) * (j - cy),
      ra = ((j + oa) & 511) * 512,
      rb = ((j + ob) & 255) * 256;
    const uneven = 1 + 0.012 * n.at(ox, oy + (j / h) * 0.4);
    for (let i = 0, k = j * w; i < w; i++, k++) {
      const c = 1 + (gx[i] + dy) * fall;
      const g = a[ra + ((i + ob) & 511)] * sa + b[rb + ((i + oa) & 255)] * sb;
      const m = 1 + g;
      const v = Math.max(px[k], 0);
      px[k] = ((v * gain * uneven) / (c * c) + flare) * Math.max(m, 0.1);
      const q = (bits[k] >>> 12) - BASE;
      out[k] = lut[q < 0 ? 0 : q < lut.length ? q : lut.length - 1];
    }
  }
  return out;
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

/** A light three-tap softening: no lens and no scanner resolves one pixel. */
function soften(px, w, h, k) {
  const prev = new Float32Array(w),
    c = 1 - 2 * k;
  for (let j = 0; j < h; j++) {
    const q = j * w;
    let l = px[q];
    for (let i = 0; i < w - 1; i++) {
      const v = px[q + i];
      px[q + i] = v * c + (l + px[q + i + 1]) * k;
      l = v;
    }
  }
  prev.set(px.subarray(0, w));
  for (let j = 0; j < h - 1; j++) {
    const q = j * w;
    for (let i = 0; i < w; i++) {
      const v = px[q + i];
      px[q + i] = v * c + (prev[i] + px[q + w + i]) * k;
      prev[i] = v;
    }
  }
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

function halation(px, w, h, amount) {
  const k = Math.max(2, Math.round(Math.max(w, h) / 320)),
    { g, gw, gh } = shrink(px, w, h, k);
  const near = g.slice(),
    far = g;
  blur(near, gw, gh, 2.2);
  blur(far, gw, gh, 14);
  for (let i = 0; i < near.length; i++) near[i] = near[i] * 0.55 + far[i] * 0.45;
  spread(near, gw, gh, k, w, h, (q, v) => {
    px[q] += (v - px[q]) * amount;
  });
}

// ---- rebate -------------------------------------------------------------------------------

const STROKES = {
  0: [[0, 0, 1, 0, 1, 2, 0, 2, 0, 0]],
  1: [[0.2, 0.4, 0.6, 0, 0.6, 2]],
  2: [[0, 0, 1, 0, 1, 1, 0, 1, 0, 2, 1, 2]],
  3: [
    [0, 0, 1, 0, 1, 2, 0, 2],
    [0.2, 1, 1, 1],
  ],
  4: [
    [0, 0, 0, 1.2, 1, 1.2],
    [0.75, 0.4, 0.75, 2],
  ],
  5: [[1, 0, 0, 0, 0, 1, 1, 1, 1, 2, 0, 2]],
  6: [[1, 0, 0, 0, 0, 2, 1, 2, 1, 1, 0, 1]],
  7: [[0, 0, 1, 0, 0.4, 2]],
  8: [
    [0, 0, 1, 0, 1, 2, 0, 2, 0, 0],
    [0, 1, 1, 1],
  ],
  9: [[1, 1, 0, 1, 0, 0, 1, 0, 1, 2, 0, 2]],
  ">": [[0, 0.5, 0.9, 1, 0, 1.5, 0, 0.5]],
};

/** Set the picture in its strip of clear film with rough gate edges and edge printing. */
export function addRebate(img, w, h, { frame = 1, seed = 0, width = 0.045 } = {}) {
  const m = Math.round(Math.min(w, h) * width),
    W = w + m * 2,
    H = h + m * 2,
    r = rng(seed ^ 0x7eba),
    n = tile("cloud");
  // both printed edges are drawn on one strip: the upper in its top half, the lower in its bottom half
  const p = new Plate(W, m * 2, 0.0012),
    u = 1 / (m * 2),
    size = m * 0.17 * u;
  const write = (text, x, y) => {
    for (const c of text) {
      for (const s of STROKES[c] ?? []) {
        const at = (i) => [x + s[i] * size, y + s[i + 1] * size];
        for (let i = 0; i + 3 < s.length; i += 2)
          p.stroke(...at(i), ...at(i + 2), size * 0.15, size * 0.15, 0.5);
      }
      x += size * 1.75;
    }
  };
  const x0 = (m + w * r.range(0.12, 0.2)) * u;
  write(String(frame), x0, 0.15);
  write(`>${frame}`, x0 + w * 0.5 * u, 0.15);
  write(">", x0 + w * 0.25 * u, 0.67);
  for (let i = 0; i < 5; i++) {
    const x = (m + w * 0.7 + i * m * 0.2) * u;
    p.stroke(x, 0.7, x, 0.8, 0.015, 0.015, 0.35);
  }
  blur(p.px, W, m * 2, Math.max(0.5, m * 0.012));
  const out = new Uint16Array(W * H),
    g = grainTile(512, 0.7, 11),
    inner = Math.ceil(m * 0.3);
  for (let j = 0; j < H; j++) {
    const strip = j < m ? j : j >= H - m ? j - H + m * 2 : -1,
      plain = j > m + inner && j < H - m - inner;
    for (let i = 0; i < W; i++) {
      if (plain && i === m + inner) i = W - m - inner;
      const v = 0.0032 + (strip < 0 ? 0.0012 : p.px[strip * W + i]) * 0.9;
      out[j * W + i] = 65535 * (v * (1 + 0.12 * g[(j & 511) * 512 + (i & 511)])) ** (1 / 2.2);
    }
  }
  // the gate is a little uneven and its corners are round
  const o = r.next(),
    rad = m * 0.14;
  for (let j = 0; j < h; j++) {
    const l = m * 0.05 * (1 + 0.4 * n.at(o, j / h)),
      rr = m * 0.05 * (1 + 0.4 * n.at(o + 0.5, j / h));
    for (let i = 0; i < w; i++) {
      const t = m * 0.05 * (1 + 0.4 * n.at(i / w, o + 0.2)),
        b = m * 0.05 * (1 + 0.4 * n.at(i / w, o + 0.7));
      let d = Math.min(i - l, w - 1 - rr - i, j - t, h - 1 - b - j);
      const ex = Math.max(l + rad - i, i - (w - 1 - rr - rad)),
        ey = Math.max(t + rad - j, j - (h - 1 - b - rad));
      if (ex > 0 && ey > 0) d = Math.min(d, rad - Math.hypot(ex, ey));
      if (d < -1) continue;
      const a = clamp((d + 1) / 2),
        q = (j + m) * W + i + m;
      out[q] += (img[j * w + i] - out[q]) * a;
      // skip ahead over the plain middle of the row
      if (a === 1 && i > l + rad + 2 && i < w - rr - rad - 4 && j > t + rad + 8 && j < h - b - rad - 8) {
        const stop = Math.floor(w - rr - rad - 4);
        for (i++; i <= stop; i++) out[(j + m) * W + i + m] = img[j * w + i];
        i--;
      }
    }
  }
  return { data: out, width: W, height: H };
}
