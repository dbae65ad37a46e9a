// Downs, ridges, ploughland, snow.
import { clamp, mix, smooth, tile } from "../noise.mjs";
import { copse, drawTree, grassEdge, growTree, treeLine } from "../trees.mjs";
import { clouds, groundNoise, mist, sky, streaks } from "./common.mjs";

export const thorn = {
  title: "Thorn, Hag Down",
  aspect: 1,
  look: { format: "6x6", film: "iso125", ev: 0.05, vignette: 0.3, glow: 0.08 },
  paint(p, r) {
    const A = p.A,
      n = tile("soft"),
      c = tile("cloud"),
      o = r.next(),
      right = r.chance(0.35),
      X = (x) => (right ? A - x : x);
    const mood = r.range(0.16, 0.5);
    sky(p, r, {
      top: mood,
      low: 0.98,
      at: 0.82,
      gx: right ? 0.25 : 0.75,
      gy: 0.74,
      glow: 0.35,
      size: 0.5,
      cloud: 0.04,
    });
    streaks(p, r, {
      vx: right ? -r.range(0.2, 0.9) : r.range(1.2, 1.9),
      yh: 0.86,
      strength: r.range(0.25, 0.6),
      freq: r.range(0.6, 0.95),
      along: 0.05,
      to: 0.86,
      dark: 0.6,
    });
    const rise = r.range(0.05, 0.13),
      tx = A * r.range(0.3, 0.5),
      far = (x) => 0.83 - 0.05 * smooth(0.5, 1.3, X(x)) + 0.004 * n.at(x * 0.2, o);
    p.hill(far, (_x, _y, d) => mix(0.36, 0.66, clamp(d / 0.05)));
    p.hill(
      (x) => far(x) + 0.03 - 0.02 * smooth(0.9, 0.2, X(x)),
      (_x, _y, d) => mix(0.2, 0.5, clamp(d / 0.06)),
    );
    const top = (x) =>
      0.815 -
      rise * Math.exp(-(((X(x) - tx + 0.1) / 0.52) ** 2)) +
      rise * 0.9 * smooth(0.5, 1.2, X(x)) +
      0.0035 * n.at(x * 0.5, o) +
      0.001 * c.at(x, o);
    const tree = growTree({
      seed: 80 + r.int(0, 3),
      crown: "wind",
      points: 1500,
      trunk: 0.3,
      lean: 0.34,
      step: 0.015,
      kill: 0.028,
      reach: 0.25,
      pull: [0.22, 0.06, 0],
      tip: 0.00105,
      pipe: 2.12,
      twigs: 3.1,
      twigLen: 0.034,
      wobble: 0.3,
    });
    const g = groundNoise(r, { yh: 0.55, freq: 3, A });
    p.hill(
      top,
      (x, y, d) =>
        0.036 *
        Math.exp(0.42 * g(x, y)) *
        (0.55 + 0.8 * Math.exp(-d / 0.05)) *
        mix(0.8, 1.5, smooth(0, A, X(x))),
    );
    for (let i = 0; i < 30000; i++) {
      const x = r.range(0, A),
        d = 0.3 * r.next() ** 1.2,
        y = top(x) + d,
        s = 0.35 + d * 4,
        a = (right ? -1 : 1) * 0.5 + r.gauss() * 0.4,
        L = 0.012 * s * r.range(0.4, 1.3),
        t = r.pick([0.012, 0.022, 0.045, 0.08, 0.12]) * Math.exp(-d * 3);
      p.stroke(x, y, x + Math.sin(a) * L, y - Math.cos(a) * L, 0.0006 * s, 0.0002 * s, t, t * 1.2, 0.8);
    }
    const bx = X(tx);
    drawTree(p, tree, bx, top(bx) + 0.006, r.range(0.28, 0.4), {
      tone: (_h, z) => 0.006 + 0.02 * Math.max(0, -z),
      flip: right,
      thick: 1.4,
    });
    grassEdge(p, r, top, {
      n: 5200,
      len: 0.017,
      tone: [0.01, 0.06],
      lean: right ? -0.45 : 0.45,
      width: 0.00055,
      drop: 0.012,
    });
  },
};

export const ridges = {
  title: "Chalk Ridges, First Light",
  aspect: 1.5,
  look: { format: "6x9", film: "iso50", ev: 0.05, contrast: 1.0, vignette: 0.2, glow: 0.1 },
  paint(p, r) {
    const A = p.A,
      n = tile("soft"),
      c = tile("cloud"),
      sx = A * r.range(0.6, 0.72),
      sy = r.range(0.27, 0.31);
    r.next();
    sky(p, r, { top: 0.3, low: 1.0, at: 0.4, gx: sx / A, gy: sy, glow: 0.9, size: 0.34, cloud: 0.05 });
    streaks(p, r, { vx: 1.8, yh: 0.4, strength: 0.2, freq: 0.5, along: 0.05, to: 0.4, lift: 0.1 });
    const N = 9;
    for (let i = 0; i < N; i++) {
      const t = i / (N - 1),
        base = mix(0.335, 0.9, t ** 1.12),
        amp = mix(0.016, 0.055, t),
        q = r.next(),
        f = mix(0.12, 0.06, t);
      const top = (x) =>
        base +
        amp * (1.15 * n.at(x * f * 1.25 + q, q * 3) + 0.18 * n.at(x * f * 3 + q, q)) +
        0.0012 * (1 - t * 0.4) * c.at(x * 0.5, q) -
        0.04 * t * smooth(0.75, 0, x / A) * (i % 2 ? 1 : -0.6);
      // the next ridge always covers this one from here down
      const next = (i + 1) / (N - 1),
        hidden = i < N - 1 ? mix(0.335, 0.9, next ** 1.12) + 4.6 * mix(0.016, 0.055, next) + 0.05 : 1;
      const dark = 0.8 * Math.exp(-t * 3.5) - 0.008,
        span = mix(0.05, 0.16, t),
        air = mix(0.95, 0.5, t);
      const near = (x) => Math.exp(-(((x - sx) / 0.55) ** 2));
      const toneAt = (x) => dark * (1 + 0.5 * near(x) * (1 - t)),
        sz = mix(0.007, 0.034, t ** 1.6),
        f2 = tile("fine");
      if (i > 0) {
        copse(p, r, (x) => top(x) + 0.001, { size: sz * 0.8, vary: 0.7, gap: 5, tone: toneAt });
        for (let k = 0; k < 4; k++) {
          const a = r.range(-0.1, A),
            w = r.range(0.04, 0.3);
          copse(p, r, (x) => top(x) + 0.001, {
            from: a,
            to: a + w,
            size: sz,
            vary: 0.5,
            gap: 0.3,
            tone: toneAt,
          });
        }
      }
      p.hill(
        top,
        (x, _y, d) =>
          toneAt(x) *
          Math.exp(
            (0.1 + 0.22 * t) * (c.at(x * 0.3 + q, d * 1.6 + q) * 0.7 + 0.5 * f2.at(x * 0.9, d * 3.2 + q)),
          ) *
          mix(1.12, 0.9, smooth(0, 0.03, d)),
        hidden,
      );
      // fields and hangers further down the slope, sinking into the mist
      for (let k = 0; k < (i > 0 ? 5 : 0); k++) {
        const a = r.range(-0.2, A),
          w = r.range(0.1, 0.5),
          dd = span * r.range(0.1, 0.85),
          fall = r.gauss() * 0.16;
        copse(p, r, (x) => top(x) + Math.max(0.003 + sz * 0.3, dd + fall * (x - a)), {
          from: a,
          to: a + w,
          size: sz * r.pick([0.32, 0.4, 1]),
          vary: 0.6,
          gap: r.pick([0.16, 0.2, 0.7]),
          tone: dark * 0.72,
          alpha: 0.75,
        });
      }
      if (i < N - 1)
        mist(p, r, {
          tone: air,
          amount: (x, y) => {
            const d = y - top(x) + 0.012 * n.at(x * 0.25 + q, 0.2);
            return (
              (0.62 + 0.3 * near(x)) * mix(1, 0.5, t) * smooth(span * 0.1, span * 1.05, d) +
              mix(0.1, 0, t) * smooth(0, 0.02, d)
            );
          },
          rough: 0.35,
          scale: 1.2,
          y0: base - amp * 4,
          y1: hidden,
        });
    }
    p.map((_x, y, v) => v * (1 - 0.55 * smooth(0.86, 1, y)), 0.84, 1);
  },
};

export const snow = {
  title: "Wall and Snowfield",
  aspect: 1.25,
  look: { format: "6x7", film: "iso125", ev: 0.2, contrast: 1.05, vignette: 0.18, glow: 0.05 },
  paint(p, r) {
    const A = p.A,
      n = tile("soft"),
      c = tile("cloud"),
      f = tile("fine"),
      o = r.next(),
      flip = r.chance(0.4),
      X = (x) => (flip ? A - x : x);
    sky(p, r, { top: 0.27, low: 0.66, at: 0.46, gx: 0.3, gy: 0.4, glow: 0.1, cloud: 0.07 });
    const brow = (x) =>
      0.4 -
      0.075 * Math.exp(-(((X(x) - A * 0.72) / 0.5) ** 2)) +
      0.03 * smooth(0.4, 0, X(x)) +
      0.002 * n.at(x * 0.4, o);
    treeLine(p, r, (x) => brow(x) + 0.02, {
      from: X(A * 0.05) - 0.3,
      to: X(A * 0.05) + 0.45,
      size: 0.03,
      tone: 0.45,
      fill: 0.5,
      gap: 0.5,
    });
    const tx = X(A * r.range(0.66, 0.72));
    drawTree(
      p,
      growTree({
        seed: 90 + r.int(0, 2),
        crown: "broad",
        points: 1100,
        trunk: 0.22,
        kill: 0.036,
        tip: 0.001,
        pipe: 2.2,
        twigs: 3.2,
        twigLen: 0.05,
      }),
      tx,
      brow(tx) + 0.004,
      r.range(0.2, 0.24),
      { tone: 0.035, flip, thick: 1.1 },
    );
    // drifted snow: low sun from the left models the surface
    const hgt = (x, y) => {
      const z = 1 / (y - 0.22);
      return (
        0.8 * n.at((x - A / 2) * z * 0.05 + o, z * 0.12 + o) +
        0.22 * c.at((x - A / 2) * z * 0.09, z * 0.35 + o)
      );
    };
    p.hill(brow, (x, y, d) => {
      const e = 0.004,
        s = (hgt(x + e, y) - hgt(x - e, y)) * 0.9;
      const l =
        0.98 -
        0.17 * smooth(0, 0.5, d) +
        clamp(-s * 0.9, -0.22, 0.16) +
        0.02 * f.at(x * 1.7, y * 2.3) * smooth(0.02, 0.3, d);
      return l * mix(0.9, 1, smooth(0, 0.05, d));
    });
    // a dry wall sweeps up to the tree and on along the brow
    const tX = X(tx),
      y0 = r.range(0.6, 0.72),
      bow = r.range(1.2, 1.55),
      pts = [];
    for (let x = -0.04; x < tX + 0.015; ) {
      const t = clamp((x + 0.04) / (tX + 0.05)),
        e = 1 - (1 - t) ** bow,
        h = mix(0.082, 0.017, e ** 0.8);
      pts.push([X(x), mix(y0, brow(X(tX)) + 0.008, e) + 0.005 * n.at(x * 0.5 + o, 0.2) * (1 - e), h]);
      x += h * 0.09;
    }
    for (let x = tX + 0.015; x < A + 0.04; x += 0.0018)
      pts.push([X(x), brow(X(x)) + 0.007 + 0.012 * smooth(tX, A, x), 0.017]);
    const air = (h) => clamp(1 - h / 0.085) * 0.4;
    for (const [x, y, h] of pts)
      p.dab(x + (flip ? -0.3 : 0.3) * h, y + h * 0.12, h * 1.5, h * 0.34, 0.4, 0.05, 1);
    const lid = ([x, y, h]) => y - h * (0.95 + 0.04 * c.at(x * 1.3, o));
    for (let i = 0; i + 3 < pts.length; i += 2) {
      const a = pts[i],
        b = pts[i + 3];
      p.poly(
        [
          [
            [a[0], a[1]],
            [a[0], lid(a)],
            [b[0], lid(b)],
            [b[0], b[1]],
          ],
        ],
        mix(0.014, 0.5, air(a[2])),
      );
    }
    for (const [x, y, h] of pts) {
      const rows = h > 0.03 ? 6 : 4;
      for (let k = 0; k < rows; k++) {
        if (r.chance(0.68)) continue;
        const hh = (h / rows) * 0.56,
          ww = hh * r.range(0.9, 2.3),
          cx = x + r.gauss() * h * 0.12,
          cy = y - ((h * (k + 0.5)) / rows) * 0.95,
          lit = mix(r.pick([0.03, 0.05, 0.08, 0.13]), 0.55, air(h)),
          m = 8,
          turn = r.next(),
          poly = [];
        for (let q = 0; q < m; q++) {
          const u = ((q + turn) / m) * 6.283,
            cu = Math.cos(u),
            su = Math.sin(u);
          poly.push([
            cx + Math.sign(cu) * Math.abs(cu) ** 0.6 * ww * r.range(0.86, 1.06),
            cy + Math.sign(su) * Math.abs(su) ** 0.6 * hh * r.range(0.84, 1.06),
          ]);
        }
        p.poly(
          [poly],
          (xx, yy) => lit * Math.exp(0.3 * f.at(xx * 2.4, yy * 2.4)) * (0.75 + 0.5 * clamp((cy - yy) / hh)),
        );
        if (r.chance(0.12)) p.dab(cx, cy - hh * 0.9, ww * 0.7, hh * 0.22, 0.85, 0.85, 0.5);
      }
    }
    for (const [x, y, h] of pts) {
      // snow on the copings and drifted against the foot
      const top = lid([x, y, h]) - h * 0.02;
      if (c.at(x * 2.1 + o, 0.6) > -0.9)
        p.dab(x, top, h * 0.3, h * (0.1 + 0.04 * c.at(x * 3, 0.1)), 1.04, 0.7, 0.5);
      const d = c.at(x * 0.8 + o, 0.3);
      p.dab(x, y + h * 0.1, h * 0.4, h * clamp(0.17 + 0.1 * d, 0.07, 0.42), 0.95, 0.3, 0.8);
    }
    for (let i = 0; i < 260; i++) {
      const x = X(A * r.range(0, 0.75)),
        y = r.range(0.8, 1.0),
        s = (y - 0.4) * 1.3,
        a = -1.57 + r.gauss() * 0.5,
        L = 0.022 * s * r.range(0.3, 1);
      if (n.at(x * 0.6 + o, y) < 0.55) continue;
      p.stroke(x, y, x + Math.cos(a) * L, y + Math.sin(a) * L, 0.0008 * s, 0.0003 * s, 0.12);
    }
  },
};

export const furrows = {
  title: "Winter Plough, Weather Coming",
  aspect: 1,
  look: { format: "6x6", film: "iso125", ev: 0.1, contrast: 1.1, vignette: 0.34, glow: 0.07 },
  paint(p, r) {
    const A = p.A,
      yh = r.range(0.56, 0.62),
      vx = A * r.range(0.4, 0.6),
      n = tile("soft"),
      c = tile("cloud"),
      f = tile("fine"),
      o = r.next();
    sky(p, r, { top: 0.2, low: 0.95, at: yh * 1.02, gx: vx / A, gy: yh, glow: 0.5, size: 0.35, cloud: 0.03 });
    clouds(p, r, { yh, light: 0.6, dark: 0.62, scale: 1.5, stretch: 0.55, cover: 0.1 });
    streaks(p, r, { vx: vx / A, yh, strength: 0.35, freq: 0.6, along: 0.02, to: yh });
    copse(p, r, () => yh - 0.002, { size: 0.014, vary: 0.8, tone: 0.2, gap: 0.3 });
    const tx = A * (vx > A / 2 ? r.range(0.26, 0.36) : r.range(0.64, 0.74));
    const horizon = (x) => yh - 0.008 * Math.exp(-(((x - tx) / 0.4) ** 2)) + 0.001 * c.at(x * 0.3, o);
    drawTree(
      p,
      growTree({
        seed: 100 + r.int(0, 2),
        crown: "round",
        points: 900,
        trunk: 0.26,
        kill: 0.04,
        tip: 0.0011,
        twigs: 3.2,
      }),
      tx,
      yh - 0.004,
      0.14,
      { tone: 0.012, thick: 1.1 },
    );
    const px = p.h;
    p.hill(horizon, (x, y) => {
      const d = y - yh + 0.016,
        z = 0.42 / d,
        X = (x - vx) * z,
        w = X * 10.5 + 0.35 * n.at(X * 0.05 + o, z * 0.03) + 0.07 * c.at(X * 0.3, z * 0.2 + o);
      const per = px / (z * 10.5),
        keep = smooth(2, 7, per),
        ph = w - Math.floor(w),
        k = Math.floor(w);
      // each turned slice has a lit face, a crest and a dark furrow
      const face = ph < 0.62 ? 0.28 + 0.95 * smooth(0.02, 0.5, ph) : mix(0.75, 0.1, smooth(0.62, 0.8, ph));
      const clod =
        f.at(X * 0.5 + k * 0.37, z * 0.8 + o) * 0.34 +
        c.at(X * 0.9 + k * 0.21, z * 1.1) * 0.34 +
        f.at(X * 1.9 + k * 0.17, z * 2.6) * 0.42 * clamp(3.2 / z);
      const sheen = 1 + 1.7 * Math.exp(-(((x - vx) / 0.2) ** 2)) * Math.exp(-d / 0.12);
      const tone = 0.075 * mix(0.62, face, keep) * Math.exp(clod * 0.75 * clamp(9 / z)) * sheen;
      return mix(tone, 0.3, Math.exp(-d / 0.025) * 0.75);
    });
    // clods along the crests, each with its lit top and its shadow
    for (let i = 0; i < 15000; i++) {
      const d = 0.05 + (1.02 - yh) * r.next() ** 0.9,
        z = 0.42 / d,
        y = yh - 0.016 + d,
        x = r.range(0, A),
        X = (x - vx) * z;
      const w = X * 10.5 + 0.35 * n.at(X * 0.05 + o, z * 0.03) + 0.07 * c.at(X * 0.3, z * 0.2 + o),
        ph = w - Math.floor(w);
      if (ph > 0.66 && r.chance(0.85)) continue;
      const s = (0.0024 / z) * Math.exp(r.gauss() * 0.4),
        sheen = 1 + 1.7 * Math.exp(-(((x - vx) / 0.2) ** 2)) * Math.exp(-d / 0.12),
        t = 0.16 * sheen * Math.exp(r.gauss() * 0.4);
      p.dab(x + s * 0.5, y + s * 0.5, s * 1.3, s * 0.8, 0.012, 0.6, 0.5);
      p.dab(x, y, s * r.range(0.8, 1.4), s * 0.62, t * 0.4, 0.85, 0.3);
      p.dab(x - s * 0.15, y - s * 0.22, s * 0.8, s * 0.26, t, 0.55, 0.6);
    }
    mist(p, r, {
      tone: 0.7,
      amount: (_x, y) => 0.4 * Math.exp(-(((y - yh - 0.004) / 0.014) ** 2)),
      y0: yh - 0.05,
      y1: yh + 0.06,
    });
  },
};
