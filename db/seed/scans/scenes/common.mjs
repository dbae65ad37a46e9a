// Sky, ground and mist shared by the scenes.
import { clamp, mix, smooth, tile } from "../noise.mjs";

/** Pale sky: vertical gradient, a soft source of light, and a little slow cloud. */
export function sky(
  p,
  r,
  { top = 0.5, low = 0.9, at = 0.6, gx = 0.5, gy = 0.5, glow = 0, size = 0.5, cloud = 0.06, to = 1 },
) {
  const n = tile("soft"),
    o = r.next(),
    q = r.next();
  p.wash(
    (x, y) => {
      const d = Math.sqrt(((x - gx * p.A) * 0.7) ** 2 + (y - gy) ** 2) / size;
      const c = 1 + cloud * (n.at(x * 0.16 + o, y * 0.4 + q) + 0.5 * n.at(x * 0.4 + q, y * 1.1 + o));
      return (mix(top, low, smooth(0, at, y)) + glow * Math.exp(-d * d)) * c;
    },
    "set",
    16,
    0,
    to,
  );
}

/** Long-exposure cloud drawn out towards a point at (vx, yh): multiplies or adds light. */
export function streaks(
  p,
  r,
  {
    vx = 0.5,
    yh = 0.7,
    strength = 0.5,
    freq = 0.5,
    along = 0.03,
    lift = 0.14,
    to = yh,
    bias = 0,
    dark = 0.5,
  },
) {
  const n = tile("cloud"),
    s = tile("soft"),
    o = r.next(),
    q = r.next();
  p.wash(
    (x, y) => {
      const d = Math.max(0.02, yh - y + lift),
        u = (x - vx * p.A) / d,
        v = 1 / d;
      const w = s.at(u * 0.1 + q, v * 0.03 + o) * 0.03;
      const c =
        n.at(u * freq * 0.2 + o + w, v * along + q) * 0.75 +
        0.55 * s.at(u * freq * 0.06 + q, v * along * 0.6 + o) +
        bias;
      const k = c * smooth(0, 0.22, yh - y + lift * 0.25) * strength;
      return k > 0 ? 1 + k : 1 / (1 - k * dark * 2);
    },
    "multiply",
    6,
    0,
    to,
  );
}

/** Cloud with some body, lit from (lx, ly), in perspective above yh. */
export function clouds(
  p,
  r,
  { yh = 0.7, light = 0.5, dark = 0.35, cover = 0, scale = 1, to = yh, lx = -0.5, stretch = 1 },
) {
  const n = tile("cloud"),
    s = tile("soft"),
    o = r.next(),
    q = r.next();
  const den = (u, v) =>
    n.at(u * 0.11 * scale + 0.02 * s.at(v * 0.3, u * 0.3) + o, (v * 0.16 * scale) / stretch + q) +
    0.8 * s.at(u * 0.05 * scale + q, v * 0.07 * scale + o) +
    cover;
  p.wash(
    (x, y) => {
      const d = yh - y + 0.16,
        u = (x - 0.5 * p.A) / d,
        v = 1 / d,
        c = den(u, v);
      const body = smooth(-0.3, 1.5, c),
        lit = clamp(0.5 + (c - den(u + lx * 0.22, v - 0.14)) * 0.55);
      return 1 + body * mix(-dark, light, lit);
    },
    "multiply",
    4,
    0,
    to,
  );
}

/** Lay mist over the plate: amount(x, y) of light `tone`. */
export function mist(p, r, { tone, amount, rough = 0.25, y0 = 0, y1 = 1, scale = 1 }) {
  const n = tile("soft"),
    c = tile("cloud"),
    o = r.next(),
    q = r.next();
  p.wash(
    (x, y) => {
      const a = amount(x, y) * p.air;
      return a <= 0
        ? 0
        : clamp(
            a *
              (1 +
                rough *
                  (0.7 * n.at(x * 0.2 * scale + o, y * 0.9 * scale + q) +
                    0.4 * c.at(x * 0.25 * scale + q, y * scale + o))),
          );
    },
    "veil",
    8,
    y0,
    y1,
    tone,
  );
}

/** Rough ground seen in perspective below the horizon yh; returns a value around 0. */
export function groundNoise(r, { yh, freq = 1, A = 1 }) {
  const n = tile("cloud"),
    f = tile("fine"),
    o = r.next(),
    q = r.next();
  return (x, y) => {
    const z = 1 / Math.max(0.004, y - yh),
      X = (x - A / 2) * z;
    let v = 0.5 * n.at(X * 0.06 * freq + o, z * 0.05 * freq + q);
    // finer and finer detail comes in as the ground comes nearer
    for (let k = 0, s = freq, lim = 14; k < 3 && z < lim * 3; k++, s *= 4.3, lim /= 3.6)
      v += clamp((lim / z) * 1.4 - 0.25) * 0.62 * f.at(X * 0.21 * s + q, z * 0.19 * s + o);
    return v;
  };
}
