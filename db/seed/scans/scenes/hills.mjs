// Downs, ridges, ploughland, snow.
import { clamp, mix, rng, smooth, tile } from "../noise.mjs";
import { copse, drawTree, grassEdge, growTree, hanger, limbLight } from "../trees.mjs";
import { clouds, groundNoise, mist, sky, streaks } from "./common.mjs";

export const thorn = {
  look: { ev: 0.05, vignette: 0.3, glow: 0.08 },
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
    const rise = r.range(0.05, 0.1);
    const tx = A * r.range(0.32, 0.46);
    const wide = 0.78 * Math.sqrt(A);
    // downs beyond, with hedges and hangers, sinking into haze
    const far = (x) => 0.815 - 0.05 * smooth(0.4, 1.35, X(x)) + 0.01 * n.at(x * 0.13, o);
    const mid = (x) => far(x) + 0.042 - 0.03 * smooth(1, 0.2, X(x)) + 0.006 * n.at(x * 0.2 + o, 0.7);
    p.hill(far, (x, _y, d) => mix(0.43, 0.7, clamp(d / 0.045)) * (1 + 0.05 * c.at(x * 0.5, d * 2.4 + o)));
    for (let k = 0; k < 4; k++) {
      const from = r.range(0, A);
      hanger(p, r, far, { from, to: from + r.range(0.06, 0.25), size: 0.011, tone: 0.4, hedge: 0.5 });
      const at = r.range(0.01, 0.03);
      copse(p, r, (x) => far(x) + at, { from, to: from + 0.3, size: 0.0035, tone: 0.46, gap: 0.3 });
    }
    p.hill(mid, (x, _y, d) => mix(0.24, 0.55, clamp(d / 0.07)) * (1 + 0.08 * c.at(x * 0.6 + o, d * 2)));
    for (let k = 0; k < 4; k++) {
      const from = r.range(0, A);
      hanger(p, r, mid, { from, to: from + r.range(0.08, 0.3), size: 0.019, tone: 0.21, hedge: 0.45 });
      const at = r.range(0.012, 0.03);
      copse(p, r, (x) => mid(x) + at, { from, to: from + 0.35, size: 0.005, tone: 0.26, gap: 0.3 });
    }
    mist(p, r, { tone: 0.78, amount: (_x, y) => 0.5 * smooth(0.79, 0.9, y), y0: 0.76, y1: 0.98 });
    const top = (x) =>
      0.82 -
      rise * Math.exp(-(((X(x) - tx + 0.08) / wide) ** 2)) +
      rise * 0.8 * smooth(tx + 0.05, tx + 0.95, X(x)) +
      0.02 * smooth(tx, -0.1, X(x)) +
      0.006 * n.at(x * 0.22, o) +
      0.0012 * c.at(x * 0.8, o);
    const tree = growTree({
      seed: 80 + r.int(0, 3),
      crown: "wind",
      points: 1900,
      trunk: 0.27,
      lean: 0.3,
      step: 0.014,
      kill: 0.026,
      reach: 0.25,
      pull: [0.24, 0.05, 0],
      tip: 0.0008,
      pipe: 2.12,
      twigs: 3,
      twigLen: 0.045,
      wobble: 0.3,
    });
    const g = groundNoise(r, { yh: 0.55, freq: 4.5, A });
    // grazed turf: faint sheep tracks along the slope, lighter where it turns to the sky
    p.hill(top, (x, y, d) => {
      const track = n.at(x * 0.07 + o, d * 2.6 + 0.05 * c.at(x * 0.2, d)) * smooth(0.01, 0.06, d);
      return (
        0.036 *
        Math.exp(0.4 * g(x, y) + 0.22 * track) *
        (0.55 + 0.95 * Math.exp(-d / 0.045)) *
        mix(0.75, 1.6, smooth(0, A, X(x)))
      );
    });
    for (let i = 0; i < 34000; i++) {
      const x = r.range(0, A);
      const d = 0.3 * r.next() ** 1.15;
      const s = 0.45 + d * 3.2;
      const a = (right ? -1 : 1) * 0.5 + r.gauss() * 0.5;
      const L = 0.0062 * s * r.range(0.4, 1.3);
      const t = r.pick([0.012, 0.02, 0.036, 0.06, 0.095]) * Math.exp(-d * 3);
      const y = top(x) + d;
      p.stroke(x, y, x + Math.sin(a) * L, y - Math.cos(a) * L, 0.00042 * s, 0.00016 * s, t, t * 1.2, 0.75);
    }
    const bx = X(tx);
    drawTree(p, tree, bx, top(bx) + 0.006, r.range(0.36, 0.44), {
      tone: (_h, z) => 0.006 + 0.02 * Math.max(0, -z),
      flip: right,
      thick: 1.35,
    });
    grassEdge(p, r, top, {
      n: 9000,
      len: 0.0075,
      tone: [0.01, 0.06],
      lean: right ? -0.45 : 0.45,
      width: 0.00036,
      drop: 0.006,
    });
    // longer tussocks where the sheep do not reach, and at the foot of the tree
    for (let k = 0; k < 26; k++) {
      const at = k < 5 ? bx + r.gauss() * 0.02 : r.range(0, A);
      grassEdge(p, r, top, {
        from: at - 0.008,
        to: at + 0.008,
        n: 26,
        len: r.range(0.009, 0.019),
        tone: [0.008, 0.05],
        lean: right ? -0.4 : 0.4,
        width: 0.00045,
        drop: 0.004,
      });
    }
  },
};

export const ridges = {
  look: { ev: 0.05, contrast: 1.0, vignette: 0.2, glow: 0.1 },
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
    const near = (x) => Math.exp(-(((x - sx) / 0.55) ** 2));
    // all the skylines first, a height for each column, so that what a nearer ridge hides is not painted
    const shape = rng(r.int(0, 1e9));
    const ridge = Array.from({ length: N }, (_, i) => {
      const t = i / (N - 1);
      const base = mix(0.335, 0.9, t ** 1.12);
      const amp = mix(0.016, 0.055, t);
      const f = mix(0.12, 0.06, t);
      const q = shape.next();
      const line = Float32Array.from({ length: p.w }, (_, k) => {
        const x = (k + 0.5) / p.h;
        return (
          base +
          amp * (1.15 * n.at(x * f * 1.25 + q, q * 3) + 0.18 * n.at(x * f * 3 + q, q)) +
          0.0012 * (1 - t * 0.4) * c.at(x * 0.5, q) -
          0.04 * t * smooth(0.75, 0, x / A) * (i % 2 ? 1 : -0.6)
        );
      });
      return { t, q, line };
    });
    const covered = new Float32Array(p.w).fill(1);
    for (let i = N - 1; i >= 0; i--) {
      ridge[i].hidden = covered.slice();
      for (let k = 0; k < p.w; k++) covered[k] = Math.min(covered[k], ridge[i].line[k]);
    }
    for (let i = 0; i < N; i++) {
      const { t, q, line, hidden } = ridge[i];
      const top = (x) => line[Math.max(0, Math.min(p.w - 1, (x * p.h) | 0))];
      const dark = 0.8 * Math.exp(-t * 3.5) - 0.008,
        span = mix(0.05, 0.16, t),
        air = mix(0.95, 0.5, t);
      const toneAt = (x) => dark * (1 + 0.5 * near(x) * (1 - t)),
        sz = mix(0.007, 0.034, t ** 1.6),
        f2 = tile("fine");
      const column = Float32Array.from({ length: p.w }, (_, k) => toneAt(k / p.h));
      if (i > 0) {
        const skyline = (x) => top(x) + 0.0012;
        for (let k = 0; k < 4; k++) {
          const from = r.range(-0.1, A);
          const to = from + r.range(0.05, 0.34);
          if (t < 0.3) copse(p, r, skyline, { from, to, size: sz * 0.8, vary: 0.5, gap: 0.3, tone: toneAt });
          else hanger(p, r, skyline, { from, to, size: sz * 1.25, tone: toneAt, hedge: 0.42, gap: 0.45 });
        }
        // a hedge here and there, and a tree left standing in it
        for (let k = 0; k < 3; k++) {
          const from = r.range(-0.1, A);
          const to = from + r.range(0.2, 0.6);
          copse(p, r, skyline, { from, to, size: sz * 0.26, vary: 0.5, gap: 0.3, tone: toneAt });
          if (t > 0.3)
            hanger(p, r, skyline, { from, to: from + 0.001, size: sz * 1.3, tone: toneAt, hedge: 0 });
        }
      }
      p.hill(
        top,
        (x, _y, d) =>
          column[(x * p.h) | 0] *
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
          y0: line.reduce((a, b) => Math.min(a, b), 1) - 0.02,
          y1: hidden.reduce((a, b) => Math.max(a, b), 0),
        });
    }
    p.map((_x, y, v) => v * (1 - 0.55 * smooth(0.86, 1, y)), 0.84, 1);
  },
};

export const snow = {
  look: { ev: 0.2, contrast: 1.05, vignette: 0.18, glow: 0.05 },
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
    // a far wood, nearly lost
    hanger(p, r, (x) => brow(x) + 0.012, {
      from: flip ? A * 0.55 : -0.1,
      to: flip ? A + 0.1 : A * 0.42,
      size: 0.045,
      tone: 0.47,
      hedge: 0.4,
      gap: 0.35,
    });
    const tx = X(A * r.range(0.66, 0.72));
    drawTree(
      p,
      growTree({
        seed: [92, 96, 98][r.int(0, 2)],
        crown: "broad",
        points: 1500,
        trunk: 0.18,
        step: 0.016,
        kill: 0.028,
        tip: 0.0008,
        pipe: 2.16,
        twigs: 3.4,
        twigLen: 0.04,
        wobble: 0.22,
      }),
      tx,
      brow(tx) + 0.006,
      r.range(0.24, 0.28),
      { tone: (_h, z) => 0.02 + 0.03 * Math.max(0, -z), flip, thick: 1.15 },
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
    // a fence climbs to the tree and goes on along the brow
    const tX = X(tx);
    const y0 = r.range(0.74, 0.84);
    const bow = r.range(1.5, 1.9);
    const posts = [];
    for (let z = 1, k = 0; z < 13; z += 0.62, k++) {
      const near = 1 / z;
      const t = clamp((1 - near) / (1 - 1 / 13));
      const u = mix(-0.03, tX + 0.03, 1 - (1 - t) ** 1.15);
      const e = 1 - (1 - t) ** bow;
      posts.push({
        x: X(u + r.gauss() * 0.004 * near),
        y: mix(y0, brow(X(tX)) + 0.008, e),
        h: 0.15 * near ** 0.92 * r.range(0.93, 1.05),
        w: 0.0062 * near ** 0.92 * r.range(0.85, 1.2),
        tilt: r.gauss() * 0.05 + (k === 4 ? 0.12 : 0),
        air: 0.34 * (1 - near),
      });
    }
    for (let u = tX + 0.03; u < A + 0.05; u += 0.026)
      posts.push({
        x: X(u),
        y: brow(X(u)) + 0.009 + 0.006 * smooth(tX, A, u),
        h: 0.0165 * r.range(0.9, 1.1),
        w: 0.0007,
        tilt: r.gauss() * 0.06,
        air: 0.34,
      });
    const ink = (q, t) => mix(t, 0.8, q.air);
    for (let i = 0; i + 1 < posts.length; i++) {
      const a = posts[i];
      const b = posts[i + 1];
      for (const at of [0.9, 0.6, 0.3]) {
        const wire = [];
        for (let k = 0; k <= 8; k++) {
          const t = k / 8;
          const sag = 0.03 * a.h * 4 * t * (1 - t) * (at < 0.4 ? 1.6 : 1);
          wire.push([
            mix(a.x + a.tilt * a.h * at, b.x + b.tilt * b.h * at, t),
            mix(a.y - a.h * at, b.y - b.h * at, t) + sag,
          ]);
        }
        p.line(wire, a.w * 0.075 + 0.00012, b.w * 0.075 + 0.00012, ink(a, 0.12), 0.85);
      }
    }
    const wood = limbLight(flip ? 1 : -1, 0.4, 0.35);
    const lee = flip ? -1 : 1;
    for (const q of [...posts].reverse()) {
      const lean = q.x + q.tilt * q.h;
      // wind has scoured a hollow round the foot and left a drift beside it
      p.dab(q.x + lee * q.w * 4, q.y + q.h * 0.03, q.w * 7, q.h * 0.05, 0.72, 0.5, 1);
      const pts = [
        [q.x, q.y + q.h * 0.03, q.w],
        [lean, q.y - q.h, q.w * 0.94],
      ];
      const k = r.next();
      p.limb(pts, (u, x, y) => {
        const grain = 0.4 * f.at(u * 0.1 + k, y * 0.9) + 0.3 * f.at(u * 0.35 + x * 0.2, y * 3);
        return ink(q, 0.075 * wood[((u + 1) * 16) | 0] * Math.exp(grain));
      });
      p.dab(lean, q.y - q.h, q.w * 1.05, q.w * 0.75, 0.98, 0.95, 0.4);
      p.dab(q.x - lee * q.w, q.y + q.h * 0.035, q.w * 3.4, q.h * 0.035, 0.97, 0.8, 1);
    }
    // a few stalks of dead grass stand through
    for (let k = 0; k < 7; k++) {
      const at = X(A * r.range(0.05, 0.95));
      const yb = r.range(0.7, 0.97);
      const s = (yb - 0.35) * 1.2;
      for (let i = 0; i < 9; i++) {
        const x = at + r.gauss() * 0.012 * s;
        const y = yb + r.gauss() * 0.004;
        const a = -1.57 + r.gauss() * 0.35;
        const L = 0.03 * s * r.range(0.3, 1);
        p.stroke(x, y, x + Math.cos(a) * L, y + Math.sin(a) * L, 0.0005 * s, 0.0002 * s, 0.2, 0.14, 0.8);
      }
    }
  },
};

export const furrows = {
  look: { ev: 0.1, contrast: 1.1, vignette: 0.34, glow: 0.07 },
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
    hanger(p, r, () => yh - 0.002, { size: 0.02, tone: 0.24, hedge: 0.36, gap: 0.8 });
    mist(p, r, {
      tone: 0.8,
      amount: (_x, y) => 0.3 * smooth(yh - 0.03, yh, y),
      y0: yh - 0.04,
      y1: yh + 0.01,
    });
    const tx = A * (vx > A / 2 ? r.range(0.26, 0.36) : r.range(0.64, 0.74));
    const horizon = (x) => yh - 0.008 * Math.exp(-(((x - tx) / 0.4) ** 2)) + 0.001 * c.at(x * 0.3, o);
    drawTree(
      p,
      growTree({
        seed: [91, 94, 95][r.int(0, 2)],
        crown: "broad",
        points: 1300,
        trunk: 0.2,
        step: 0.016,
        kill: 0.03,
        tip: 0.0009,
        pipe: 2.2,
        twigs: 3.4,
        twigLen: 0.04,
        wobble: 0.22,
      }),
      tx,
      yh - 0.003,
      0.17,
      { tone: 0.012, thick: 1.25 },
    );
    const px = p.h;
    p.hill(horizon, (x, y) => {
      const d = y - yh + 0.016,
        z = 0.42 / d,
        X = (x - vx) * z,
        w = X * 10.5 + 0.35 * n.at(X * 0.05 + o, z * 0.03) + 0.07 * c.at(X * 0.3, z * 0.2 + o);
      // furrows closer than the film can part melt into one tone, along the rows as well as across
      const per = px / (z * 10.5 * Math.sqrt(1 + ((x - vx) / d) ** 2)),
        keep = smooth(2.4, 8, per),
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
      const s = (0.0021 / z) * Math.exp(r.gauss() * 0.55),
        sheen = 1 + 1.7 * Math.exp(-(((x - vx) / 0.2) ** 2)) * Math.exp(-d / 0.12),
        t = 0.16 * sheen * Math.exp(r.gauss() * 0.4);
      p.dab(x + s * 0.5, y + s * 0.5, s * 1.3, s * 0.8, 0.012, 0.6, 0.5);
      p.dab(x, y, s * r.range(0.8, 1.5), s * 0.55, t * 0.42, 0.7, 0.5);
      p.dab(x - s * 0.15, y - s * 0.18, s * r.range(0.6, 1), s * 0.22, t * 0.8, 0.4, 0.8);
    }
    mist(p, r, {
      tone: 0.7,
      amount: (_x, y) => 0.4 * Math.exp(-(((y - yh - 0.004) / 0.014) ** 2)),
      y0: yh - 0.05,
      y1: yh + 0.06,
    });
  },
};
